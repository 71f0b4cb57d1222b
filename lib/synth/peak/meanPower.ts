import { createSum } from '../math/sums';
import type { Synthesis } from '../synthesize/types';

const BLOCK_SAMPLES = 32768;

/**
 * Mean |x|² of a rendering over its symbols that are not silent, all repeats: prefixes, ramps and the suffix behind the last symbol in,
 * silent symbols, gap and pad out; 0 when all is silent. Reads the rendering from its first sample to its last. The repeat between
 * first and last counts `weightOfMiddle` times.
 */
export function activeMeanPower(synthesis: Synthesis, weightOfMiddle = 1): number {
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

  synthesis.rewind();
  for (let repeat = 0; repeat < repeats; repeat++) {
    const weight = repeat > 0 && repeat < repeats - 1 ? weightOfMiddle : 1;
    const origin = repeat * repeatSamples;
    let isLoud = false;
    for (let symbol = 0; symbol < symbolCount; symbol++) {
      const start = origin + symbolStarts[symbol]!;
      const useful = start + prefixes[symbol]!;
      const prefixEnergy = sumTo(start, useful);
      const usefulEnergy = sumTo(useful, useful + usefulSamples);
      isLoud = usefulEnergy > 0;
      if (!isLoud) continue;
      energy.add(weight * (prefixEnergy + usefulEnergy));
      samples += weight * (prefixes[symbol]! + usefulSamples);
    }
    const end = repeat === repeats - 1 ? layout.lastActiveSamples : layout.activeSamples;
    if (!isLoud || end === frameSamples) continue;
    energy.add(weight * sumTo(origin + frameSamples, origin + end));
    samples += weight * (end - frameSamples);
  }
  synthesis.rewind();
  return samples === 0 ? 0 : energy.total() / samples;
}
