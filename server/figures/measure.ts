import type { MeasuredFigures } from '@/lib/contracts/waveforms';
import {
  createFrameMeasure,
  createSeamCollector,
  createSynthesis,
  reconstructedPeak,
  symbolPeaksOf,
  vectorStats,
  type FrameMeasuring,
  type SeamMeasure,
  type SymbolPeaks,
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
  /** Absent in figures that an older version kept. */
  seam?: SeamMeasure | null;
  symbolPeaks?: SymbolPeaks | null;
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

/** What a very long file is measured by: without its pad and with no more gap than a suffix needs, then fewer repeats. */
function shortened(content: WaveformContent, samples: number): WaveformContent {
  if (samples <= MEASURED_SAMPLES_MOST) return content;
  const { timing, overlapSamples } = content;
  return {
    ...content,
    timing: { ...timing, padSamples: 0, gapSamples: Math.min(timing.gapSamples, overlapSamples) },
  };
}

export function measureContent(content: WaveformContent): ContentMeasures {
  const options = { engine: sampleEngine() };
  const { repeats } = content.timing;
  const samplesOf = (measuring: FrameMeasuring) => measuring.totalSteps * STEP_SAMPLES;
  let measuring = createFrameMeasure(content, options);
  const measured = shortened(content, samplesOf(measuring));
  if (measured !== content) measuring = createFrameMeasure(measured, options);
  let measuredRepeats = repeats;
  if (samplesOf(measuring) > MEASURED_SAMPLES_MOST && repeats > 1) {
    measuredRepeats = Math.max(1, Math.floor((repeats * MEASURED_SAMPLES_MOST) / samplesOf(measuring)));
    measuring = createFrameMeasure({ ...measured, timing: { ...measured.timing, repeats: measuredRepeats } }, options);
  }
  const { power, symbolPaprDb, symbolPeakPower } = finish(measuring);
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
    levels:
      measuredRepeats === repeats && measured === content
        ? renderedLevels(content, Math.sqrt(power.peakPower), symbolPeaksOf(symbolPeakPower))
        : null,
  };
}

function renderedLevels(
  content: WaveformContent,
  interpolatedPeak: number,
  symbolPeaks: SymbolPeaks | null,
): RenderedLevels | null {
  const synthesis = createSynthesis(content, { engine: sampleEngine() });
  if (synthesis.samples > HELD_SAMPLES_MOST) return null;
  const stats = vectorStats(synthesis);
  const held = new Float64Array(2 * synthesis.samples);
  const seam = createSeamCollector();
  for (let at = 0; at < held.length;) {
    const count = synthesis.read(held.subarray(at, at + 2 * STEP_SAMPLES));
    if (count === 0) break;
    seam.add(held.subarray(at, at + 2 * count), count);
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
    seam: content.timing.mode === 'loop' ? seam.result() : null,
    symbolPeaks,
  };
}
