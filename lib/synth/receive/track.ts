import { turnsOf } from '../math/angle';
import { writeUnitOfTurns } from '../math/turns';
import type { SampleSource } from '../measure/reconstructedPeak';
import { createCellReader, type CaptureFit, type CellReader } from './captureCells';
import { strongestDelay } from './channel';
import { advanceOf } from './window';
import type { Cycle } from './cycle';
import { estimateDrift, type Drift, type ReadSymbol } from './offset';
import { rowOfPlace, spreadPlaces, turnStart, wholePlaces, writeMeant, type FileWrap, type Place } from './places';
import type { FoundFrame } from './synchronize';

/** A capture laid exactly over the known waveform. */
export interface TrackedCapture {
  fit: CaptureFit;
  places: Place[];
  /** Null with a single symbol: it shows no drift. */
  drift: Drift | null;
  /** The channel at the last look (2·N), phase ramp of the strongest path taken out. */
  taps: Float64Array;
  /** Mean square error of a known cell, and how many symbols it is of. */
  noisePower: number;
  symbolsRead: number;
  clockError: number | null;
  clockErrorSigma: number | null;
  isClockShared: boolean;
  isCut: boolean;
}

/** What is known of cells, per ink and position. */
export interface KnownCells {
  /** 1 for inks whose values the document knows. */
  isKnownInk: Uint8Array;
  /** 1 for inks that the channel is taken from. */
  isChannelInk: Uint8Array;
  /** Subcarriers |k| ≤ captured are in the capture's band. */
  captured: number;
}

/** Clock errors to expect, for weighing a first rough estimate: ± 20 ppm at the most. */
const CLOCK_PRIOR = 12e-6;
const FIRST_SYMBOLS = 16;
const SYMBOLS_MOST = 256;
const VALUES_MOST = 4194304;
/** A clock error is one when it stands three deviations out. */
const CLEAR = 3;

/** 1 for each position of a row that is known and in the band. */
export function knownMask(row: Uint8Array, isInk: Uint8Array, captured: number, out: Uint8Array): Uint8Array {
  const half = Math.floor(row.length / 2);
  for (let p = 0; p < row.length; p++) out[p] = isInk[row[p]!] === 1 && Math.abs(p - half) <= captured ? 1 : 0;
  return out;
}

/**
 * Follows the waveform from the part that was found to the whole capture, in stretches that double, so that a carrier offset or a clock error
 * is known well enough before the next one needs it. `mostSymbols` limits what is listed. A generator: each `yield` is the share done.
 */
export function* trackCapture(
  source: SampleSource,
  cycle: Cycle,
  nominal: { ratio: number; captureHz: number },
  found: FoundFrame,
  known: KnownCells,
  mostSymbols: number,
): Generator<number, TrackedCapture | null> {
  const { oversampling, fftSize, frequencyOffsetHz } = cycle.content;
  const { usefulSamples } = cycle.layout;
  let advance = Math.floor(Math.max(0, cycle.guardSamples) / 2);
  const perSubcarrier = 1 / (usefulSamples * nominal.ratio);
  const fit: CaptureFit = {
    originSamples: found.templateAt - found.cyclePlace * oversampling * nominal.ratio,
    ratio: nominal.ratio,
    mixTurns: frequencyOffsetHz / nominal.captureHz + found.offsetSubcarriers * perSubcarrier,
    isLocked: nominal.ratio === 1,
  };
  let reader = createCellReader(source, cycle, fit, advance);
  let wrap: FileWrap | null = null;
  let places = wholePlaces(source, cycle, fit, reader, mostSymbols + 1, wrap);
  if (places.length === 0) return null;
  const most = Math.max(8, Math.min(SYMBOLS_MOST, Math.floor(VALUES_MOST / fftSize / 4)));
  const groupOf = carrierGroups(cycle);
  if (isTurnOpen(cycle)) {
    // the part looked for may begin in silence, or before a pad: the turn that is there for certain becomes the one found
    const turn = clearestTurn(cycle, reader, inPart(places, found, fit), known);
    fit.originSamples += turn * cycle.periodSamples * fit.ratio;
    reader = createCellReader(source, cycle, fit, advance);
    places = wholePlaces(source, cycle, fit, reader, mostSymbols + 1, wrap);
  }
  const own = isTurnOpen(cycle) ? places.filter(({ turn }) => turn === 0) : places;
  const isOwnOnly = own.length > 0 && own.length < places.length;
  let count = Math.min(own.length > 0 ? own.length : places.length, FIRST_SYMBOLS);
  let drift: Drift | null = null;
  let read: ReadSymbol[] = [];
  let sigma: number | null = null;
  let isLast = false;
  let isCleared = false;
  let isFirst = true;
  const middle = found.templateAt + found.templateSamples / 2;
  while (!isLast) {
    const near = nearest(isFirst && isOwnOnly ? own : places, (middle - fit.originSamples) / fit.ratio, count);
    isLast = count >= places.length && (isCleared || places.length < 2);
    read = [];
    for (const place of spreadPlaces(near, most)) {
      const row = rowOfPlace(cycle, place);
      const symbol: ReadSymbol = {
        usefulStart: place.usefulStart,
        group: groupOf(place),
        found: new Float64Array(2 * fftSize),
        meant: new Float64Array(2 * fftSize),
        known: knownMask(row, known.isKnownInk, known.captured, new Uint8Array(fftSize)),
      };
      reader.read(place.usefulStart, symbol.found);
      writeMeant(cycle, place, symbol.meant);
      if (symbol.known.includes(1)) read.push(symbol);
      yield Math.min(0.9, (0.9 * count) / places.length);
    }
    if (read.length < 2) break;
    drift = estimateDrift(read, fftSize, usefulSamples);
    const pivot = read.reduce((sum, { usefulStart }) => sum + usefulStart, 0) / read.length;
    const wasRatio: number = fit.ratio;
    fit.mixTurns += drift.turnsPerSample / fit.ratio;
    sigma = drift.clockErrorSigma;
    const trust = (CLOCK_PRIOR * CLOCK_PRIOR) / (CLOCK_PRIOR * CLOCK_PRIOR + sigma * sigma);
    if (!isCleared || wasRatio !== nominal.ratio) fit.ratio *= 1 + drift.clockError * trust;
    if (count >= places.length && !isCleared) {
      isCleared = true;
      if (Math.abs(fit.ratio / nominal.ratio - 1) < CLEAR * sigma) fit.ratio = nominal.ratio;
    }
    fit.isLocked = fit.ratio === 1;
    fit.originSamples += pivot * (wasRatio - fit.ratio);
    if (isFirst) {
      isFirst = false;
      reader = createCellReader(source, cycle, fit, advance);
      wrap = findWrap(source, cycle, fit, reader, drift.taps, known);
      if (cycle.layout.mode === 'burst' && cycle.isRepeat)
        places = places.filter(isPresent(cycle, reader, drift.taps, known));
    }
    // the channel is known well enough to lay the window into the guard by it
    if (isCleared) advance = advanceOf(cycle, known, drift.taps, drift.noisePower / read.length);
    reader = createCellReader(source, cycle, fit, advance);
    const inBurst = new Set(places.map(({ turn }) => turn));
    places = wholePlaces(source, cycle, fit, reader, mostSymbols + 1, wrap).filter(
      ({ turn }) => cycle.layout.mode === 'loop' || inBurst.has(turn),
    );
    if (places.length === 0) return null;
    count = Math.min(places.length, 2 * count);
  }
  if (read.length === 0) return null;
  const taps = drift?.taps ?? singleTaps(read[0]!, fftSize);
  const weights = new Float64Array(fftSize);
  for (const { meant, known: mask } of read)
    for (let p = 0; p < fftSize; p++)
      if (mask[p] === 1)
        weights[p] = weights[p]! + meant[2 * p]! * meant[2 * p]! + meant[2 * p + 1]! * meant[2 * p + 1]!;
  const delay = strongestDelay(taps, weights, fftSize) * oversampling;
  fit.originSamples += delay * fit.ratio;
  turnRamp(taps, delay / oversampling);
  const isCut = places.length > mostSymbols;
  yield 1;
  return {
    fit,
    places: places.slice(0, mostSymbols),
    drift,
    taps,
    noisePower: drift?.noisePower ?? 0,
    symbolsRead: read.length,
    clockError: drift === null ? null : fit.ratio / nominal.ratio - 1 || 0,
    clockErrorSigma: sigma,
    isClockShared: fit.ratio === nominal.ratio,
    isCut,
  };
}

/** True where not every turn holds the waveform, or at its own place: a burst, or a pad behind several repeats. */
function isTurnOpen(cycle: Cycle): boolean {
  return cycle.layout.mode === 'burst' || (cycle.isRepeat && cycle.layout.padSamples > 0);
}

/** The places within the part that was looked for; all where none is. */
function inPart(places: readonly Place[], found: FoundFrame, fit: CaptureFit): readonly Place[] {
  const inside = places.filter(({ usefulStart }) => {
    const at = fit.originSamples + usefulStart * fit.ratio;
    return at >= found.templateAt && at < found.templateAt + found.templateSamples;
  });
  return inside.length > 0 ? inside : places;
}

/** The turn whose cells follow most clearly from one subcarrier to the next: strong, and laid right. */
function clearestTurn(cycle: Cycle, reader: CellReader, places: readonly Place[], known: KnownCells): number {
  const { fftSize } = cycle.content;
  const sums = new Map<number, { re: number; im: number; symbols: number }>();
  const values = new Float64Array(2 * fftSize);
  const meant = new Float64Array(2 * fftSize);
  const mask = new Uint8Array(fftSize);
  for (const place of places) {
    const sum = sums.get(place.turn) ?? { re: 0, im: 0, symbols: 0 };
    if (sum.symbols >= FIRST_SYMBOLS) continue;
    sums.set(place.turn, sum);
    reader.read(place.usefulStart, values);
    writeMeant(cycle, place, meant);
    knownMask(rowOfPlace(cycle, place), known.isKnownInk, known.captured, mask);
    let lastRe = 0;
    let lastIm = 0;
    for (let p = 0; p < fftSize; p++) {
      if (mask[p] === 0) continue;
      const re = values[2 * p]! * meant[2 * p]! + values[2 * p + 1]! * meant[2 * p + 1]!;
      const im = values[2 * p + 1]! * meant[2 * p]! - values[2 * p]! * meant[2 * p + 1]!;
      sum.re += re * lastRe + im * lastIm;
      sum.im += im * lastRe - re * lastIm;
      lastRe = re;
      lastIm = im;
    }
    sum.symbols++;
  }
  let best = 0;
  let most = -1;
  for (const [turn, { re, im }] of sums) {
    const power = re * re + im * im;
    if (power > most) {
      most = power;
      best = turn;
    }
  }
  return best;
}

/** The `count` places nearest to `centre`, in order of time. */
function nearest(places: readonly Place[], centre: number, count: number): Place[] {
  if (count >= places.length) return [...places];
  let first = 0;
  while (
    first + count < places.length &&
    Math.abs(places[first + count]!.usefulStart - centre) < Math.abs(places[first]!.usefulStart - centre)
  )
    first++;
  return places.slice(first, first + count);
}

/** Symbols between which the document's frequency offset keeps its phase: all, where the file's turns are whole, else each cycle's own. */
function carrierGroups(cycle: Cycle): (place: Place) => number {
  const { frequencyOffsetHz, subcarrierSpacingHz, fftSize, oversampling } = cycle.content;
  const clock = (fftSize * oversampling * subcarrierSpacingHz[0]) / subcarrierSpacingHz[1];
  const turns = (frequencyOffsetHz * cycle.layout.samples) / clock;
  const isClosed = Math.abs(turns - Math.round(turns)) < 1e-6;
  return isClosed || cycle.layout.mode === 'burst' ? () => 0 : ({ turn }) => turn;
}

/** Y/X of one symbol. */
function singleTaps(symbol: ReadSymbol, fftSize: number): Float64Array {
  const taps = new Float64Array(2 * fftSize);
  for (let p = 0; p < fftSize; p++) {
    if (symbol.known[p] === 0) continue;
    const xRe = symbol.meant[2 * p]!;
    const xIm = symbol.meant[2 * p + 1]!;
    const power = xRe * xRe + xIm * xIm;
    if (power === 0) continue;
    taps[2 * p] = (symbol.found[2 * p]! * xRe + symbol.found[2 * p + 1]! * xIm) / power;
    taps[2 * p + 1] = (symbol.found[2 * p + 1]! * xRe - symbol.found[2 * p]! * xIm) / power;
  }
  return taps;
}

/** Takes a delay (base-rate samples) out of taps: times e^{+j2πkτ/N}. */
function turnRamp(taps: Float64Array, delay: number): void {
  const size = taps.length / 2;
  const half = Math.floor(size / 2);
  const unit = new Float64Array(2);
  for (let p = 0; p < size; p++) {
    writeUnitOfTurns(((p - half) * delay) / size, 0, unit, 0);
    const re = taps[2 * p]!;
    taps[2 * p] = re * unit[0]! - taps[2 * p + 1]! * unit[1]!;
    taps[2 * p + 1] = re * unit[1]! + taps[2 * p + 1]! * unit[0]!;
  }
}

/** How much a symbol looks like the known one through the channel, 0…1. */
function likeness(
  cycle: Cycle,
  reader: CellReader,
  taps: Float64Array,
  known: KnownCells,
  symbol: number,
  usefulStart: number,
): number {
  const { fftSize } = cycle.content;
  const found = new Float64Array(2 * fftSize);
  const meant = new Float64Array(2 * fftSize);
  reader.read(usefulStart, found);
  writeMeant(cycle, { symbol }, meant);
  const mask = knownMask(rowOfPlace(cycle, { symbol }), known.isKnownInk, known.captured, new Uint8Array(fftSize));
  const { re, im, expected, power } = compare(found, meant, taps, mask);
  const size = Math.sqrt(expected * power);
  return size > 0 ? Math.sqrt(re * re + im * im) / size : 0;
}

/** Σ Y·(ĤX)* over the cells of a mask, with both powers. */
export function compare(
  found: Float64Array,
  meant: Float64Array,
  taps: Float64Array,
  mask: Uint8Array,
): { re: number; im: number; expected: number; power: number } {
  let re = 0;
  let im = 0;
  let expected = 0;
  let power = 0;
  for (let p = 0; p < mask.length; p++) {
    if (mask[p] === 0) continue;
    const eRe = taps[2 * p]! * meant[2 * p]! - taps[2 * p + 1]! * meant[2 * p + 1]!;
    const eIm = taps[2 * p]! * meant[2 * p + 1]! + taps[2 * p + 1]! * meant[2 * p]!;
    const yRe = found[2 * p]!;
    const yIm = found[2 * p + 1]!;
    re += yRe * eRe + yIm * eIm;
    im += yIm * eRe - yRe * eIm;
    expected += eRe * eRe + eIm * eIm;
    power += yRe * yRe + yIm * yIm;
  }
  return { re, im, expected, power };
}

/** A symbol's common phase against the channel, turns. */
export function commonPhase(found: Float64Array, meant: Float64Array, taps: Float64Array, mask: Uint8Array): number {
  const { re, im } = compare(found, meant, taps, mask);
  return turnsOf(re, im);
}

/** Which repeat the one found is, where a pad stands behind the last: by whether the next repeats come at once or after the pad. Null where no pad shows. */
function findWrap(
  source: SampleSource,
  cycle: Cycle,
  fit: CaptureFit,
  reader: CellReader,
  taps: Float64Array,
  known: KnownCells,
): FileWrap | null {
  const { repeats, padSamples, mode } = cycle.layout;
  if (!cycle.isRepeat || mode !== 'loop' || padSamples === 0) return null;
  const isInside = (start: number): boolean => {
    const { first, end } = reader.reach(start);
    return first >= 0 && end <= source.samples;
  };
  for (const direction of [1, -1])
    for (let step = 1; step <= repeats; step++) {
      const plain = turnStart(cycle, direction * step, null) + cycle.usefulStarts[0]!;
      const padded = plain + direction * padSamples;
      if (!isInside(plain) || !isInside(padded)) break;
      if (likeness(cycle, reader, taps, known, 0, padded) > likeness(cycle, reader, taps, known, 0, plain))
        return { repeat: direction === 1 ? repeats - step : step - 1 };
    }
  return null;
}

/** Whether a burst's repeat is there at all: half as like as the one found. */
function isPresent(
  cycle: Cycle,
  reader: CellReader,
  taps: Float64Array,
  known: KnownCells,
): (place: Place, index: number, all: readonly Place[]) => boolean {
  const seen = new Map<number, boolean>();
  let own: number | null = null;
  return (place, _index, all) => {
    own ??= Math.max(
      ...all
        .filter(({ turn }) => turn === 0)
        .slice(0, 4)
        .map(({ symbol, usefulStart }) => likeness(cycle, reader, taps, known, symbol, usefulStart)),
      0,
    );
    const told = seen.get(place.turn);
    if (told !== undefined) return told;
    const isThere = likeness(cycle, reader, taps, known, place.symbol, place.usefulStart) >= 0.5 * own;
    seen.set(place.turn, isThere);
    return isThere;
  };
}
