import type { SaturationCount } from './types';

// adding and taking away 1.5 · 2^52 rounds to a whole number, half to even, for |value| < 2^51
const ROUNDER = 6755399441055744;

/**
 * Integer words of `count` interleaved samples: words[i] = data[i]·scale rounded half to even, saturated at −F−1 and F;
 * the second of each pair times `scaleQ` where that is another (−scale negates Q before it saturates).
 * `words` takes 2·count numbers and must not share memory with `data`. Adds to `counted`.
 */
export function quantize(
  data: Float64Array,
  count: number,
  scale: number,
  fullScale: number,
  words: Int16Array,
  counted: SaturationCount,
  scaleQ: number = scale,
): void {
  const most = fullScale;
  const least = -fullScale - 1;
  const rounder = ROUNDER; // a local constant: bundled modules keep theirs in variables
  const end = 2 * count;
  for (let i = 0; i < end; i += 2) {
    const re = data[i]! * scale + rounder - rounder;
    const im = data[i + 1]! * scaleQ + rounder - rounder;
    if (Math.abs(re) > most || Math.abs(im) > most) {
      const isReOver = re > most || re < least;
      const isImOver = im > most || im < least;
      if (isReOver || isImOver) counted.samples++;
      counted.components += (isReOver ? 1 : 0) + (isImOver ? 1 : 0);
      words[i] = Math.min(Math.max(re, least), most);
      words[i + 1] = Math.min(Math.max(im, least), most);
    } else {
      words[i] = re;
      words[i + 1] = im;
    }
  }
}
