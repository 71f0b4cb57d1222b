import type { RunGrid } from '@/lib/synth/index';
import { canonicalGrid } from './runs';

/** A grid from the ink of each cell, by signed subcarrier k = −⌊N/2⌋ … ⌈N/2⌉−1 and symbol, in its one spelling. */
export function paintedGrid(
  fftSize: number,
  symbolCount: number,
  inkOf: (subcarrier: number, symbol: number) => number,
): RunGrid {
  const lowest = -Math.floor(fftSize / 2);
  const rows: number[][] = [];
  for (let symbol = 0; symbol < symbolCount; symbol += 1) {
    const row: number[] = [];
    for (let position = 0; position < fftSize; position += 1) row.push(1, inkOf(lowest + position, symbol));
    rows.push(row);
  }
  return canonicalGrid({ rows, rowOfSymbol: rows.map((_row, symbol) => symbol) });
}
