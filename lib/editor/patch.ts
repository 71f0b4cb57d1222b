import { compressGrid, expandGrid } from '@/lib/synth/index';
import type { EditorDocument } from './document';
import type { CellRows, Change, Patch, Runs, SizedGrid } from './types';

/** Runs of cells[from…from+length), neighbours different. */
function readRuns(cells: Uint8Array, from: number, length: number): Runs {
  const runs: Runs = [];
  let at = from;
  const end = from + length;
  while (at < end) {
    const ink = cells[at]!;
    let next = at + 1;
    while (next < end && cells[next] === ink) next++;
    runs.push(next - at, ink);
    at = next;
  }
  return runs;
}

/** The change of one row from `before` to `after` (both length N), cut to the span that differs; null when equal. */
export function diffRow(symbol: number, before: Uint8Array, after: Uint8Array): CellRows | null {
  let from = 0;
  let to = before.length - 1;
  while (from <= to && before[from] === after[from]) from++;
  if (from > to) return null;
  while (before[to] === after[to]) to--;
  const length = to - from + 1;
  return {
    symbol,
    symbols: 1,
    start: from,
    before: readRuns(before, from, length),
    after: readRuns(after, from, length),
  };
}

function sameRuns(a: Runs, b: Runs): boolean {
  if (a.length !== b.length) return false;
  for (let i = 0; i < a.length; i++) if (a[i] !== b[i]) return false;
  return true;
}

/** Adds a row to a list in ascending symbols, joining it to the last one when both change alike. */
export function pushRow(rows: CellRows[], row: CellRows): void {
  const last = rows[rows.length - 1];
  const joins =
    last !== undefined &&
    last.symbol + last.symbols === row.symbol &&
    last.start === row.start &&
    sameRuns(last.before, row.before) &&
    sameRuns(last.after, row.after);
  if (joins) last.symbols += row.symbols;
  else rows.push(row);
}

/** A document's cells as the grid of a size change. */
export function sizedGrid(cells: Uint8Array, fftSize: number, symbolCount: number): SizedGrid {
  return { fftSize, symbolCount, ...compressGrid(cells, fftSize, symbolCount) };
}

function writeRows(document: EditorDocument, rows: CellRows[], side: 'before' | 'after'): void {
  const { cells, settings } = document;
  for (const row of rows) {
    for (let s = 0; s < row.symbols; s++) {
      let at = (row.symbol + s) * settings.fftSize + row.start;
      const runs = row[side];
      for (let i = 0; i < runs.length; i += 2) {
        cells.fill(runs[i + 1]!, at, at + runs[i]!);
        at += runs[i]!;
      }
    }
  }
}

function writeChange(document: EditorDocument, change: Change, side: 'before' | 'after'): void {
  switch (change.kind) {
    case 'cells':
      return writeRows(document, change.rows, side);
    case 'size': {
      const { fftSize, symbolCount, ...grid } = change[side];
      document.settings = { ...document.settings, fftSize, symbolCount };
      document.cells = expandGrid(grid, fftSize);
      return;
    }
    case 'numbers':
      document.settings = { ...document.settings, ...change[side] };
      return;
    case 'tray':
    case 'streams':
    case 'timing':
    case 'level':
    case 'markers':
      document.settings = { ...document.settings, [change.kind]: change[side] };
      return;
    case 'about':
      document.about = change[side];
      return;
    case 'intent':
      document.intent = change[side];
  }
}

/** Does a patch: the only writer of an EditorDocument. */
export function applyPatch(document: EditorDocument, patch: Patch): void {
  for (const change of patch.changes) writeChange(document, change, 'after');
}

function invertChange(change: Change): Change {
  if (change.kind !== 'cells') return { ...change, before: change.after, after: change.before } as Change;
  const rows = change.rows.map((row) => ({ ...row, before: row.after, after: row.before }));
  return { kind: 'cells', rows };
}

/** The patch that leads back. */
export function invertPatch(patch: Patch): Patch {
  return { label: patch.label, changes: patch.changes.map(invertChange).reverse() };
}

function sameValue(a: unknown, b: unknown): boolean {
  return a === b || JSON.stringify(a) === JSON.stringify(b);
}

/** True when doing the patch would change nothing: such a patch is dropped, not remembered. */
export function isEmptyPatch(patch: Patch): boolean {
  return patch.changes.every((change) =>
    change.kind === 'cells' ? change.rows.length === 0 : sameValue(change.before, change.after),
  );
}

/** How many cells a patch changes, for the label and the toast. */
export function changedCells(rows: CellRows[]): number {
  let count = 0;
  for (const row of rows) count += row.symbols * differing(row.before, row.after);
  return count;
}

function differing(before: Runs, after: Runs): number {
  let count = 0;
  let a = 0;
  let b = 0;
  let leftA = before[0] ?? 0;
  let leftB = after[0] ?? 0;
  while (a < before.length && b < after.length) {
    const step = Math.min(leftA, leftB);
    if (before[a + 1] !== after[b + 1]) count += step;
    leftA -= step;
    leftB -= step;
    if (leftA === 0) leftA = before[(a += 2)] ?? 0;
    if (leftB === 0) leftB = after[(b += 2)] ?? 0;
  }
  return count;
}

/** Bytes that a patch is counted with in the bounded history: numbers at eight bytes, objects with a fixed cost. */
export function patchBytes(patch: Patch): number {
  let bytes = 64 + patch.label.length * 2;
  for (const change of patch.changes) {
    if (change.kind === 'cells') {
      for (const row of change.rows) bytes += 120 + 8 * (row.before.length + row.after.length);
    } else if (change.kind === 'size') {
      for (const grid of [change.before, change.after]) {
        bytes += 64 + 8 * grid.rowOfSymbol.length;
        for (const row of grid.rows) bytes += 32 + 8 * row.length;
      }
    } else bytes += 64 + 2 * (JSON.stringify(change.before).length + JSON.stringify(change.after).length);
  }
  return bytes;
}

/** Symbols whose cells a change of kind cells touches, as [from, to] pairs inside. */
export function touchedSymbols(change: Change & { kind: 'cells' }): [number, number][] {
  return change.rows.map((row) => [row.symbol, row.symbol + row.symbols - 1]);
}
