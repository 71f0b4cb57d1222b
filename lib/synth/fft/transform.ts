import FFT from 'fft.js';
import { demand } from '../errors';
import { createRootsOfUnity } from '../math/turns';
import { createMixedRadix } from './mixedRadix';

/** A discrete Fourier transform of fixed size with its tables. Interleaved Float64Array [re, im, …] of 2·size numbers. */
export interface Transform {
  readonly size: number;
  /** output[n] = Σ input[k] e^{−j2πkn/size}, not scaled. `output` must not be `input`; input is left as it is. */
  forward(input: Float64Array, output: Float64Array): void;
  /** output[n] = Σ input[k] e^{+j2πkn/size}, not scaled. `output` must not be `input`; input is left as it is. */
  inverse(input: Float64Array, output: Float64Array): void;
}

/** True when `size` has no prime factor but 2, 3 and 5. */
export function isFiveSmooth(size: number): boolean {
  if (!Number.isInteger(size) || size < 1) return false;
  let rest = size;
  for (const prime of [2, 3, 5]) while (rest % prime === 0) rest /= prime;
  return rest === 1;
}

/** Turns the order of n = 1…size−1 round: what forward and inverse differ by. */
function reverseInPlace(data: Float64Array, size: number): void {
  for (let low = 2, high = 2 * size - 2; low < high; low += 2, high -= 2) {
    const re = data[low]!;
    const im = data[low + 1]!;
    data[low] = data[high]!;
    data[low + 1] = data[high + 1]!;
    data[high] = re;
    data[high + 1] = im;
  }
}

/**
 * A transform of any size 1…2^22 whose only prime factors are 2, 3, 5; a call allocates nothing. A plan may not be used
 * by two callers at once (it owns scratch space).
 * Throws SynthError `bad_size` for other sizes.
 * Powers of two run on the transform package with its table replaced by exact roots, so that every engine has the same
 * bits; the others on a mixed-radix plan of this library.
 */
export function createTransform(size: number): Transform {
  demand(isFiveSmooth(size) && size <= 4194304, 'bad_size', `No transform of size ${size}: factors 2, 3 and 5 only.`);
  const forward = size >= 4 && (size & (size - 1)) === 0 ? powerOfTwoPlan(size) : createMixedRadix(size, 'forward');
  return {
    size,
    forward,
    inverse(input, output) {
      forward(input, output);
      reverseInPlace(output, size);
    },
  };
}

function powerOfTwoPlan(size: number): (input: Float64Array, output: Float64Array) => void {
  const plan = new FFT(size);
  const table = createRootsOfUnity(size);
  for (let i = 1; i < table.length; i += 2) table[i] = 0 - table[i]!;
  plan.table = Array.from(table); // the package runs 8 % faster on a plain array
  return (input, output) => plan.transform(output, input);
}
