import { demand } from '../errors';
import type { RunGrid } from '../types';

/** The lowest subcarrier k = −⌊N/2⌋ (−8 for 16, −12 for 25); position p of a symbol is k + ⌊N/2⌋. */
export function lowestSubcarrier(fftSize: number): number {
  return -Math.floor(fftSize / 2);
}

/** Throws SynthError `bad_content` when a row does not fill exactly N positions or is missing. */
export function demandWholeRows(grid: RunGrid, fftSize: number): void {
  for (const runs of grid.rows) {
    let at = 0;
    for (let i = 0; i + 1 < runs.length; i += 2) {
      const length = runs[i]!;
      demand(length >= 1 && at + length <= fftSize, 'bad_content', 'A row is longer than the transform.');
      at += length;
    }
    demand(at === fftSize, 'bad_content', 'A row is shorter than the transform.');
  }
  for (const row of grid.rowOfSymbol) {
    demand(grid.rows[row] !== undefined, 'bad_content', 'A symbol names a row that is not there.');
  }
}

/**
 * The cells of a run-length grid: a new Uint8Array of L·N ink numbers, symbol by symbol, position p = k + ⌊N/2⌋ within one.
 * Throws SynthError as demandWholeRows does.
 */
export function expandGrid(grid: RunGrid, fftSize: number): Uint8Array {
  demandWholeRows(grid, fftSize);
  const rows = grid.rows.map((runs) => {
    const row = new Uint8Array(fftSize);
    for (let i = 0, at = 0; i + 1 < runs.length; i += 2) {
      const end = at + runs[i]!;
      if (runs[i + 1] !== 0) row.fill(runs[i + 1]!, at, end);
      at = end;
    }
    return row;
  });
  const cells = new Uint8Array(grid.rowOfSymbol.length * fftSize);
  grid.rowOfSymbol.forEach((rowNumber, symbol) => {
    cells.set(rows[rowNumber]!, symbol * fftSize);
  });
  return cells;
}

/**
 * The canonical run-length form of L·N cells: neighbouring runs differ, rows are unique and in order of first use.
 * Equal cells give equal grids. Throws SynthError `bad_size` when `cells` is not symbolCount · fftSize long.
 */
export function compressGrid(cells: Uint8Array, fftSize: number, symbolCount: number): RunGrid {
  demand(cells.length === fftSize * symbolCount, 'bad_size', 'Cells do not fill the grid.');
  const rows: number[][] = [];
  const rowOfSymbol: number[] = [];
  const known = new Map<number, number[]>();
  for (let symbol = 0; symbol < symbolCount; symbol++) {
    const from = symbol * fftSize;
    // first the row of the symbol before, then those of equal hash: a cell by cell comparison decides
    const last = rowOfSymbol[symbol - 1];
    if (last !== undefined && sameCells(cells, from, (symbol - 1) * fftSize, fftSize)) {
      rowOfSymbol.push(last);
      continue;
    }
    const runs = runsOf(cells, from, fftSize);
    const hash = hashOf(runs);
    const candidates = known.get(hash) ?? [];
    let row = candidates.find((number) => sameRuns(rows[number]!, runs));
    if (row === undefined) {
      row = rows.length;
      rows.push(runs);
      known.set(hash, [...candidates, row]);
    }
    rowOfSymbol.push(row);
  }
  return { rows, rowOfSymbol };
}

function sameCells(cells: Uint8Array, a: number, b: number, count: number): boolean {
  for (let i = 0; i < count; i++) if (cells[a + i] !== cells[b + i]) return false;
  return true;
}

function runsOf(cells: Uint8Array, from: number, count: number): number[] {
  const runs: number[] = [];
  const end = from + count;
  for (let at = from; at < end;) {
    const ink = cells[at]!;
    let next = at + 1;
    while (next < end && cells[next] === ink) next++;
    runs.push(next - at, ink);
    at = next;
  }
  return runs;
}

function hashOf(runs: number[]): number {
  let hash = 2166136261;
  for (const value of runs) hash = Math.imul(hash ^ value, 16777619);
  return hash;
}

function sameRuns(a: number[], b: number[]): boolean {
  return a.length === b.length && a.every((value, i) => value === b[i]);
}
