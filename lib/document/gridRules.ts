import type { RunGrid } from '@/lib/synth/index';
import { isWholeIn } from './schemaParts';
import type { LoopIssues } from './issues';

export const mostRuns = 2 ** 21;
export const mostSymbols = 16384;
const mostFftSize = 16384;
const mostInks = 64;

/** Shape alone: rows of whole numbers in pairs, at most 2^21 runs. What depends on N, L and the tray follows in gridProblems. */
export function checkRowsShape(rows: readonly unknown[], issues: LoopIssues): void {
  if (rows.length < 1) issues.add([], 'must have at least 1 entry');
  if (rows.length > mostSymbols) {
    issues.add([], `must have at most ${mostSymbols} entries, not ${rows.length}`);
    return;
  }
  let runs = 0;
  for (const row of rows) if (Array.isArray(row)) runs += row.length / 2;
  if (runs > mostRuns) {
    issues.add([], `must have at most ${mostRuns} runs in all, not ${Math.ceil(runs)}`);
    return;
  }
  rows.forEach((row, rowAt) => {
    if (!Array.isArray(row)) issues.add([rowAt], 'must be a list of lengths and inks');
    else if (row.length === 0 || row.length % 2 !== 0) issues.add([rowAt], 'must be pairs of a length and an ink');
    else {
      for (let at = 0; at < row.length; at += 2) {
        if (!isWholeIn(row[at], 1, mostFftSize)) issues.add([rowAt, at], `must be a length of 1 to ${mostFftSize}`);
        if (!isWholeIn(row[at + 1], 0, mostInks - 1))
          issues.add([rowAt, at + 1], `must be an ink of 0 to ${mostInks - 1}`);
      }
    }
  });
}

export function checkRowOfSymbolShape(rowOfSymbol: readonly unknown[], issues: LoopIssues): void {
  if (rowOfSymbol.length < 1) issues.add([], 'must have at least 1 entry');
  if (rowOfSymbol.length > mostSymbols) {
    issues.add([], `must have at most ${mostSymbols} entries, not ${rowOfSymbol.length}`);
    return;
  }
  for (let at = 0; at < rowOfSymbol.length; at += 1) {
    if (!isWholeIn(rowOfSymbol[at], 0, mostSymbols - 1)) issues.add([at], 'must be the place of a row, 0 or more');
  }
}

function hashOf(row: readonly number[]): number {
  let hash = row.length;
  for (let at = 0; at < row.length; at += 1) hash = Math.imul(hash ^ row[at]!, 16777619) ^ (hash >>> 15);
  return hash;
}

function isSameRow(a: readonly number[], b: readonly number[]): boolean {
  if (a.length !== b.length) return false;
  for (let at = 0; at < a.length; at += 1) if (a[at] !== b[at]) return false;
  return true;
}

function checkRow(row: readonly number[], rowAt: number, fftSize: number, inkCount: number, issues: LoopIssues): void {
  let cells = 0;
  for (let at = 0; at < row.length; at += 2) {
    cells += row[at]!;
    const ink = row[at + 1]!;
    if (ink >= inkCount) issues.add(['rows', rowAt, at + 1], `must be an ink of the tray, 0 to ${inkCount - 1}`);
    if (at > 0 && ink === row[at - 1])
      issues.add(['rows', rowAt, at + 1], 'must differ from the run before it: merge the two');
  }
  if (cells !== fftSize) issues.add(['rows', rowAt], `must fill ${fftSize} subcarriers, not ${cells}`);
}

/** The one spelling of a grid: runs merged, rows full and unique, in order of first use, every row used. Paths start in `grid`. */
export function gridProblems(
  grid: RunGrid,
  fftSize: number,
  symbolCount: number,
  inkCount: number,
  issues: LoopIssues,
): void {
  const rowsByHash = new Map<number, number[]>();
  grid.rows.forEach((row, rowAt) => {
    checkRow(row, rowAt, fftSize, inkCount, issues);
    const hash = hashOf(row);
    const alike = rowsByHash.get(hash);
    if (alike === undefined) rowsByHash.set(hash, [rowAt]);
    else {
      const twin = alike.find((other) => isSameRow(grid.rows[other]!, row));
      if (twin === undefined) alike.push(rowAt);
      else issues.add(['rows', rowAt], `is the same as row ${twin}: rows are unique`);
    }
  });
  if (grid.rowOfSymbol.length !== symbolCount) {
    issues.add(
      ['rowOfSymbol'],
      `must have one entry for each of ${symbolCount} symbols, not ${grid.rowOfSymbol.length}`,
    );
  }
  let seen = 0;
  for (let symbol = 0; symbol < grid.rowOfSymbol.length; symbol += 1) {
    const row = grid.rowOfSymbol[symbol]!;
    if (row >= grid.rows.length)
      issues.add(['rowOfSymbol', symbol], `must be the place of a row, 0 to ${grid.rows.length - 1}`);
    else if (row > seen) {
      issues.add(['rowOfSymbol', symbol], `must be ${seen} or less here: rows stand in order of first use`);
      seen = row + 1;
    } else if (row === seen) seen += 1;
  }
  for (let row = seen; row < grid.rows.length; row += 1) issues.add(['rows', row], 'is used by no symbol');
}
