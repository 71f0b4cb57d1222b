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
  // By index: forEach would pass over the holes of a sparse list.
  for (let rowAt = 0; rowAt < rows.length; rowAt += 1) {
    const row = rows[rowAt];
    if (!Array.isArray(row)) issues.add([rowAt], 'must be a list of lengths and inks');
    else if (row.length === 0 || row.length % 2 !== 0) issues.add([rowAt], 'must be pairs of a length and an ink');
    else checkRowShape(row, rowAt, issues);
  }
}

function checkRowShape(row: readonly unknown[], rowAt: number, issues: LoopIssues): void {
  for (let at = 0; at < row.length; at += 2) {
    const length = row[at];
    const ink = row[at + 1];
    if (!isWholeIn(length, 1, mostFftSize) && !issues.countsOnly()) {
      issues.add([rowAt, at], `must be a length of 1 to ${mostFftSize}`);
    }
    if (!isWholeIn(ink, 0, mostInks - 1) && !issues.countsOnly()) {
      issues.add([rowAt, at + 1], `must be an ink of 0 to ${mostInks - 1}`);
    }
  }
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

function compareRows(a: readonly number[], b: readonly number[]): number {
  const shared = Math.min(a.length, b.length);
  for (let at = 0; at < shared; at += 1) if (a[at] !== b[at]) return a[at]! - b[at]!;
  return a.length - b.length;
}

/** For each row the first one equal to it, or −1. By sorting: a table of hashes could be made to collide by a hostile body. */
function twinsOf(rows: readonly (readonly number[])[]): Int32Array {
  const twins = new Int32Array(rows.length).fill(-1);
  const order = Array.from(rows.keys()).sort((a, b) => compareRows(rows[a]!, rows[b]!) || a - b);
  for (let at = 1; at < order.length; at += 1) {
    const before = order[at - 1]!;
    const row = order[at]!;
    if (compareRows(rows[before]!, rows[row]!) === 0) twins[row] = twins[before] === -1 ? before : twins[before]!;
  }
  return twins;
}

function checkRow(row: readonly number[], rowAt: number, fftSize: number, inkCount: number, issues: LoopIssues): void {
  let cells = 0;
  for (let at = 0; at < row.length; at += 2) {
    cells += row[at]!;
    const ink = row[at + 1]!;
    if (ink >= inkCount && !issues.countsOnly()) {
      issues.add(['rows', rowAt, at + 1], `must be an ink of the tray, 0 to ${inkCount - 1}`);
    }
    if (at > 0 && ink === row[at - 1] && !issues.countsOnly()) {
      issues.add(['rows', rowAt, at + 1], 'must differ from the run before it: merge the two');
    }
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
  const twins = twinsOf(grid.rows);
  grid.rows.forEach((row, rowAt) => {
    checkRow(row, rowAt, fftSize, inkCount, issues);
    if (twins[rowAt] !== -1) issues.add(['rows', rowAt], `is the same as row ${twins[rowAt]}: rows are unique`);
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
    if (row >= grid.rows.length) {
      issues.add(['rowOfSymbol', symbol], `must be the place of a row, 0 to ${grid.rows.length - 1}`);
    } else if (row > seen) {
      issues.add(['rowOfSymbol', symbol], `must be ${seen} or less here: rows stand in order of first use`);
      seen = row + 1;
    } else if (row === seen) seen += 1;
  }
  for (let row = seen; row < grid.rows.length; row += 1) issues.add(['rows', row], 'is used by no symbol');
}
