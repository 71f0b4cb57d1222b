import type { SeamMeasure } from '../fit/types';

/** Samples on either side of the wrap that are kept. */
const AROUND = 64;

/** Takes a rendering block by block, in order. */
export interface SeamCollector {
  /** `count` samples, interleaved re, im; the block stays the caller's. */
  add(block: Float64Array, count: number): void;
  /** Null for an empty or silent file. */
  result(): SeamMeasure | null;
}

/**
 * The steps |x[n+1] − x[n]| inside a file and at its wrap, over the RMS of the file, and the samples around the wrap. Holds 128 samples
 * whatever the length. Steps are those of the file's own samples: the larger the oversampling, the smaller all of them.
 */
export function createSeamCollector(): SeamCollector {
  const first: number[] = [];
  const last = new Float64Array(2 * AROUND);
  let samples = 0;
  let energy = 0;
  let largest = 0;
  let re = 0;
  let im = 0;
  return {
    add(block, count) {
      for (let i = 0; i < count; i++) {
        const nextRe = block[2 * i]!;
        const nextIm = block[2 * i + 1]!;
        if (samples + i > 0) {
          const step = (nextRe - re) * (nextRe - re) + (nextIm - im) * (nextIm - im);
          if (step > largest) largest = step;
        }
        re = nextRe;
        im = nextIm;
        energy += re * re + im * im;
      }
      for (let i = 0; i < count && first.length < 2 * AROUND; i++) first.push(block[2 * i]!, block[2 * i + 1]!);
      const kept = Math.min(AROUND, count);
      last.copyWithin(0, 2 * kept);
      last.set(block.subarray(2 * (count - kept), 2 * count), 2 * (AROUND - kept));
      samples += count;
    },
    result() {
      if (samples === 0 || !(energy > 0)) return null;
      const rms = Math.sqrt(energy / samples);
      const held = Math.min(AROUND, samples);
      const before = last.subarray(2 * (AROUND - held));
      const wrapRe = first[0]! - before[2 * held - 2]!;
      const wrapIm = first[1]! - before[2 * held - 1]!;
      return {
        stepAtWrap: Math.sqrt(wrapRe * wrapRe + wrapIm * wrapIm) / rms,
        stepElsewhere: Math.sqrt(largest) / rms,
        around: [...before, ...first].map((value) => value / rms),
      };
    },
  };
}
