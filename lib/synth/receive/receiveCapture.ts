import type { SampleEngine } from '../engine/types';
import { log10 } from '../math/exponential';
import type { SampleSource } from '../measure/reconstructedPeak';
import type { WaveformContent } from '../types';
import { capturedSubcarriers } from './captureCells';
import { nearestClockRatio, CLOCK_ERROR_MOST_PPM, type ClockRatio } from './clockRatio';
import { createCycle, type Cycle } from './cycle';
import { measureCells, type MeasuredCells } from './measureCapture';
import { turnStart } from './places';
import { mirroredSource, mixedSource } from './sources';
import { captureStatistics, type CaptureStatistics } from './statistics';
import { findFrame, type FoundFrame } from './synchronize';
import { trackCapture, type KnownCells, type TrackedCapture } from './track';
import type { CaptureResult, ChannelSource, FoundReading, MeasuredCapture, RefusedCapture } from './types';

/** A capture to be measured against a content. */
export interface CaptureOptions {
  content: WaveformContent;
  /** Readings of the same bytes, the likely one first; samples in which full scale is 1. Each is tried as it is and mirrored. */
  readings: readonly SampleSource[];
  /** The capture's clock; null: the vector's own. */
  clockHz: number | null;
  channel: ChannelSource;
  /** True for integer words, which end at ± full scale. */
  hasRails: boolean;
  /** Most symbols that are measured; by default as many as 2^23 samples hold, 2 at least. */
  mostSymbols?: number;
  engine?: SampleEngine | undefined;
}

export type CaptureStage = 'reading' | 'synchronizing' | 'demodulating';

/** A reception in steps; `step` answers false when nothing is left. */
export interface Reception {
  step(): boolean;
  readonly stage: CaptureStage;
  /** Share of the stage, 0…1. */
  readonly doneRatio: number;
  result(): CaptureResult;
}

const MEASURED_SAMPLES = 8388608;
/** ρ of a reading that is taken without a look at the others. */
const CLEARLY_RIGHT = 0.9;

/** The file's clock N·M·Δf in Hz. */
export function vectorClock(content: WaveformContent): number {
  const [numerator, denominator] = content.subcarrierSpacingHz;
  return (content.fftSize * content.oversampling * numerator) / denominator;
}

/**
 * Finds the content's waveform in a capture and measures it: statistics, frame, carrier offset, clock error, channel, EVM, null cells,
 * imbalance. Pure and stepwise: equal arguments give equal results. Outcomes that are no measurement are values, never errors.
 * Memory: some tens of MB beside what the readings hold. Throws SynthError as createCycle does.
 */
export function createReception(options: CaptureOptions): Reception {
  const state: { stage: CaptureStage; doneRatio: number } = { stage: 'reading', doneRatio: 0 };
  const running = receive(options, (stage) => {
    state.stage = stage;
    state.doneRatio = 0;
  });
  let result: CaptureResult | null = null;
  return {
    get stage() {
      return state.stage;
    },
    get doneRatio() {
      return state.doneRatio;
    },
    step() {
      if (result !== null) return false;
      const next = running.next();
      if (next.done === true) {
        result = next.value;
        state.doneRatio = 1;
        return false;
      }
      state.doneRatio = next.value;
      return true;
    },
    result() {
      while (result === null) this.step();
      return result;
    },
  };
}

function refuse(code: RefusedCapture['code'], message: string): RefusedCapture {
  return { kind: 'refused', code, message };
}

function* receive(options: CaptureOptions, enter: (stage: CaptureStage) => void): Generator<number, CaptureResult> {
  const { content, readings } = options;
  const cycle = createCycle(content);
  if (cycle.usedCount === 0) return refuse('nothingPainted', 'Nothing is painted: there is no waveform to look for.');
  const fileHz = vectorClock(content);
  const captureHz = options.clockHz ?? fileHz;
  const clock = nearestClockRatio(captureHz, fileHz);
  if (Math.abs(clock.errorPpm) > CLOCK_ERROR_MOST_PPM) return refuse('clock', clockWords(captureHz, fileHz, clock));
  const ratio = clock.p / clock.q;
  const source = readings[0]!;
  const { usefulSamples, prefixes } = cycle.layout;
  const symbolSamples = Math.ceil((usefulSamples + prefixes[0]!) * ratio);
  if (source.samples < symbolSamples)
    return refuse(
      'tooShort',
      `A symbol has ${symbolSamples} samples at the capture's clock; the capture has ${source.samples}.`,
    );
  const known = knownCells(cycle, ratio);
  if (options.channel === 'pilots' && !hasPilots(cycle, known))
    return refuse('noPilots', 'No pilot is painted: take the channel from all known cells.');

  const partSamples = partOf(cycle, ratio);
  const tried: Tried[] = [];
  let statistics: CaptureStatistics | null = null;
  const measureTried = ({ reading, isMirrored, heard, seen, found }: Tried) =>
    measure(
      options,
      { cycle, heard, captureHz, fileHz, clock, known, statistics: seen },
      found,
      { reading, isMirrored },
      enter,
    );
  for (const [reading, plain] of readings.entries()) {
    enter('reading');
    const seen: CaptureStatistics = yield* captureStatistics(plain, partSamples, options.hasRails);
    statistics ??= seen;
    if (seen.firstNotNumber !== null) continue; // bytes the wrong way round look so too
    if (seen.isSilent) {
      if (reading === 0) return refuse('silent', 'All samples are zero.');
      continue;
    }
    for (const isMirrored of [false, true]) {
      enter('synchronizing');
      const heard = isMirrored ? mirroredSource(plain) : plain;
      const base = mixedSource(heard, content.frequencyOffsetHz / captureHz);
      const from = Math.min(seen.strongestAt, Math.max(0, plain.samples - partSamples));
      const found = yield* findFrame(base, cycle, ratio * content.oversampling, from, options.engine);
      const one: Tried = { reading, isMirrored, correlation: found.correlation, heard, seen, found, isMeasured: false };
      tried.push(one);
      // nothing could be likelier: the other readings need not be looked at
      if (found.correlation < CLEARLY_RIGHT || !found.isWorthReading) continue;
      one.isMeasured = true;
      const measured: MeasuredCapture | null = yield* measureTried(one);
      if (measured !== null) return measured;
    }
  }
  tried.sort((a, b) => b.correlation - a.correlation);
  // a reading that is wrong may still look a little like the waveform (saturated words do): the likest is the right one
  for (const one of tried) {
    if (one.isMeasured || !one.found.isWorthReading) continue;
    const measured: MeasuredCapture | null = yield* measureTried(one);
    if (measured !== null) return measured;
  }
  if (statistics?.firstNotNumber != null) return refuse('notNumbers', notNumberWords(statistics.firstNotNumber));
  const best = tried[0]!;
  const plainCurve = tried.find(({ reading, isMirrored }) => reading === 0 && !isMirrored) ?? best;
  return {
    kind: 'unrecognised',
    statistics: statistics!,
    correlation: { value: best.correlation, needed: best.found.needed },
    best: { reading: best.reading, isMirrored: best.isMirrored },
    tried: tried.map(({ reading, isMirrored, correlation }) => ({ reading, isMirrored, correlation })),
    curve: plainCurve.found.curve,
    frameSec: cycle.periodSamples / fileHz,
  };
}

/** A reading that was looked through. */
interface Tried extends FoundReading {
  correlation: number;
  heard: SampleSource;
  seen: CaptureStatistics;
  found: FoundFrame;
  isMeasured: boolean;
}

interface Heard {
  cycle: Cycle;
  heard: SampleSource;
  captureHz: number;
  fileHz: number;
  clock: ClockRatio;
  known: KnownCells;
  statistics: CaptureStatistics;
}

/** Null where it turns out not to be the waveform after all. */
function* measure(
  options: CaptureOptions,
  { cycle, heard, captureHz, fileHz, clock, known, statistics }: Heard,
  found: FoundFrame,
  reading: FoundReading,
  enter: (stage: CaptureStage) => void,
): Generator<number, MeasuredCapture | null> {
  const nominal = { ratio: clock.p / clock.q, captureHz };
  const { usefulSamples } = cycle.layout;
  const most = options.mostSymbols ?? Math.max(2, Math.floor(MEASURED_SAMPLES / usefulSamples));
  const tracked = yield* trackCapture(heard, cycle, nominal, found, known, most);
  if (tracked === null) return null;
  enter('demodulating');
  const cells = yield* measureCells(heard, cycle, tracked, known, options.channel, statistics.meanPower);
  const correlation = Math.max(found.correlation, cells.correlation ?? 0);
  if (correlation < found.needed) return null;
  return reportOf({ cycle, heard, captureHz, fileHz, clock, known, statistics }, tracked, cells, reading, {
    value: Math.min(1, correlation),
    needed: found.needed,
  });
}

function reportOf(
  { cycle, captureHz, fileHz, clock, known, statistics }: Heard,
  tracked: TrackedCapture,
  cells: MeasuredCells,
  found: FoundReading,
  correlation: { value: number; needed: number },
): MeasuredCapture {
  const { content, layout } = cycle;
  const { fit, drift } = tracked;
  const offsetTurns = fit.mixTurns - content.frequencyOffsetHz / captureHz;
  const spacing = content.subcarrierSpacingHz[0] / content.subcarrierSpacingHz[1];
  const turns = new Map<number, number>();
  for (const { turn } of tracked.places) turns.set(turn, (turns.get(turn) ?? 0) + 1);
  const delaySamples = delayOf(tracked, cycle);
  const half = Math.floor(content.fftSize / 2);
  const lost = Array.from(
    { length: cycle.usedHigh - cycle.usedLow + 1 },
    (_, i) => Math.abs(cycle.usedLow + i) > known.captured,
  );
  return {
    kind: 'measured',
    found,
    statistics,
    correlation,
    frames: turns.size,
    symbols: tracked.places.length,
    symbolCounts: cells.symbolCounts,
    isCut: tracked.isCut,
    isPartFrame: ![...turns.values()].some((count) => count === cycle.symbols),
    clockHz: captureHz,
    clockRatio: [clock.p, clock.q],
    clockErrorPpm: tracked.clockError === null ? null : 1e6 * tracked.clockError,
    clockErrorSigmaPpm: tracked.clockErrorSigma === null ? null : 1e6 * tracked.clockErrorSigma,
    isClockShared: tracked.isClockShared,
    offsetHz: offsetTurns * captureHz,
    offsetSigmaHz: drift === null ? null : drift.turnsPerSampleSigma * fileHz,
    offsetSubcarriers: (offsetTurns * captureHz) / spacing,
    startSamples: startOf(tracked, cycle),
    delaySec: delaySamples / captureHz,
    delaySamples,
    levelDbfs: 10 * log10(cells.levelPower),
    peakDbfs: 10 * log10(statistics.peakPower),
    gainDb: 10 * log10(cells.gainPower),
    snrDb: cells.snr === null ? null : 10 * log10(cells.snr),
    evm: cells.evm,
    isOverData: cells.isOverData,
    channel: {
      source: cells.channelSource,
      magnitudeDb: magnitudes(cells, cycle.usedLow + half, cycle.usedHigh + half),
      impulseDb: cells.impulse?.powerDb ?? null,
      firstDelaySamples: cells.impulse?.firstDelay ?? 0,
      delayStepSec: content.oversampling / fileHz,
      guardSamples: Math.max(0, Math.floor(cycle.guardSamples / content.oversampling)),
      prefixSamples:
        layout.prefixes.reduce((least, prefix) => Math.min(least, prefix), Infinity) / content.oversampling,
      paths: cells.impulse?.paths ?? [],
    },
    nulls: cells.nulls,
    imbalance: cells.imbalance,
    constellation: cells.constellation,
    windowAdvanceSamples: cells.advanceSamples,
    lostSubcarriers: lost.filter(Boolean).length,
  };
}

/** Samples of the file from the frame's first sample to the capture's; negative where a burst begins later. */
function startOf({ fit, places }: TrackedCapture, cycle: Cycle): number {
  const first = places[0]!;
  const frame = first.usefulStart - cycle.usefulStarts[first.symbol]!;
  const start = -fit.originSamples / fit.ratio - frame;
  return start >= 0 || cycle.layout.mode === 'burst' ? start : start + cycle.periodSamples;
}

/** The first frame that begins in the capture; a burst's may begin before it. */
function delayOf({ fit, places }: TrackedCapture, cycle: Cycle): number {
  const first = places[0]!;
  const start = first.usefulStart - cycle.usefulStarts[first.symbol]!;
  const at = fit.originSamples + start * fit.ratio;
  if (at >= -0.5 || cycle.layout.mode === 'burst') return at;
  const next = places.find(({ turn }) => turn !== first.turn);
  const after = next ? next.usefulStart - cycle.usefulStarts[next.symbol]! : turnStart(cycle, first.turn + 1, null);
  return fit.originSamples + after * fit.ratio;
}

function magnitudes({ taps }: MeasuredCells, first: number, last: number): Float64Array {
  const size = taps.length / 2;
  const power = Float64Array.from(
    { length: size },
    (_, p) => taps[2 * p]! * taps[2 * p]! + taps[2 * p + 1]! * taps[2 * p + 1]!,
  );
  let sum = 0;
  let count = 0;
  for (let p = first; p <= last; p++) {
    if (power[p] === 0) continue;
    sum += power[p]!;
    count++;
  }
  return power.map((value) => (value === 0 ? NaN : 10 * log10((value * count) / sum)));
}

function knownCells(cycle: Cycle, ratio: number): KnownCells {
  const isKnownInk = new Uint8Array(256);
  const isChannelInk = new Uint8Array(256);
  cycle.content.tray.forEach(({ role }, ink) => {
    isKnownInk[ink] = role === 'data' || role === 'pilot' || role === 'tone' ? 1 : 0;
    isChannelInk[ink] = role === 'pilot' ? 1 : 0;
  });
  const half = Math.ceil(cycle.content.fftSize / 2);
  return { isKnownInk, isChannelInk, captured: ratio === 1 ? half : capturedSubcarriers(cycle, ratio) };
}

function hasPilots(cycle: Cycle, known: KnownCells): boolean {
  return cycle.cells.some((ink) => known.isChannelInk[ink] === 1);
}

/** Capture samples of the part that is looked for, about. */
function partOf(cycle: Cycle, ratio: number): number {
  const symbols = Math.max(1, Math.min(64, Math.ceil(3000 / cycle.usedCount)));
  return Math.ceil(symbols * cycle.layout.usefulSamples * ratio);
}

function notNumberWords(at: number): string {
  return `The capture holds values that are not numbers (NaN or infinite), the first in sample ${at}, counted from 0.`;
}

function clockWords(captureHz: number, fileHz: number, clock: ClockRatio): string {
  return `The capture's clock of ${captureHz} Hz is no p/q (both up to 64) of the vector's ${fileHz} Hz within ${CLOCK_ERROR_MOST_PPM} ppm; the nearest is ${clock.p}/${clock.q}, ${clock.errorPpm.toFixed(1)} ppm off.`;
}
