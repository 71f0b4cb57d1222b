import { createSum } from '../math/sums';
import type { Synthesis } from '../synthesize/types';

const BLOCK_SAMPLES = 32768;

/** A mean taken a symbol at a time. */
export interface MeanMeasuring {
  readonly totalSteps: number;
  readonly doneSteps: number;
  /** One symbol on; false when nothing is left. */
  step(): boolean;
  /** Only whole after the last step. */
  result(): number;
}

/**
 * Mean |x|² of a rendering over its symbols that are not silent, all repeats: prefixes, ramps and the suffix behind the last symbol in,
 * silent symbols, gap and pad out; 0 when all is silent. Reads the rendering from its first sample to its last. The repeat between
 * first and last counts `weightOfMiddle` times.
 */
export function createActiveMean(synthesis: Synthesis, weightOfMiddle = 1): MeanMeasuring {
  const { layout } = synthesis;
  const { symbolCount, symbolStarts, prefixes, usefulSamples, repeats, repeatSamples, frameSamples } = layout;
  const block = new Float64Array(2 * BLOCK_SAMPLES);
  const energy = createSum();
  let samples = 0;
  let blockStart = 0;
  let blockEnd = 0;

  /** Σ|x|² over the next samples of the file up to `end`. */
  function sumTo(from: number, end: number): number {
    const sum = createSum();
    for (let at = from; at < end;) {
      if (at >= blockEnd) {
        blockStart = blockEnd;
        blockEnd += synthesis.read(block);
        if (blockEnd === blockStart) break;
        continue;
      }
      const stop = Math.min(end, blockEnd);
      for (; at < stop; at++) {
        const re = block[2 * (at - blockStart)]!;
        const im = block[2 * (at - blockStart) + 1]!;
        sum.add(re * re + im * im);
      }
    }
    return sum.total();
  }

  const totalSteps = repeats * symbolCount;
  let done = 0;
  synthesis.rewind();
  return {
    totalSteps,
    get doneSteps() {
      return done;
    },
    step() {
      if (done === totalSteps) return false;
      const symbol = done % symbolCount;
      const repeat = (done - symbol) / symbolCount;
      const weight = repeat > 0 && repeat < repeats - 1 ? weightOfMiddle : 1;
      const origin = repeat * repeatSamples;
      const start = origin + symbolStarts[symbol]!;
      const useful = start + prefixes[symbol]!;
      const prefixEnergy = sumTo(start, useful);
      const usefulEnergy = sumTo(useful, useful + usefulSamples);
      done++;
      if (usefulEnergy === 0) return done < totalSteps;
      energy.add(weight * (prefixEnergy + usefulEnergy));
      samples += weight * (prefixes[symbol]! + usefulSamples);
      const end = repeat === repeats - 1 ? layout.lastActiveSamples : layout.activeSamples;
      if (symbol === symbolCount - 1 && end > frameSamples) {
        energy.add(weight * sumTo(origin + frameSamples, origin + end));
        samples += weight * (end - frameSamples);
      }
      return done < totalSteps;
    },
    result: () => (samples === 0 ? 0 : energy.total() / samples),
  };
}
