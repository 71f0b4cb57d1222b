import type { SaturationCount } from './types';

// adding and taking away 1.5 · 2^52 rounds to a whole number, half to even, for |value| < 2^51
const ROUNDER = 6755399441055744;

/** Rounds to the nearest whole number, half to even; |value| < 2^51. */
export function roundHalfToEven(value: number): number {
  return value + ROUNDER - ROUNDER;
}

/**
 * Integer words of `count` interleaved samples: words[i] = data[i]·scale rounded half to even, saturated at −F−1 and F.
 * `words` takes 2·count numbers and must not share memory with `data`. Adds to `counted`.
 */
export function quantize(
  data: Float64Array,
  count: number,
  scale: number,
  fullScale: number,
  words: Int16Array | Int32Array,
  counted: SaturationCount,
): void {
  const most = fullScale;
  const least = -fullScale - 1;
  const end = 2 * count;
  for (let i = 0; i < end; i += 2) {
    let re = data[i]! * scale + ROUNDER - ROUNDER;
    let im = data[i + 1]! * scale + ROUNDER - ROUNDER;
    if (re > most || re < least || im > most || im < least) {
      counted.samples++;
      if (re > most || re < least) counted.components++;
      if (im > most || im < least) counted.components++;
      re = Math.min(Math.max(re, least), most);
      im = Math.min(Math.max(im, least), most);
    }
    words[i] = re;
    words[i + 1] = im;
  }
}
