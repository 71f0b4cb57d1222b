declare module 'fft.js' {
  /** Radix-4 transform of a power of two; `table` holds (cos, −sin) of 2πi/size, i = 0…size−1. */
  export default class FFT {
    constructor(size: number);
    table: number[] | Float64Array;
    transform(out: Float64Array, data: Float64Array): void;
  }
}
