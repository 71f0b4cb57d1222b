import type { RunGrid } from '@/lib/synth/index';

function mergedRow(row: readonly number[]): number[] {
  const merged: number[] = [];
  for (let at = 0; at + 1 < row.length; at += 2) {
    const length = row[at]!;
    const ink = row[at + 1]!;
    if (length === 0) continue;
    if (merged.length > 0 && merged.at(-1) === ink) merged[merged.length - 2]! += length;
    else merged.push(length, ink);
  }
  return merged;
}

/**
 * Any runs to the one spelling that the digest knows: neighbours of one ink merged, rows unique and in order of first use,
 * rows that no symbol uses dropped. Lengths are not judged here; the input is left alone.
 */
export function canonicalGrid(grid: RunGrid): RunGrid {
  const rows: number[][] = [];
  const placeOfText = new Map<string, number>();
  const placeOfRow = new Map<number, number>();
  const rowOfSymbol = grid.rowOfSymbol.map((rowAt) => {
    const known = placeOfRow.get(rowAt);
    if (known !== undefined) return known;
    const row = mergedRow(grid.rows[rowAt] ?? []);
    const text = row.join();
    let place = placeOfText.get(text);
    if (place === undefined) {
      place = rows.push(row) - 1;
      placeOfText.set(text, place);
    }
    placeOfRow.set(rowAt, place);
    return place;
  });
  return { rows, rowOfSymbol };
}
