import { sineCosine } from '../math/turns';
import { createEvmMeter } from '../measure/evm';
import type { EvmReport } from '../measure/types';
import type { SampleSource } from '../measure/reconstructedPeak';
import { createCellReader } from './captureCells';
import { createTapSums, interpolateTaps, type ImpulseResponse } from './channel';
import type { Cycle } from './cycle';
import { createImbalanceMeter } from './imbalance';
import { createNullPowerMeter } from './nullPower';
import { rowOfPlace, spreadPlaces, writeMeant, type Place } from './places';
import { constantSource, mirroredSource } from './sources';
import { commonPhase, knownMask, type KnownCells, type TrackedCapture } from './track';
import { advanceOf, impulseOf, usedSpan } from './window';
import type { ChannelSource, ConstellationPoints, ImbalanceReport, NullPower } from './types';

/** All that cells tell; powers in the capture's units. */
export interface MeasuredCells {
  evm: EvmReport;
  isOverData: boolean;
  /** ρ of the equalized cells with what the fit gives away taken off; null where one symbol was all. */
  correlation: number | null;
  channelSource: ChannelSource | 'oneGain';
  /** The channel's taps (2·N) and known cells behind each (N). */
  taps: Float64Array;
  counts: Float64Array;
  impulse: ImpulseResponse | null;
  advanceSamples: number;
  symbolCounts: Uint32Array;
  /** Mean Σ|Y|²/N over the symbols; Σ|ĤX|² / Σ|X|²; Σ|ĤX|² over Σ|Y − ĤX|², the fit's share corrected. */
  levelPower: number;
  gainPower: number;
  snr: number | null;
  nulls: NullPower;
  imbalance: ImbalanceReport;
  constellation: ConstellationPoints;
}

const POINTS_MOST = 4096;
const KEPT_BYTES = 67108864;
const IMBALANCE_SYMBOLS = 48;

/**
 * Reads every place twice: first for the channel, then for all figures. `signalPower`: mean |x|² of the capture (full scale 1), for the DC.
 * A generator: each `yield` is the share done.
 */
export function* measureCells(
  source: SampleSource,
  cycle: Cycle,
  tracked: TrackedCapture,
  known: KnownCells,
  choice: ChannelSource,
  signalPower: number,
): Generator<number, MeasuredCells> {
  const { fftSize, symbolCount, tray } = cycle.content;
  const { places, fit } = tracked;
  const { first, last } = usedSpan(cycle, known.captured);
  const advance =
    tracked.drift === null
      ? Math.floor(Math.max(0, cycle.guardSamples) / 2)
      : advanceOf(cycle, known, tracked.taps, tracked.noisePower / Math.max(1, tracked.symbolsRead));
  const reader = createCellReader(source, cycle, fit, advance);
  const readable = places.filter(({ usefulStart }) => {
    const reach = reader.reach(usefulStart);
    return reach.first >= 0 && reach.end <= source.samples;
  });

  const keeps = readable.length * fftSize * 16 <= KEPT_BYTES;
  const kept: (Float64Array | undefined)[] = [];
  const values = new Float64Array(2 * fftSize);
  const meant = new Float64Array(2 * fftSize);
  const mask = new Uint8Array(fftSize);
  const channelMask = new Uint8Array(fftSize);
  const isChannelInk = choice === 'pilots' ? known.isChannelInk : known.isKnownInk;
  const valuesOf = (place: Place, i: number): Float64Array => {
    const before = kept[i];
    if (before) return before;
    reader.read(place.usefulStart, values);
    if (keeps) kept[i] = values.slice();
    return values;
  };
  const sums = createTapSums(fftSize);
  for (const [i, place] of readable.entries()) {
    const found = valuesOf(place, i);
    writeMeant(cycle, place, meant);
    knownMask(rowOfPlace(cycle, place), isChannelInk, known.captured, channelMask);
    if (channelMask.includes(1))
      sums.add(found, meant, channelMask, commonPhase(found, meant, tracked.taps, channelMask));
    yield (0.5 * (i + 1)) / readable.length;
  }
  const { counts } = sums;
  const mostCounts = counts.reduce((most, count) => Math.max(most, count), 0);
  // one symbol alone: a tap for each of its cells would explain whatever was received
  const isOneGain = choice === 'allKnown' && mostCounts < 2;
  const taps = isOneGain ? oneGainTaps(sums.taps(), counts, fftSize) : sums.taps();
  if (choice === 'pilots' && !isOneGain) interpolateTaps(taps, counts, first, last);

  const kept1 = keptShares(cycle, readable, known, isChannelInk, counts, isOneGain, choice);
  const estimate = {
    taps,
    from: choice === 'pilots' ? ('tapFromPilots' as const) : ('tapPerSubcarrier' as const),
    symbolsPerTap: kept1.symbolsPerTap,
  };
  const dataInks = tray.flatMap(({ role }, ink) => (role === 'data' ? [ink] : []));
  const isOverData = dataInks.some((ink) => kept1.cellsOfInk[ink]! > 0);
  const knownInks = tray.flatMap((_, ink) => (known.isKnownInk[ink] === 1 ? [ink] : []));
  const meterOptions = {
    fftSize,
    symbolCount,
    inkCount: tray.length,
    estimate,
    dftWindow: `${advance} samples before the useful part`,
    phaseTracking: 'perSymbol' as const,
  };
  const allMeter = createEvmMeter({
    ...meterOptions,
    inks: knownInks,
    kept: kept1.shares,
    cellsWords: 'all known cells',
  });
  const meter = isOverData
    ? createEvmMeter({ ...meterOptions, inks: dataInks, kept: kept1.shares, cellsWords: 'data cells' })
    : allMeter;
  const nulls = createNullPowerMeter(cycle, known.captured);
  const symbolCounts = new Uint32Array(symbolCount);
  const bandRow = new Uint8Array(fftSize);
  const constellation = createPointCollector(kept1.cells);
  let levelPower = 0;
  let signal = 0;
  let meantPower = 0;
  let error = 0;
  let lastTurn: number | null = null;
  const phases: number[] = [];
  for (const [i, place] of readable.entries()) {
    const found = valuesOf(place, i);
    const row = rowOfPlace(cycle, place);
    const symbol = place.symbol % symbolCount;
    writeMeant(cycle, place, meant);
    knownMask(row, known.isKnownInk, known.captured, mask);
    knownMask(row, isChannelInk, known.captured, channelMask);
    const phase = commonPhase(found, meant, taps, channelMask.includes(1) ? channelMask : mask);
    phases[i] = phase;
    nulls.add(symbol, found);
    const turned = turnedBack(found, phase);
    for (const value of found) levelPower += (value * value) / fftSize;
    for (let p = 0; p < fftSize; p++) bandRow[p] = mask[p] === 1 ? row[p]! : 0;
    for (let p = 0; p < fftSize; p++) {
      const hPower = taps[2 * p]! * taps[2 * p]! + taps[2 * p + 1]! * taps[2 * p + 1]!;
      if (mask[p] === 0 || hPower === 0) continue;
      const eRe = taps[2 * p]! * meant[2 * p]! - taps[2 * p + 1]! * meant[2 * p + 1]!;
      const eIm = taps[2 * p]! * meant[2 * p + 1]! + taps[2 * p + 1]! * meant[2 * p]!;
      const dRe = turned[2 * p]! - eRe;
      const dIm = turned[2 * p + 1]! - eIm;
      signal += eRe * eRe + eIm * eIm;
      meantPower += meant[2 * p]! * meant[2 * p]! + meant[2 * p + 1]! * meant[2 * p + 1]!;
      error += dRe * dRe + dIm * dIm;
      constellation.add(
        (turned[2 * p]! * taps[2 * p]! + turned[2 * p + 1]! * taps[2 * p + 1]!) / hPower,
        (turned[2 * p + 1]! * taps[2 * p]! - turned[2 * p]! * taps[2 * p + 1]!) / hPower,
        row[p]!,
      );
    }
    allMeter.add(symbol, bandRow, turned, meant);
    if (meter !== allMeter) meter.add(symbol, bandRow, turned, meant);
    symbolCounts[symbol] = symbolCounts[symbol]! + 1;
    if (place.turn !== lastTurn) {
      allMeter.endFrame();
      if (meter !== allMeter) meter.endFrame();
      lastTurn = place.turn;
    }
    yield 0.5 + (0.4 * (i + 1)) / readable.length;
  }
  const imbalance = createImbalanceMeter();
  yield* measureImbalance(source, cycle, tracked, known, readable, taps, advance, imbalance);
  const allReport = allMeter.report();
  const report = meter.report();
  const evm = {
    ...report,
    byInk: allReport.byInk,
    recipe: { ...report.recipe, estimate: isOneGain ? ('oneGain' as const) : report.recipe.estimate },
  };
  const share = kept1.shares.all;
  const r = allReport.correlation;
  // the taps' own noise is no signal
  const trueSignal = share > 0 ? Math.max(0, signal - (error / share) * (1 - share)) : signal;
  return {
    evm,
    isOverData,
    correlation: isOneGain || share <= 0 ? null : Math.sqrt(Math.max(0, (r * r - (1 - share)) / share)),
    channelSource: isOneGain ? 'oneGain' : choice,
    taps,
    counts,
    impulse: isOneGain
      ? null
      : impulseOf(cycle, known.captured, taps, error / Math.max(1, kept1.cells) / Math.max(1, mostCounts)),
    advanceSamples: advance,
    symbolCounts,
    levelPower: levelPower / Math.max(1, readable.length),
    gainPower: meantPower > 0 ? trueSignal / meantPower : 0,
    snr: share > 0 && error > 0 && trueSignal > 0 ? trueSignal / (error / share) : null,
    nulls: nulls.result(),
    imbalance: imbalance.result(signalPower),
    constellation: constellation.result(),
  };
}

/** One gain for all: the mean of the taps, weighted evenly, where there is one. */
function oneGainTaps(taps: Float64Array, counts: Float64Array, fftSize: number): Float64Array {
  let re = 0;
  let im = 0;
  let known = 0;
  for (let p = 0; p < fftSize; p++) {
    if (counts[p] === 0) continue;
    re += taps[2 * p]!;
    im += taps[2 * p + 1]!;
    known++;
  }
  const gain = new Float64Array(2 * fftSize);
  for (let p = 0; p < fftSize && known > 0; p++) {
    if (counts[p] === 0) continue;
    gain[2 * p] = re / known;
    gain[2 * p + 1] = im / known;
  }
  return gain;
}

function turnedBack(found: Float64Array, phaseTurns: number): Float64Array {
  const { cosine, sine } = sineCosine(-phaseTurns);
  const turned = new Float64Array(found.length);
  for (let i = 0; i < found.length; i += 2) {
    turned[i] = found[i]! * cosine - found[i + 1]! * sine;
    turned[i + 1] = found[i]! * sine + found[i + 1]! * cosine;
  }
  return turned;
}

interface KeptShares {
  shares: { all: number; byInk: Float64Array; bySubcarrier: Float64Array };
  symbolsPerTap: number | null;
  cellsOfInk: Float64Array;
  cells: number;
}

/** What the fit leaves of the error: each tap takes one complex unknown from its cells, each symbol's phase half a one. Cells outside the fit keep all. */
function keptShares(
  cycle: Cycle,
  places: readonly Place[],
  known: KnownCells,
  isChannelInk: Uint8Array,
  counts: Float64Array,
  isOneGain: boolean,
  choice: ChannelSource,
): KeptShares {
  const { fftSize, tray } = cycle.content;
  const cellsOfInk = new Float64Array(tray.length);
  const mask = new Uint8Array(fftSize);
  let cells = 0;
  let fitted = 0;
  let phases = 0;
  for (const place of places) {
    const row = rowOfPlace(cycle, place);
    knownMask(row, known.isKnownInk, known.captured, mask);
    let isFitted = false;
    for (let p = 0; p < fftSize; p++) {
      if (mask[p] === 0) continue;
      const ink = row[p]!;
      cells++;
      cellsOfInk[ink] = cellsOfInk[ink]! + 1;
      if (isChannelInk[ink] === 1) {
        fitted++;
        isFitted = true;
      }
    }
    if (isFitted) phases++;
  }
  const taps = isOneGain ? 1 : counts.reduce((sum, count) => sum + (count > 0 ? 1 : 0), 0);
  // the first symbol's phase is the channel's own
  const unknowns = taps + Math.max(0, phases - 1) / 2;
  const ofFitted = fitted > 0 ? Math.max(0, 1 - unknowns / fitted) : 1;
  const phaseShare = fitted > 0 ? Math.max(0, phases - 1) / 2 / fitted : 0;
  const isAll = choice === 'allKnown';
  return {
    shares: {
      all: isAll ? ofFitted : 1,
      byInk: Float64Array.from(tray, (_, ink) => (isChannelInk[ink] === 1 ? ofFitted : 1)),
      bySubcarrier: Float64Array.from(counts, (count) => {
        if (!isAll || isOneGain) return isAll ? ofFitted : 1;
        return count < 2 ? 0 : Math.max(0, 1 - 1 / count - phaseShare);
      }),
    },
    symbolsPerTap: isAll && !isOneGain && taps > 0 ? fitted / taps : null,
    cellsOfInk,
    cells,
  };
}

interface PointCollector {
  add(re: number, im: number, ink: number): void;
  result(): ConstellationPoints;
}

/** Every n-th point, n odd and no divisor of usual row lengths, so that all subcarriers come to be seen. */
function createPointCollector(cells: number): PointCollector {
  const stride = Math.max(1, 2 * Math.ceil(cells / POINTS_MOST / 2) + 1);
  const every = cells <= POINTS_MOST ? 1 : stride;
  const points: number[] = [];
  const inks: number[] = [];
  let seen = 0;
  return {
    add(re, im, ink) {
      if (seen++ % every !== 0) return;
      points.push(re, im);
      inks.push(ink);
    },
    result: () => ({ points: Float32Array.from(points), inks: Uint8Array.from(inks) }),
  };
}

/** Feeds what the channel does not explain of some symbols to the imbalance meter. */
function* measureImbalance(
  source: SampleSource,
  cycle: Cycle,
  tracked: TrackedCapture,
  known: KnownCells,
  places: readonly Place[],
  taps: Float64Array,
  advance: number,
  meter: ReturnType<typeof createImbalanceMeter>,
): Generator<number, void> {
  const { fftSize } = cycle.content;
  const half = Math.floor(fftSize / 2);
  const plain = createCellReader(source, cycle, tracked.fit, advance);
  const conjugate = createCellReader(mirroredSource(source), cycle, tracked.fit, advance);
  const one = createCellReader(constantSource(source.samples), cycle, tracked.fit, advance);
  const meant = new Float64Array(2 * fftSize);
  const buffers = [0, 1, 2, 3].map(() => new Float64Array(2 * fftSize));
  const [found, mirrored, constant, generator] = buffers as [Float64Array, Float64Array, Float64Array, Float64Array];
  const mask = new Uint8Array(fftSize);
  const counts = new Uint8Array(fftSize);
  const chosen = spreadPlaces(places, IMBALANCE_SYMBOLS);
  for (const [i, place] of chosen.entries()) {
    plain.read(place.usefulStart, found);
    conjugate.read(place.usefulStart, mirrored);
    one.read(place.usefulStart, constant);
    writeMeant(cycle, place, meant);
    const row = rowOfPlace(cycle, place);
    knownMask(row, known.isKnownInk, known.captured, mask);
    const phase = commonPhase(found, meant, taps, mask);
    const turned = turnedBack(found, phase);
    const turnedMirror = turnedBack(mirrored, phase);
    const turnedOne = turnedBack(constant, phase);
    generator.fill(0);
    for (let p = 0; p < fftSize; p++) {
      const ink = row[p]!;
      const isNull = cycle.content.tray[ink]!.role === 'null';
      counts[p] = (mask[p] === 1 || isNull) && Math.abs(p - half) <= known.captured ? 1 : 0;
      const hRe = taps[2 * p]!;
      const hIm = taps[2 * p + 1]!;
      turned[2 * p] = turned[2 * p]! - (hRe * meant[2 * p]! - hIm * meant[2 * p + 1]!);
      turned[2 * p + 1] = turned[2 * p + 1]! - (hRe * meant[2 * p + 1]! + hIm * meant[2 * p]!);
      const opposite = 2 * half - p;
      if (opposite < 0 || opposite >= fftSize) continue;
      const xRe = meant[2 * opposite]!;
      const xIm = 0 - meant[2 * opposite + 1]!;
      generator[2 * p] = hRe * xRe - hIm * xIm;
      generator[2 * p + 1] = hRe * xIm + hIm * xRe;
    }
    meter.add(turned, turnedMirror, turnedOne, generator, counts);
    yield 0.9 + (0.1 * (i + 1)) / chosen.length;
  }
}
