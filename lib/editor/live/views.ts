import {
  amplitudeOfDecibels,
  ccdfThresholds,
  dbAtProbability,
  decimateEnvelope,
  decimateMinMax,
  gaussianCcdf,
  log10,
  sampleCcdf,
} from '@/lib/synth/index';
import type { Spectrum } from '@/lib/synth/index';
import type { Kept } from './mirror';
import { CONSTELLATION_POINTS_MOST } from './protocol';
import type { CcdfTrace, ConstellationTrace, LiveView, MinMaxTrace, SpectrumTrace, TimeTrace } from './protocol';

const COLUMNS_MOST = 4096;
/** Symbols looked at for the constellation: bounded, so that a long frame costs no more. */
const CONSTELLATION_SYMBOLS_MOST = 8;
const FLOOR_DB = -200;

function split(pairs: Float64Array, columns: number, gain: number): MinMaxTrace {
  const min = new Float32Array(columns);
  const max = new Float32Array(columns);
  for (let c = 0; c < columns; c++) {
    min[c] = pairs[2 * c]! * gain;
    max[c] = pairs[2 * c + 1]! * gain;
  }
  return { min, max };
}

/** The chosen symbol with its prefix before it, over its own RMS. */
export function timeTrace({ content, waveform, frame }: Kept, view: LiveView): TimeTrace | null {
  const symbol = Math.min(view.symbol, content.symbolCount - 1);
  const { fftSize } = content;
  const scale = waveform.interpolation;
  const prefixSamples = waveform.prefixOf(symbol) / content.oversampling;
  const useful = waveform.useful(symbol);
  const from = Math.max(-prefixSamples, Math.min(view.timeRange?.from ?? -prefixSamples, fftSize - 1));
  const to = Math.min(fftSize, Math.max(view.timeRange?.to ?? fftSize, from + 1));
  const first = Math.floor(from * scale);
  const count = Math.max(1, Math.ceil(to * scale) - first);
  const samples = new Float64Array(2 * count);
  const size = fftSize * scale;
  for (let i = 0; i < count; i++) {
    const at = first + i < 0 ? first + i + size : first + i;
    samples[2 * i] = useful[2 * at]!;
    samples[2 * i + 1] = useful[2 * at + 1]!;
  }
  let energy = 0;
  let peakPower = 0;
  let peakAt = 0;
  for (let i = 0; i < size; i++) {
    const power = useful[2 * i]! * useful[2 * i]! + useful[2 * i + 1]! * useful[2 * i + 1]!;
    energy += power;
    if (power > peakPower) {
      peakPower = power;
      peakAt = i;
    }
  }
  const rms = Math.sqrt(energy / size);
  const gain = rms > 0 ? 1 / rms : 0;
  const columns = Math.max(1, Math.min(Math.floor(view.timeWidthPx), COLUMNS_MOST, count));
  const pairs = new Float64Array(2 * columns);
  decimateEnvelope(samples, 0, count, columns, pairs);
  const envelope = split(pairs, columns, gain);
  decimateMinMax(samples, 0, count, columns, pairs, 2);
  const i = split(pairs, columns, gain);
  decimateMinMax(samples, 1, count, columns, pairs, 2);
  const q = split(pairs, columns, gain);
  const paprDb = frame.symbolPaprDb[symbol]!;
  return {
    symbol,
    prefixSamples,
    usefulSamples: fftSize,
    from: first / scale,
    to: (first + count) / scale,
    envelope,
    i,
    q,
    tail: { from: fftSize - prefixSamples, to: fftSize },
    peak: rms > 0 ? { at: peakAt / scale, ratio: Math.sqrt(peakPower) / rms } : null,
    paprDb: Number.isNaN(paprDb) ? null : paprDb,
  };
}

/** The density in dB to a 0 dB cell's, per column over the shown positions; between two bins the straight line in dB. */
export function spectrumTrace({ content, spectrum }: Kept, view: LiveView, average: Spectrum): SpectrumTrace | null {
  if (average.segments === 0) return null;
  const { fftSize } = content;
  const [numerator, denominator] = content.subcarrierSpacingHz;
  const spacingHz = numerator / denominator;
  const { from, to } = view.positionRange;
  const columns = Math.max(1, Math.min(Math.floor(view.spectrumWidthPx), COLUMNS_MOST));
  const bins = average.density.length;
  // A cell of 0 dB carries 1/N in each subcarrier's width.
  const reference = 1 / (fftSize * spacingHz);
  const dbOf = (bin: number) => {
    const value = average.density[bin < 0 ? bin + bins : bin >= bins ? bin - bins : bin]!;
    return value > 0 ? Math.max(FLOOR_DB, 10 * log10(value / reference)) : FLOOR_DB;
  };
  /** Broken bin of a broken position: a subcarrier's frequency stands at the middle of its cell. */
  const binOf = (position: number) =>
    ((position - 0.5 - Math.floor(fftSize / 2)) * spacingHz) / average.binHz + Math.floor(bins / 2);
  const between = (bin: number) => {
    const below = Math.floor(bin);
    const part = bin - below;
    return part === 0 ? dbOf(below) : (1 - part) * dbOf(below) + part * dbOf(below + 1);
  };
  const min = new Float32Array(columns);
  const max = new Float32Array(columns);
  for (let c = 0; c < columns; c++) {
    const start = binOf(from + ((to - from) * c) / columns);
    const end = binOf(from + ((to - from) * (c + 1)) / columns);
    const first = between(start);
    const last = between(end);
    let least = Math.min(first, last);
    let largest = Math.max(first, last);
    for (let bin = Math.ceil(start); bin <= end; bin++) {
      const value = dbOf(bin);
      if (value < least) least = value;
      if (value > largest) largest = value;
    }
    min[c] = least;
    max[c] = largest;
  }
  return { from, to, db: { min, max }, rbwHz: average.rbwHz, recipe: spectrum.recipe };
}

/** Instantaneous power over the frame's mean, per sample, beside the Gaussian's. */
export function ccdfTrace({ frame }: Kept): CcdfTrace | null {
  const { meanPower } = frame.power();
  if (meanPower === 0) return null;
  const thresholds = ccdfThresholds(0, 14, 0.1);
  const curve = sampleCcdf(frame.histogram(), meanPower, thresholds);
  return {
    thresholdsDb: Float32Array.from(thresholds),
    probability: Float32Array.from(curve.probability),
    gaussian: Float32Array.from(gaussianCcdf(thresholds).probability),
    atOneInThousandDb: dbAtProbability(curve, 1e-3),
  };
}

/** Values of the ink's cells from the chosen symbol on, without the ink's power. */
export function constellationTrace(
  { content, waveform, reach, census }: Kept,
  view: LiveView,
): ConstellationTrace | null {
  const ink = content.tray[view.ink];
  const cells = census.cellsOfInk[view.ink] ?? 0;
  if (!ink || ink.role === 'null' || ink.role === 'reserved' || cells === 0) return null;
  const { fftSize, symbolCount } = content;
  const gain = 1 / amplitudeOfDecibels(ink.powerDb);
  const values = new Float64Array(2 * fftSize);
  const points = new Float32Array(2 * Math.min(cells, CONSTELLATION_POINTS_MOST));
  let filled = 0;
  let looked = 0;
  for (let i = 0; i < symbolCount && looked < CONSTELLATION_SYMBOLS_MOST && filled < points.length; i++) {
    const symbol = (view.symbol + i) % symbolCount;
    if (!reach.holds(symbol, view.ink)) continue;
    looked++;
    waveform.values.write(0, symbol, values);
    for (let p = 0; p < fftSize && filled < points.length; p++) {
      if (waveform.values.cells[symbol * fftSize + p] !== view.ink) continue;
      points[filled++] = values[2 * p]! * gain;
      points[filled++] = values[2 * p + 1]! * gain;
    }
  }
  return { ink: view.ink, points: points.slice(0, filled), cells };
}
