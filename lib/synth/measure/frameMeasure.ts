import { log10 } from '../math/exponential';
import { interpolationOf } from '../synthesize/layout';
import { createSynthesis } from '../synthesize/synthesis';
import type { RenderOptions } from '../synthesize/types';
import type { WaveformContent } from '../types';
import { ccdfThresholds, sampleCcdf } from './ccdf';
import { binOfPower, createHistogram } from './histogram';
import { framePower, outstandingSymbols } from './tally';
import type { CcdfCurve, FramePower, PowerHistogram } from './types';

/** What a whole document's interpolated waveform measures. */
export interface FrameMeasure {
  /** M′: the least multiple of M that is at least 4. */
  interpolation: number;
  /** Over all repeats' active spans, gap and pad out. `peakSlot` = repeat · L + symbol. */
  power: FramePower;
  /** Mean |x|² over the whole file, gap and pad in. */
  fileMeanPower: number;
  histogram: PowerHistogram;
  /** Of instantaneous power over mean, per sample. */
  sampleCcdf: CcdfCurve;
  /** Of the PAPR per symbol, all repeats, silent symbols left out. */
  symbolCcdf: CcdfCurve;
  /** Per symbol of the frame, the worst of its repeats: PAPR of the useful part over its own mean (NaN when silent), and its peak. */
  symbolPaprDb: Float64Array;
  symbolPeakPower: Float64Array;
  /** Symbols whose peak is 3 dB or more above the median. */
  outstanding: number[];
}

/** A measure taken in steps, so that its caller may show progress, yield and cancel. */
export interface FrameMeasuring {
  readonly totalSteps: number;
  readonly doneSteps: number;
  /** One block on; false when nothing is left. */
  step(): boolean;
  /** The figures; throws nothing, but is only whole after the last step. */
  result(): FrameMeasure;
}

const BLOCK_SAMPLES = 32768;

/** One compensated sum (Neumaier) as plain numbers, for loops that may not call. */
interface Running {
  high: number;
  low: number;
}

/**
 * Measures PAPR, both CCDFs and the levels of a document on the interpolated waveform, block by block in order, in little memory.
 * `cells` (L·N inks) replaces the document's grid. Where all repeats have the same values, the first, one between and the last are
 * measured and the one between counted for the rest.
 */
export function createFrameMeasure(
  content: WaveformContent,
  options: Pick<RenderOptions, 'cells' | 'engine'> = {},
): FrameMeasuring {
  const interpolation = interpolationOf(content.oversampling);
  const repeats = content.timing.repeats;
  const render = (times: number) =>
    createSynthesis(
      { ...content, frequencyOffsetHz: 0, timing: { ...content.timing, repeats: times } },
      { ...options, oversampling: interpolation },
    );
  let synthesis = render(repeats);
  const wholeSamples = synthesis.samples;
  if (repeats > 3 && synthesis.values.isRepeatAlike) synthesis = render(3);
  const { layout } = synthesis;
  const weightOfMiddle = repeats - layout.repeats + 1;

  const symbols = layout.symbolCount;
  const thresholds = ccdfThresholds();
  const above = new Float64Array(thresholds.length);
  let symbolsCounted = 0;
  const symbolPaprDb = new Float64Array(symbols).fill(NaN);
  const symbolPeakPower = new Float64Array(symbols);
  const histogram = createHistogram();
  const sums = { sum: 0, samples: 0, activeSum: 0, activeSamples: 0, peakPower: 0, peakSlot: 0, peakAt: 0 };
  const total: Running = { high: 0, low: 0 };
  const active: Running = { high: 0, low: 0 };
  const span: Running = { high: 0, low: 0 };
  const useful: Running = { high: 0, low: 0 };

  const block = new Float64Array(2 * Math.min(BLOCK_SAMPLES, Math.max(1, layout.samples)));
  const totalSteps = Math.ceil(layout.samples / (block.length / 2));
  let doneSteps = 0;
  let position = 0;
  let repeat = 0;
  // Segments of a repeat in order: for each symbol its prefix and its useful part, then the last suffix, then silence.
  let segment = 0;
  let usefulPeak = 0;
  let spanSamples = 0;

  const weight = (): number => (layout.repeats === 3 && repeat === 1 ? weightOfMiddle : 1);
  const segmentEnd = (): number => {
    const origin = repeat * layout.repeatSamples;
    if (segment < 2 * symbols) {
      const symbol = segment >> 1;
      const start = origin + layout.symbolStarts[symbol]! + layout.prefixes[symbol]!;
      return segment % 2 === 0 ? start : start + layout.usefulSamples;
    }
    const last = repeat === layout.repeats - 1;
    if (segment === 2 * symbols) return origin + (last ? layout.lastActiveSamples : layout.activeSamples);
    return last ? layout.samples : origin + layout.repeatSamples;
  };

  function add(into: Running, value: number): void {
    const next = into.high + value;
    into.low += Math.abs(into.high) >= Math.abs(value) ? into.high - next + value : value - next + into.high;
    into.high = next;
  }

  function closeSymbol(symbol: number): void {
    const times = weight();
    const energy = useful.high + useful.low;
    const whole = span.high + span.low;
    add(total, times * whole);
    sums.samples += times * spanSamples;
    if (energy > 0) {
      add(active, times * whole);
      sums.activeSamples += times * spanSamples;
      const papr = 10 * log10((usefulPeak * layout.usefulSamples) / energy);
      if (!(papr <= symbolPaprDb[symbol]!)) symbolPaprDb[symbol] = papr;
      if (usefulPeak > symbolPeakPower[symbol]!) symbolPeakPower[symbol] = usefulPeak;
      for (let i = 0; i < thresholds.length && papr > thresholds[i]!; i++) above[i] = above[i]! + times;
      symbolsCounted += times;
    }
    span.high = span.low = useful.high = useful.low = usefulPeak = spanSamples = 0;
  }

  /** Samples from…to−1 of the block, all in one segment. */
  function take(from: number, to: number): void {
    if (segment > 2 * symbols) return;
    const isUseful = segment < 2 * symbols && segment % 2 === 1;
    const times = weight();
    const { counts } = histogram;
    let { high, low } = span;
    let usefulHigh = useful.high;
    let usefulLow = useful.low;
    let peak = sums.peakPower;
    for (let i = from; i < to; i++) {
      const re = block[2 * i]!;
      const im = block[2 * i + 1]!;
      const power = re * re + im * im;
      const next = high + power;
      low += high >= power ? high - next + power : power - next + high;
      high = next;
      if (isUseful) {
        const more = usefulHigh + power;
        usefulLow += usefulHigh >= power ? usefulHigh - more + power : power - more + usefulHigh;
        usefulHigh = more;
        if (power > usefulPeak) usefulPeak = power;
      }
      if (power > peak) {
        peak = power;
        const symbol = Math.min(segment >> 1, symbols - 1);
        const inRepeat = position + i - repeat * layout.repeatSamples;
        sums.peakSlot = (repeat === 2 && layout.repeats === 3 ? repeats - 1 : repeat) * symbols + symbol;
        sums.peakAt = inRepeat - layout.symbolStarts[symbol]!;
      }
      const bin = binOfPower(power);
      counts[bin] = counts[bin]! + times;
    }
    histogram.total += times * (to - from);
    span.high = high;
    span.low = low;
    useful.high = usefulHigh;
    useful.low = usefulLow;
    sums.peakPower = peak;
    spanSamples += to - from;
  }

  /** Goes on to the next segment once the file has reached this one's end. */
  function leaveSegment(): void {
    if (segment < 2 * symbols && segment % 2 === 1) closeSymbol(segment >> 1);
    if (segment === 2 * symbols) {
      // the last suffix belongs to the frame's mean, not to a symbol
      const whole = span.high + span.low;
      add(total, weight() * whole);
      add(active, weight() * whole);
      sums.samples += weight() * spanSamples;
      sums.activeSamples += weight() * spanSamples;
      span.high = span.low = spanSamples = 0;
    }
    segment++;
    if (segment > 2 * symbols + 1) {
      segment = 0;
      repeat++;
    }
  }

  return {
    totalSteps,
    get doneSteps() {
      return doneSteps;
    },
    step() {
      const count = synthesis.read(block);
      if (count === 0) return false;
      let at = 0;
      while (repeat < layout.repeats) {
        const end = Math.min(count, segmentEnd() - position);
        take(at, end);
        at = end;
        if (position + at < segmentEnd()) break;
        leaveSegment();
      }
      position += count;
      doneSteps++;
      return position < layout.samples;
    },
    result() {
      sums.sum = total.high + total.low;
      sums.activeSum = active.high + active.low;
      const power = framePower(sums);
      return {
        interpolation,
        power,
        fileMeanPower: sums.sum / wholeSamples,
        histogram,
        sampleCcdf: sampleCcdf(histogram, power.meanPower, thresholds),
        symbolCcdf: {
          thresholdsDb: thresholds,
          probability: above.map((count) => (symbolsCounted === 0 ? 0 : count / symbolsCounted)),
        },
        symbolPaprDb,
        symbolPeakPower,
        outstanding: outstandingSymbols(symbolPeakPower),
      };
    },
  };
}
