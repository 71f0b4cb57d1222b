import { createSum } from '../math/sums';
import type { WaveformContent } from '../types';
import { interpolationOf } from './layout';
import { createSynthesis } from './synthesis';
import type { RenderOptions, Synthesis, VectorStats } from './types';

const BLOCK_SAMPLES = 4096;
const PART_SAMPLES = 128;

/** Collects levels over samples given in order. The blocks' sizes decide no bit: partial sums end at fixed samples. */
export interface StatsCollector {
  /** Takes `count` interleaved samples from data[2·at…]. */
  add(data: Float64Array, at: number, count: number): void;
  /** The levels of all samples so far; `activeSamples` of them are in active spans (the others are zeros). */
  stats(activeSamples: number): VectorStats;
}

/**
 * Levels of samples given in order: mean power by sums over 128 samples, added with compensation. Silent samples add
 * nothing to power, so the active RMS is the same sum over fewer samples.
 */
export function createStatsCollector(): StatsCollector {
  const power = createSum();
  const sumRe = createSum();
  const sumIm = createSum();
  let partPower = 0;
  let partRe = 0;
  let partIm = 0;
  let inPart = 0;
  let samples = 0;
  let peakPower = 0;
  let peakAt = 0;
  let component = 0;
  let componentPower = 0;

  function closePart(): void {
    power.add(partPower);
    sumRe.add(partRe);
    sumIm.add(partIm);
    partPower = 0;
    partRe = 0;
    partIm = 0;
    inPart = 0;
  }

  return {
    add(data, at, count) {
      let done = 0;
      while (done < count) {
        const part = Math.min(count - done, PART_SAMPLES - inPart);
        const end = 2 * (at + done + part);
        let p = partPower;
        let sRe = partRe;
        let sIm = partIm;
        for (let i = 2 * (at + done); i < end; i += 2) {
          const re = data[i]!;
          const im = data[i + 1]!;
          const square = re * re + im * im;
          p += square;
          sRe += re;
          sIm += im;
          // a component can only be a new peak where the magnitude exceeds the old one
          if (square > componentPower) {
            const larger = Math.max(Math.abs(re), Math.abs(im));
            if (larger > component) {
              component = larger;
              componentPower = larger * larger;
            }
            if (square > peakPower) {
              peakPower = square;
              peakAt = samples + (i >> 1) - at;
            }
          }
        }
        partPower = p;
        partRe = sRe;
        partIm = sIm;
        done += part;
        inPart += part;
        if (inPart === PART_SAMPLES) closePart();
      }
      samples += count;
    },
    stats(activeSamples) {
      closePart();
      const total = power.total();
      const mean = (sum: number, over: number): number => (over === 0 ? 0 : sum / over);
      return {
        samples,
        activeSamples,
        rms: Math.sqrt(mean(total, samples)),
        activeRms: Math.sqrt(mean(total, activeSamples)),
        samplePeak: Math.sqrt(peakPower),
        samplePeakAt: peakAt,
        componentPeak: component,
        dcRe: mean(sumRe.total(), samples),
        dcIm: mean(sumIm.total(), samples),
      };
    },
  };
}

/** Samples inside the active spans of a whole file. */
export function activeSamplesOf(synthesis: Pick<Synthesis, 'layout'>): number {
  const { repeats, activeSamples, lastActiveSamples } = synthesis.layout;
  return (repeats - 1) * activeSamples + lastActiveSamples;
}

/** Levels of a whole rendering. Reads it from the first sample to the last and rewinds it. */
export function vectorStats(synthesis: Synthesis): VectorStats {
  const collector = createStatsCollector();
  const block = new Float64Array(2 * BLOCK_SAMPLES);
  synthesis.rewind();
  for (let count = synthesis.read(block); count > 0; count = synthesis.read(block)) collector.add(block, 0, count);
  synthesis.rewind();
  return collector.stats(activeSamplesOf(synthesis));
}

/**
 * Largest |x| of the content rendered at M′ (the least multiple of M that is at least 4): SIGNAL's interpolated peak of the
 * whole file. The content's own rendering gives it where M ≥ 4.
 */
export function interpolatedPeak(content: WaveformContent, options: Pick<RenderOptions, 'cells'> = {}): number {
  const oversampling = interpolationOf(content.oversampling);
  return vectorStats(createSynthesis(content, { ...options, oversampling })).samplePeak;
}
