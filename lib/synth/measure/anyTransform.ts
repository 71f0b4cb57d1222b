import { createTransform, isFiveSmooth } from '../fft/transform';
import { writeUnitOfFraction } from '../math/turns';

/** The least 5-smooth whole number that is at least `size`. */
export function nextFiveSmooth(size: number): number {
  let next = Math.max(1, size);
  while (!isFiveSmooth(next)) next++;
  return next;
}

/** output[k] = Σ input[n] e^{−j2πkn/size}, interleaved, 2·size numbers each, not aliased. Not to be used by two callers at once. */
export type ForwardTransform = (input: Float64Array, output: Float64Array) => void;

/**
 * A forward transform of any size 1…2^21: a plain plan where the size is 5-smooth, else a chirp transform around a larger one.
 * Source: Bluestein, "A linear filtering approach to the computation of discrete Fourier transform", IEEE Trans. AU-18, 1970.
 */
export function createAnyTransform(size: number): ForwardTransform {
  if (isFiveSmooth(size)) {
    const plan = createTransform(size);
    return (input, output) => plan.forward(input, output);
  }
  const plan = createTransform(nextFiveSmooth(2 * size - 1));
  const chirp = new Float64Array(2 * size); // e^{+jπn²/size}; n² ≤ 2^42 is exact
  for (let n = 0; n < size; n++) writeUnitOfFraction((n * n) % (2 * size), 2 * size, chirp, 2 * n);
  const work = new Float64Array(2 * plan.size);
  const product = new Float64Array(2 * plan.size);
  const kernel = new Float64Array(2 * plan.size);
  work.set(chirp);
  for (let n = 1; n < size; n++) {
    work[2 * (plan.size - n)] = chirp[2 * n]!;
    work[2 * (plan.size - n) + 1] = chirp[2 * n + 1]!;
  }
  plan.forward(work, kernel);
  return (input, output) => {
    work.fill(0);
    for (let n = 0; n < size; n++) {
      const re = input[2 * n]!;
      const im = input[2 * n + 1]!;
      const cos = chirp[2 * n]!;
      const sin = chirp[2 * n + 1]!;
      work[2 * n] = re * cos + im * sin;
      work[2 * n + 1] = im * cos - re * sin;
    }
    plan.forward(work, product);
    for (let i = 0; i < product.length; i += 2) {
      const re = product[i]!;
      const im = product[i + 1]!;
      product[i] = re * kernel[i]! - im * kernel[i + 1]!;
      product[i + 1] = re * kernel[i + 1]! + im * kernel[i]!;
    }
    plan.inverse(product, work);
    for (let k = 0; k < size; k++) {
      const re = work[2 * k]! / plan.size;
      const im = work[2 * k + 1]! / plan.size;
      const cos = chirp[2 * k]!;
      const sin = chirp[2 * k + 1]!;
      output[2 * k] = re * cos + im * sin;
      output[2 * k + 1] = im * cos - re * sin;
    }
  };
}
