import type { RunGrid } from '@/lib/synth/index';
import { canonicalGrid } from './runs';

/**
 * A grid from the ink of each cell, by signed subcarrier k = −⌊N/2⌋ … ⌈N/2⌉−1 and symbol, in its one spelling. Where the
 * painting repeats, `patternOf` names the first symbol that looks like this one, and only that is asked for.
 */
export function paintedGrid(
  fftSize: number,
  symbolCount: number,
  inkOf: (subcarrier: number, symbol: number) => number,
  patternOf: (symbol: number) => number = (symbol) => symbol,
): RunGrid {
  const lowest = -Math.floor(fftSize / 2);
  const rows: number[][] = [];
  const rowOfPattern = new Map<number, number>();
  const rowOfSymbol: number[] = [];
  for (let symbol = 0; symbol < symbolCount; symbol += 1) {
    const pattern = patternOf(symbol);
    let place = rowOfPattern.get(pattern);
    if (place === undefined) {
      const row: number[] = [];
      for (let position = 0; position < fftSize; position += 1) {
        const ink = inkOf(lowest + position, pattern);
        if (row.at(-1) === ink) row[row.length - 2]! += 1;
        else row.push(1, ink);
      }
      place = rows.push(row) - 1;
      rowOfPattern.set(pattern, place);
    }
    rowOfSymbol.push(place);
  }
  return canonicalGrid({ rows, rowOfSymbol });
}
