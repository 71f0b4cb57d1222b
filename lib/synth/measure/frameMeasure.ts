import { log10 } from '../math/exponential';
import { createCellValues } from '../synthesize/cellValues';
import { frameLayout, interpolationOf } from '../synthesize/layout';
import { createSynthesis, powerBefore } from '../synthesize/synthesis';
import { addSamples, closePart, LEVEL_STATE_LENGTH } from '../synthesize/levelState';
import { stretchEnd } from '../synthesize/stretches';
import type { FrameLayout, RenderOptions } from '../synthesize/types';
import type { WaveformContent } from '../types';
import { ccdfThresholds, sampleCcdf } from './ccdf';
import { binOfPower, createHistogram, POWER_BINS } from './histogram';
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
/** Numbers that a closed span takes in a stretch. */
const SPAN_NUMBERS = 6;

/** One compensated sum (Neumaier) as plain numbers, for loops that may not call. */
interface Running {
  high: number;
  low: number;
}

function add(into: Running, value: number): void {
  const next = into.high + value;
  into.low += Math.abs(into.high) >= Math.abs(value) ? into.high - next + value : value - next + into.high;
  into.high = next;
}

type FrameOptions = Pick<RenderOptions, 'cells' | 'engine' | 'keepBytes' | 'powerBefore'>;

interface StretchOptions extends FrameOptions {
  /** False leaves the histogram, and what follows from it, empty. */
  counts?: boolean;
}

/** What is rendered for a frame's measure. */
interface FramePlan {
  interpolation: number;
  /** No frequency offset, since it changes no |x|²; three repeats where all are alike. */
  content: WaveformContent;
  /** How often the repeat between first and last counts. */
  weightOfMiddle: number;
}

function planFrame(content: WaveformContent, options: FrameOptions): FramePlan {
  const interpolation = interpolationOf(content.oversampling);
  const { repeats } = content.timing;
  const still = (times: number): WaveformContent => ({
    ...content,
    frequencyOffsetHz: 0,
    timing: { ...content.timing, repeats: times },
  });
  const isShort = repeats > 3 && createCellValues(content, options.cells).isRepeatAlike;
  return {
    interpolation,
    content: still(isShort ? 3 : repeats),
    weightOfMiddle: isShort ? repeats - 2 : 1,
  };
}

/** What a stretch of the interpolated waveform adds to the measure. Plain numbers, so that a thread can hand it to another. */
export interface FrameStretch {
  /**
   * Spans that end in the stretch, in order, six numbers each: slot (repeat · L + symbol; −1 for a suffix behind the last symbol), how
   * often it counts, Σ|x|² over all of it, its samples, Σ|x|² and the largest |x|² of the useful part.
   */
  spans: Float64Array;
  /** Samples by |x|², as often as they count. */
  counts: Float64Array;
  counted: number;
  /** The largest |x|², and where it stands first. */
  peakPower: number;
  peakSlot: number;
  peakAt: number;
}

/** Measures stretches of a document's interpolated waveform, in any order. */
export interface FrameStretches {
  /** Samples that have to be measured: those of the whole file, or of three of its repeats. */
  readonly samples: number;
  /** Where a stretch from `from` of about `most` samples ends. */
  endOf(from: number, most: number): number;
  /** Samples from…end−1; both are 0, `samples` or what endOf gave. */
  measure(from: number, end: number): FrameStretch;
}

/**
 * Stretches of a document's measure; together, in order, they make createFrameSum's figures whatever the cuts. Without `counts` the
 * samples stay in the engine and are only summed up: the same powers and peaks, no histogram.
 */
export function createFrameStretches(content: WaveformContent, options: StretchOptions = {}): FrameStretches {
  const plan = planFrame(content, options);
  // of the whole content: the plan's may have fewer repeats
  const before = powerBefore(content, options);
  const synthesis = createSynthesis(plan.content, {
    ...options,
    oversampling: plan.interpolation,
    powerBefore: before,
  });
  const { layout } = synthesis;
  const { counts: isCounting = true } = options;
  const block = new Float64Array(isCounting ? 2 * BLOCK_SAMPLES : 0);

  /** The next `samples` samples into a level state, and their powers into `counts`, `times` each. */
  function takeNext(state: Float64Array, samples: number, counts: Float64Array, times: number): void {
    const collector = { state, add: (data: Float64Array, at: number, n: number) => addSamples(state, data, at, n) };
    for (let left = samples; left > 0;) {
      if (!isCounting) {
        left -= synthesis.collect(collector, left);
        continue;
      }
      const count = synthesis.read(left < BLOCK_SAMPLES ? block.subarray(0, 2 * left) : block);
      addSamples(state, block, 0, count);
      countPowers(block, count, counts, times);
      left -= count;
    }
  }

  return {
    samples: layout.samples,
    endOf: (from, most) => stretchEnd(layout, from, most),
    measure(from, end) {
      const meter = createStretchMeter(layout, plan, from);
      for (let at = from; at < end;) {
        const segment = meter.next();
        if (segment.state !== null && segment.end > at) {
          if (synthesis.position !== at) synthesis.seek(at);
          takeNext(segment.state, segment.end - at, meter.counts, segment.times);
        }
        at = Math.min(end, segment.end);
        if (at === segment.end) meter.leave();
      }
      return meter.stretch();
    },
  };
}

function countPowers(block: Float64Array, count: number, counts: Float64Array, times: number): void {
  for (let i = 0; i < count; i++) {
    const re = block[2 * i]!;
    const im = block[2 * i + 1]!;
    const bin = binOfPower(re * re + im * im);
    counts[bin] = counts[bin]! + times;
  }
}

function createStretchMeter(layout: FrameLayout, { content, weightOfMiddle }: FramePlan, from: number) {
  const symbols = layout.symbolCount;
  const { counts } = createHistogram();
  const spans: number[] = [];
  const stretch = { counted: 0, peakPower: 0, peakSlot: 0, peakAt: 0 };
  const isWeighted = weightOfMiddle !== 1;
  const prefix = new Float64Array(LEVEL_STATE_LENGTH); // or the suffix behind the last symbol
  const useful = new Float64Array(LEVEL_STATE_LENGTH);
  let repeat = Math.min(layout.repeats - 1, Math.floor(from / layout.repeatSamples));
  // Segments of a repeat in order: for each symbol its prefix and its useful part, then the last suffix, then silence.
  let segment = segmentAt(from - repeat * layout.repeatSamples);

  /** A stretch begins with a symbol or in the silence. */
  function segmentAt(inRepeat: number): number {
    if (inRepeat >= layout.frameSamples) return 2 * symbols + 1;
    let symbol = 0;
    for (let end = symbols; end - symbol > 1;) {
      const middle = (symbol + end) >> 1;
      if (layout.symbolStarts[middle]! <= inRepeat) symbol = middle;
      else end = middle;
    }
    return 2 * symbol;
  }

  const weight = (): number => (isWeighted && repeat === 1 ? weightOfMiddle : 1);
  const isUseful = (): boolean => segment < 2 * symbols && segment % 2 === 1;
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

  /** Ends a segment's state; a peak in it is told if it is the largest so far. `inSymbol`: samples of the symbol before it. */
  function closeState(state: Float64Array, symbol: number, inSymbol: number): number {
    closePart(state);
    const peak = state[10]!;
    if (peak > stretch.peakPower) {
      stretch.peakPower = peak;
      stretch.peakSlot = (isWeighted && repeat === 2 ? content.timing.repeats - 1 : repeat) * symbols + symbol;
      stretch.peakAt = inSymbol + state[11]!;
    }
    return state[14]! + state[15]!;
  }

  function closeSpan(slot: number, energy: number, usefulEnergy: number): void {
    const samples = prefix[9]! + useful[9]!;
    spans.push(slot, weight(), energy + usefulEnergy, samples, usefulEnergy, useful[10]!);
    stretch.counted += weight() * samples;
    prefix.fill(0);
    useful.fill(0);
  }

  return {
    counts,
    /** The present segment: where it ends, what its samples go into (null in silence), how often it counts. */
    next: () => ({
      end: segmentEnd(),
      state: segment > 2 * symbols ? null : isUseful() ? useful : prefix,
      times: weight(),
    }),
    /** Goes on to the next segment: this one's end is reached. */
    leave(): void {
      if (isUseful()) {
        const symbol = segment >> 1;
        const energy = closeState(prefix, symbol, 0);
        closeSpan(repeat * symbols + symbol, energy, closeState(useful, symbol, layout.prefixes[symbol]!));
      } else if (segment === 2 * symbols) {
        closeSpan(-1, closeState(prefix, symbols - 1, layout.frameSamples - layout.symbolStarts[symbols - 1]!), 0);
      }
      segment++;
      if (segment > 2 * symbols + 1) {
        segment = 0;
        repeat++;
      }
    },
    stretch: (): FrameStretch => ({ ...stretch, spans: Float64Array.from(spans), counts }),
  };
}

/** Stretches to figures. */
export interface FrameSum {
  /** The next stretch of the waveform, in order. */
  add(stretch: FrameStretch): void;
  result(): FrameMeasure;
}

/** The figures of a document from the stretches that createFrameStretches measures. */
export function createFrameSum(content: WaveformContent): FrameSum {
  const interpolation = interpolationOf(content.oversampling);
  const wholeSamples = frameLayout(content, interpolation).samples;
  const symbols = content.symbolCount;
  const thresholds = ccdfThresholds();
  const usefulSamples = content.fftSize * interpolation;
  const above = new Float64Array(thresholds.length);
  let symbolsCounted = 0;
  const symbolPaprDb = new Float64Array(symbols).fill(NaN);
  const symbolPeakPower = new Float64Array(symbols);
  const histogram = createHistogram();
  const sums = { sum: 0, samples: 0, activeSum: 0, activeSamples: 0, peakPower: 0, peakSlot: 0, peakAt: 0 };
  const total: Running = { high: 0, low: 0 };
  const active: Running = { high: 0, low: 0 };

  function addSymbol(symbol: number, times: number, energy: number, usefulPeak: number): void {
    const papr = 10 * log10((usefulPeak * usefulSamples) / energy);
    if (!(papr <= symbolPaprDb[symbol]!)) symbolPaprDb[symbol] = papr;
    if (usefulPeak > symbolPeakPower[symbol]!) symbolPeakPower[symbol] = usefulPeak;
    for (let i = 0; i < thresholds.length && papr > thresholds[i]!; i++) above[i] = above[i]! + times;
    symbolsCounted += times;
  }

  return {
    add({ spans, counts, counted, peakPower, peakSlot, peakAt }) {
      for (let at = 0; at < spans.length; at += SPAN_NUMBERS) {
        const [slot, times, whole, samples, energy, usefulPeak] = spans.subarray(at, at + SPAN_NUMBERS);
        add(total, times! * whole!);
        sums.samples += times! * samples!;
        // the last suffix belongs to the frame's mean, not to a symbol
        if (slot! >= 0 && energy === 0) continue;
        add(active, times! * whole!);
        sums.activeSamples += times! * samples!;
        if (slot! >= 0) addSymbol(slot! % symbols, times!, energy!, usefulPeak!);
      }
      for (let bin = 0; bin < POWER_BINS; bin++) histogram.counts[bin] = histogram.counts[bin]! + counts[bin]!;
      histogram.total += counted;
      if (peakPower > sums.peakPower) Object.assign(sums, { peakPower, peakSlot, peakAt });
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

/**
 * Measures PAPR, both CCDFs and the levels of a document on the interpolated waveform, block by block in order, in little memory.
 * `cells` (L·N inks) replaces the document's grid. Where all repeats have the same values, the first, one between and the last are
 * measured and the one between counted for the rest.
 */
export function createFrameMeasure(content: WaveformContent, options: FrameOptions = {}): FrameMeasuring {
  const stretches = createFrameStretches(content, options);
  const sum = createFrameSum(content);
  const totalSteps = Math.ceil(stretches.samples / BLOCK_SAMPLES);
  let position = 0;
  return {
    totalSteps,
    get doneSteps() {
      return Math.floor((totalSteps * position) / stretches.samples);
    },
    step() {
      if (position === stretches.samples) return false;
      const end = stretches.endOf(position, BLOCK_SAMPLES);
      sum.add(stretches.measure(position, end));
      position = end;
      return position < stretches.samples;
    },
    result: sum.result,
  };
}
