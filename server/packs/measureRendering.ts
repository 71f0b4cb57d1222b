import {
  createFrameMeasure,
  createStatsCollector,
  createSynthesis,
  interpolationOf,
  type FrameMeasure,
  type ReferenceLevels,
  type VectorStats,
  type WaveformContent,
} from '@/lib/synth';
import { sampleEngine } from '../sampleEngine.ts';
import { throwIfCancelled } from './packError.ts';
import { createYielder } from './yielder.ts';

/** What the first pass finds: levels in units of x, and the frame's PAPR on the interpolated waveform. */
export interface RenderingMeasure {
  stats: VectorStats;
  levels: ReferenceLevels;
  frame: FrameMeasure;
}

export interface StepOptions {
  signal?: AbortSignal | undefined;
  onProgress?: ((ratio: number) => void) | undefined;
}

const blockSamples = 1 << 15;

/**
 * The levels of a whole rendering, a block at a time, the same bits as lib/synth's own whole measure gives: those are what the
 * drawing table's words are scaled by.
 */
async function collect(content: WaveformContent, oversampling: number, options: StepOptions): Promise<VectorStats> {
  const synthesis = createSynthesis(content, { oversampling, engine: sampleEngine() });
  const collector = createStatsCollector();
  const giveWay = createYielder();
  const { repeats, activeSamples, lastActiveSamples } = synthesis.layout;
  while (synthesis.collect(collector, blockSamples) > 0) {
    throwIfCancelled(options.signal);
    options.onProgress?.(synthesis.position / synthesis.samples);
    await giveWay();
  }
  return collector.stats((repeats - 1) * activeSamples + lastActiveSamples);
}

/** Pass one of a pack: peaks and RMS. */
export async function measureRendering(content: WaveformContent, options: StepOptions = {}): Promise<RenderingMeasure> {
  const interpolation = interpolationOf(content.oversampling);
  const own = 1 / (1 + 2 * (interpolation / content.oversampling));
  const part = (from: number, to: number): StepOptions => ({
    signal: options.signal,
    onProgress: (ratio) => options.onProgress?.(from + (to - from) * ratio),
  });
  const stats = await collect(content, content.oversampling, part(0, own));
  const middle = own + (1 - own) / 2;
  const interpolated =
    interpolation === content.oversampling ? stats : await collect(content, interpolation, part(own, middle));
  const measuring = createFrameMeasure(content, { engine: sampleEngine() });
  const giveWay = createYielder();
  const last = part(middle, 1);
  while (measuring.step()) {
    throwIfCancelled(options.signal);
    last.onProgress?.(measuring.doneSteps / measuring.totalSteps);
    await giveWay();
  }
  return {
    stats,
    levels: {
      interpolatedPeak: interpolated.samplePeak,
      samplePeak: stats.samplePeak,
      componentPeak: stats.componentPeak,
      rms: stats.rms,
    },
    frame: measuring.result(),
  };
}
