import type { Constellation, WaveformContent } from './types';

/** An exact positive rational, reduced. */
export interface ExactFraction {
  numerator: bigint;
  denominator: bigint;
}

/** How many cells each ink and each subcarrier hold; kept beside a grid so that one edited symbol costs one row. */
export interface CellCensus {
  /** Cells of each ink of the tray (64 places), ink 0 is null. */
  readonly cellsOfInk: Float64Array;
  /** For each position p = k + ⌊N/2⌋ the number of symbols that use it (any ink but a null one). */
  readonly usesOfPosition: Uint32Array;
  /** Takes one symbol's row of N inks out and puts another in; O(N), allocates nothing. */
  replaceSymbol(before: Uint8Array, after: Uint8Array): void;
}

/** All figures that follow from the numbers and the grid. Frame means one repeat without its gap. */
export interface DerivedFigures {
  /** N · M · spacing, exact, and the nearest double. */
  sampleClock: ExactFraction;
  sampleClockHz: number;
  subcarrierSpacingHz: number;
  usedCells: number;
  dataCells: number;
  pilotCells: number;
  /** Subcarriers used in any symbol, and the outermost of them (null when nothing is painted). */
  usedSubcarriers: number;
  lowestSubcarrier: number | null;
  highestSubcarrier: number | null;
  loadedHz: number;
  paintedSpanHz: number;
  /** 1/Δf; T_s = mean (N + N_cp)/(N·Δf); one frame; one frame with its gap. */
  usefulTimeSec: number;
  symbolTimeSec: number;
  frameTimeSec: number;
  repeatTimeSec: number;
  fileSamples: number;
  fileTimeSec: number;
  /** Before any coding. */
  bitsPerFrame: number;
  /** Bits over the frame's time with prefixes, without gap. */
  bitRatePerSec: number;
  /** Bit rate over painted span, bit/s/Hz; null when nothing is painted. */
  efficiency: number | null;
  /** ΣN_cp / Σ(N + N_cp), 0…½. */
  prefixOverhead: number;
  /** Pilot cells over used cells; null when nothing is painted. */
  pilotOverhead: number | null;
  /** Least N_cp − W at the base rate, and (N_cp − W)/(N·Δf). */
  usableGuardSamples: number;
  usableGuardSec: number;
}

const BITS: Record<Constellation, number> = {
  bpsk: 1,
  'pi2-bpsk': 1,
  qpsk: 2,
  '16qam': 4,
  '64qam': 6,
  '256qam': 8,
  '1024qam': 10,
  '4096qam': 12,
};

function greatestCommonDivisor(a: bigint, b: bigint): bigint {
  while (b !== 0n) [a, b] = [b, a % b];
  return a;
}

/** A reduced fraction of two positive integers (Euclid). */
export function exactFraction(numerator: bigint, denominator: bigint): ExactFraction {
  const divisor = greatestCommonDivisor(numerator, denominator);
  return { numerator: numerator / divisor, denominator: denominator / divisor };
}

/**
 * The double nearest to a fraction (denominator positive, ties to even), correct to the last bit: the quotient is taken to 64 bits or more
 * with a sticky last bit, so that the one rounding of Number(bigint) is the only one. Range: sizes from 2^−900 to 2^900, and 0.
 */
export function fractionToNumber({ numerator, denominator }: ExactFraction): number {
  if (numerator === 0n) return 0;
  if (numerator < 0n) return -fractionToNumber({ numerator: -numerator, denominator });
  const shift = BigInt(Math.max(0, denominator.toString(2).length - numerator.toString(2).length + 66));
  const scaled = numerator << shift;
  const quotient = scaled / denominator;
  const sticky = quotient * denominator === scaled ? 0n : 1n;
  let value = Number((quotient << 1n) | sticky);
  // a division by powers of two is exact: the value stays normal
  for (let left = Number(shift) + 1; left > 0; left -= 500) value /= powerOfTwo(Math.min(left, 500));
  return value;
}

function powerOfTwo(exponent: number): number {
  let value = 1;
  for (let i = 0; i < exponent; i++) value *= 2;
  return value;
}

/** The sample clock N · M · spacing as an exact fraction of Hz. */
export function sampleClock(
  content: Pick<WaveformContent, 'fftSize' | 'oversampling' | 'subcarrierSpacingHz'>,
): ExactFraction {
  const [numerator, denominator] = content.subcarrierSpacingHz;
  return exactFraction(BigInt(content.fftSize) * BigInt(content.oversampling) * BigInt(numerator), BigInt(denominator));
}

/**
 * Counts the cells of a grid. With `cells` (L·N inks, symbol by symbol) it reads those, else the document's runs: each distinct row
 * once, times the symbols that use it. Costs O(cells) or O(runs + rows·N). The census owns its arrays; nothing given is kept.
 */
export function createCellCensus(content: WaveformContent, cells?: Uint8Array): CellCensus {
  const size = content.fftSize;
  const isNull = new Uint8Array(256).fill(1);
  content.tray.forEach((ink, id) => (isNull[id] = ink.role === 'null' ? 1 : 0));
  const cellsOfInk = new Float64Array(64);
  const usesOfPosition = new Uint32Array(size);
  const add = (row: Uint8Array, times: number): void => {
    for (let p = 0; p < size; p++) {
      const ink = row[p]!;
      cellsOfInk[ink] = cellsOfInk[ink]! + times;
      if (isNull[ink] === 0) usesOfPosition[p] = usesOfPosition[p]! + times;
    }
  };
  if (cells) {
    for (let l = 0; l < content.symbolCount; l++) add(cells.subarray(l * size, (l + 1) * size), 1);
  } else {
    const uses = new Uint32Array(content.grid.rows.length);
    for (const row of content.grid.rowOfSymbol) uses[row] = uses[row]! + 1;
    const scratch = new Uint8Array(size);
    content.grid.rows.forEach((runs, row) => {
      expandRow(runs, scratch);
      add(scratch, uses[row]!);
    });
  }
  return {
    cellsOfInk,
    usesOfPosition,
    replaceSymbol(before, after) {
      add(before, -1);
      add(after, 1);
    },
  };
}

function expandRow(runs: readonly number[], out: Uint8Array): void {
  let position = 0;
  for (let i = 0; i + 1 < runs.length; i += 2) {
    out.fill(runs[i + 1]!, position, position + runs[i]!);
    position += runs[i]!;
  }
}

/** ΣN_cp over the frame's L symbols, at the base rate; the list is used cyclically. */
export function prefixSum(content: Pick<WaveformContent, 'prefixSamples' | 'symbolCount'>): number {
  const list = content.prefixSamples;
  const cycle = list.reduce((sum, value) => sum + value, 0);
  const rest = content.symbolCount % list.length;
  return (
    cycle * Math.floor(content.symbolCount / list.length) + list.slice(0, rest).reduce((sum, value) => sum + value, 0)
  );
}

/** Samples of the whole file: (repeats·(ΣN_cp + L·N + gap))·M + pad, and W·M more in a burst. At most 2^33 in a valid document. */
export function fileSamples(content: WaveformContent): number {
  const { timing, oversampling, overlapSamples } = content;
  const frame = prefixSum(content) + content.symbolCount * content.fftSize;
  const tail = timing.mode === 'burst' ? overlapSamples * oversampling : 0;
  return timing.repeats * (frame + timing.gapSamples) * oversampling + timing.padSamples + tail;
}

/** Least N_cp − W over the frame's symbols, at the base rate: ramps stand inside the prefix. */
export function usableGuard(content: WaveformContent): number {
  return Math.min(...content.prefixSamples.slice(0, content.symbolCount)) - content.overlapSamples;
}

/** Bits that one cell of each ink carries (0 where the ink carries none), by ink number. */
export function bitsOfInk(content: Pick<WaveformContent, 'tray'>): number[] {
  return content.tray.map((ink) => (ink.role === 'data' ? BITS[ink.value.constellation] : 0));
}

/**
 * Every figure derived from the numbers and the grid. `source` is a census kept by the caller, or the cells (L·N), or nothing (the
 * document's own runs). Used means not null; loaded = subcarriers used in any symbol · Δf; span = (k_max − k_min + 1) · Δf;
 * T_s = mean (N + N_cp)/(N·Δf); rate = bits of a frame over its time, prefixes in, gap out. Hz, s and samples as the names say; a
 * figure without meaning (nothing painted) is null.
 */
export function deriveFigures(content: WaveformContent, source?: Uint8Array | CellCensus): DerivedFigures {
  const census = source === undefined || source instanceof Uint8Array ? createCellCensus(content, source) : source;
  const { fftSize, symbolCount, timing, oversampling } = content;
  const clock = sampleClock(content);
  const clockHz = fractionToNumber(clock);
  const [numerator, denominator] = content.subcarrierSpacingHz;
  const spacingHz = numerator / denominator;
  const prefixes = prefixSum(content);
  const frameSamples = prefixes + symbolCount * fftSize;

  let lowest = -1;
  let highest = -1;
  let usedSubcarriers = 0;
  for (let p = 0; p < fftSize; p++) {
    if (census.usesOfPosition[p] === 0) continue;
    if (lowest < 0) lowest = p;
    highest = p;
    usedSubcarriers++;
  }
  let usedCells = 0;
  let dataCells = 0;
  let pilotCells = 0;
  let bitsPerFrame = 0;
  const bits = bitsOfInk(content);
  content.tray.forEach((ink, id) => {
    const count = census.cellsOfInk[id]!;
    if (ink.role !== 'null') usedCells += count;
    if (ink.role === 'data') dataCells += count;
    if (ink.role === 'pilot') pilotCells += count;
    bitsPerFrame += count * bits[id]!;
  });
  // seconds from samples at the base rate: n/(N·Δf)
  const seconds = (samples: number): number => (samples * denominator) / (fftSize * numerator);
  const frameTimeSec = seconds(frameSamples);
  const bitRatePerSec = bitsPerFrame / frameTimeSec;
  const paintedSpanHz = lowest < 0 ? 0 : (highest - lowest + 1) * spacingHz;
  const usableGuardSamples = usableGuard(content);
  const samples = fileSamples(content);
  const half = Math.floor(fftSize / 2);
  return {
    sampleClock: clock,
    sampleClockHz: clockHz,
    subcarrierSpacingHz: spacingHz,
    usedCells,
    dataCells,
    pilotCells,
    usedSubcarriers,
    lowestSubcarrier: lowest < 0 ? null : lowest - half,
    highestSubcarrier: lowest < 0 ? null : highest - half,
    loadedHz: usedSubcarriers * spacingHz,
    paintedSpanHz,
    usefulTimeSec: denominator / numerator,
    symbolTimeSec: frameTimeSec / symbolCount,
    frameTimeSec,
    repeatTimeSec: seconds(frameSamples + timing.gapSamples),
    fileSamples: samples,
    fileTimeSec: seconds(samples / oversampling),
    bitsPerFrame,
    bitRatePerSec,
    efficiency: lowest < 0 ? null : bitRatePerSec / paintedSpanHz,
    prefixOverhead: prefixes / frameSamples,
    pilotOverhead: usedCells === 0 ? null : pilotCells / usedCells,
    usableGuardSamples,
    usableGuardSec: seconds(usableGuardSamples),
  };
}
