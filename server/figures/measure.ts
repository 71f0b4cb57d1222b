import type { MeasuredFigures } from '@/lib/contracts/waveforms';
import {
  createFrameMeasure,
  createSynthesis,
  reconstructedPeak,
  vectorStats,
  type FrameMeasuring,
  type WaveformContent,
} from '@/lib/synth';
import { sampleEngine } from '../sampleEngine.ts';

/** Levels of a whole rendering in units of x, before any scale: what the fit makes dBFS of. */
export interface RenderedLevels {
  rms: number;
  activeRms: number;
  samplePeak: number;
  componentPeak: number;
  /** Of the whole file at M′. */
  interpolatedPeak: number;
  /** Of the file's own samples between each other, eight times finer. */
  reconstructedPeak: number;
}

export interface ContentMeasures {
  figures: MeasuredFigures;
  /** Null for a file too long to be held: the fit then cannot judge headroom, a pack still does. */
  levels: RenderedLevels | null;
}

const STEP_SAMPLES = 32_768;
/** Some 20 s of work; longer files are measured over their first repeats. */
const MEASURED_SAMPLES_MOST = 2 ** 25;
/** 64 MB of samples. */
const HELD_SAMPLES_MOST = 2 ** 22;

function finish(measuring: FrameMeasuring) {
  while (measuring.step());
  return measuring.result();
}

export function measureContent(content: WaveformContent): ContentMeasures {
  const options = { engine: sampleEngine() };
  let measuring = createFrameMeasure(content, options);
  const { repeats } = content.timing;
  let measuredRepeats = repeats;
  const samples = measuring.totalSteps * STEP_SAMPLES;
  if (samples > MEASURED_SAMPLES_MOST && repeats > 1) {
    measuredRepeats = Math.max(1, Math.floor((repeats * MEASURED_SAMPLES_MOST) / samples));
    measuring = createFrameMeasure({ ...content, timing: { ...content.timing, repeats: measuredRepeats } }, options);
  }
  const { power, symbolPaprDb } = finish(measuring);
  let worstSymbol: number | null = null;
  symbolPaprDb.forEach((paprDb, symbol) => {
    if (Number.isNaN(paprDb)) return;
    if (worstSymbol === null || paprDb > symbolPaprDb[worstSymbol]!) worstSymbol = symbol;
  });
  return {
    figures: {
      paprDb: power.paprDb,
      worstSymbolPaprDb: worstSymbol === null ? null : symbolPaprDb[worstSymbol]!,
      worstSymbol,
      measuredRepeats,
    },
    levels: measuredRepeats === repeats ? renderedLevels(content, Math.sqrt(power.peakPower)) : null,
  };
}

function renderedLevels(content: WaveformContent, interpolatedPeak: number): RenderedLevels | null {
  const synthesis = createSynthesis(content, { engine: sampleEngine() });
  if (synthesis.samples > HELD_SAMPLES_MOST) return null;
  const stats = vectorStats(synthesis);
  const held = new Float64Array(2 * synthesis.samples);
  for (let at = 0; at < held.length;) {
    const count = synthesis.read(held.subarray(at, at + 2 * STEP_SAMPLES));
    if (count === 0) break;
    at += 2 * count;
  }
  const source = {
    samples: synthesis.samples,
    read: (first: number, count: number, out: Float64Array) => out.set(held.subarray(2 * first, 2 * (first + count))),
  };
  return {
    rms: stats.rms,
    activeRms: stats.activeRms,
    samplePeak: stats.samplePeak,
    componentPeak: stats.componentPeak,
    interpolatedPeak,
    reconstructedPeak: Math.sqrt(reconstructedPeak(source, content.timing.mode).power),
  };
}
