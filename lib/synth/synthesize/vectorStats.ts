import type { WaveformContent } from '../types';
import { interpolationOf } from './layout';
import { addSamples, closePart, LEVEL_STATE_LENGTH } from './levelState';
import { createSynthesis } from './synthesis';
import type { RenderOptions, StatsCollector, Synthesis, VectorStats } from './types';

const BLOCK_SAMPLES = 65536;

/**
 * Levels of samples given in order: mean power by sums over 128 samples, added with compensation. Silent samples add
 * nothing to power, so the active RMS is the same sum over fewer samples.
 */
export function createStatsCollector(): StatsCollector {
  const state = new Float64Array(LEVEL_STATE_LENGTH);
  return {
    state,
    add: (data, at, count) => addSamples(state, data, at, count),
    stats(activeSamples) {
      closePart(state);
      const samples = state[9]!;
      const total = state[14]! + state[15]!;
      const mean = (sum: number, over: number): number => (over === 0 ? 0 : sum / over);
      return {
        samples,
        activeSamples,
        rms: Math.sqrt(mean(total, samples)),
        activeRms: Math.sqrt(mean(total, activeSamples)),
        samplePeak: Math.sqrt(state[10]!),
        samplePeakAt: state[11]!,
        componentPeak: Math.max(state[12]!, state[13]!),
        dcRe: mean(state[16]! + state[17]!, samples),
        dcIm: mean(state[18]! + state[19]!, samples),
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
  synthesis.rewind();
  while (synthesis.collect(collector, BLOCK_SAMPLES) > 0);
  synthesis.rewind();
  return collector.stats(activeSamplesOf(synthesis));
}

/**
 * Largest |x| of the content rendered at M′ (the least multiple of M that is at least 4): the interpolated peak of the
 * whole file. The content's own rendering gives it where M ≥ 4.
 */
export function interpolatedPeak(
  content: WaveformContent,
  options: Pick<RenderOptions, 'cells' | 'engine'> = {},
): number {
  const oversampling = interpolationOf(content.oversampling);
  return vectorStats(createSynthesis(content, { ...options, oversampling })).samplePeak;
}
