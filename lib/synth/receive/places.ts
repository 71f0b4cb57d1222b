import type { SampleSource } from '../measure/reconstructedPeak';
import type { CaptureFit, CellReader } from './captureCells';
import type { Cycle } from './cycle';

/** One symbol of the capture. */
export interface Place {
  /** Which cycle, counted from the one found (negative before it). */
  turn: number;
  /** Symbol of the cycle, 0…cycle.symbols − 1. */
  symbol: number;
  /** First sample of its useful part, in file samples after the origin. */
  usefulStart: number;
}

/**
 * The first `most` symbols whose window lies whole within the capture, in order. A burst comes back after a time that nobody knows, so only
 * as many cycles as the file has are listed, from the one found. Where a pad stands behind every so many repeats, `wrap` says so.
 */
export function wholePlaces(
  source: SampleSource,
  cycle: Cycle,
  fit: CaptureFit,
  reader: CellReader,
  most: number,
  wrap: FileWrap | null,
): Place[] {
  const { periodSamples, symbols, usefulStarts } = cycle;
  const period = periodSamples * fit.ratio;
  const isBurst = cycle.layout.mode === 'burst';
  const cycles = cycle.isRepeat ? cycle.layout.repeats : 1;
  const pads = wrap === null ? 0 : (cycle.layout.padSamples / (cycles * periodSamples)) * 2;
  let turn = Math.floor((-fit.originSamples / period) * (1 + pads)) - 2;
  let lastTurn = Math.ceil((source.samples - fit.originSamples) / period) + 1;
  if (isBurst) {
    turn = Math.max(turn, 1 - cycles);
    lastTurn = Math.min(lastTurn, cycles - 1);
  }
  const places: Place[] = [];
  for (; turn <= lastTurn && places.length < most; turn++) {
    const start = turnStart(cycle, turn, wrap);
    if (fit.originSamples + (start + periodSamples) * fit.ratio < 0) continue;
    for (let symbol = 0; symbol < symbols && places.length < most; symbol++) {
      const usefulStart = start + usefulStarts[symbol]!;
      const { first, end } = reader.reach(usefulStart);
      if (first < 0 || end > source.samples) continue;
      places.push({ turn, symbol, usefulStart });
    }
  }
  return places;
}

/** Which repeat of the file the one found is: its number, so that the pads' places are known. */
export interface FileWrap {
  repeat: number;
}

/** First sample of a turn in file samples after the origin. */
export function turnStart(cycle: Cycle, turn: number, wrap: FileWrap | null): number {
  const pads = wrap === null ? 0 : Math.floor((turn + wrap.repeat) / cycle.layout.repeats);
  return turn * cycle.periodSamples + pads * cycle.layout.padSamples;
}

/** The values that the document means for a place (2·N); `out` is written. */
export function writeMeant(cycle: Cycle, place: Pick<Place, 'symbol'>, out: Float64Array): void {
  const { symbolCount } = cycle.layout;
  const symbol = place.symbol % symbolCount;
  cycle.values.write((place.symbol - symbol) / symbolCount, symbol, out);
}

/** The N inks of a place; shared with the cycle, not to be changed. */
export function rowOfPlace(cycle: Cycle, place: Pick<Place, 'symbol'>): Uint8Array {
  const { fftSize } = cycle.content;
  const symbol = place.symbol % cycle.layout.symbolCount;
  return cycle.cells.subarray(symbol * fftSize, (symbol + 1) * fftSize);
}

/** Up to `most` of the places, spread evenly, the first and the last among them. */
export function spreadPlaces(places: readonly Place[], most: number): Place[] {
  if (places.length <= most) return [...places];
  return Array.from({ length: most }, (_, i) => places[Math.round((i * (places.length - 1)) / (most - 1))]!);
}
