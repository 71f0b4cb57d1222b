import type { EditorDocument } from './document';
import { indexRefusal } from './indexRule';
import { changedCells, diffRow, pushRow } from './patch';
import type { CellRows, Patch, Span } from './types';

/** Writes spans of one symbol into its row (positions outside are left out); returns the row. */
export function paintRow(row: Uint8Array, spans: readonly Span[], ink: number): Uint8Array {
  for (const span of spans) {
    const to = Math.min(span.to, row.length - 1);
    if (span.every === 1) row.fill(ink, span.from, to + 1);
    else for (let p = span.from; p <= to; p += span.every) row[p] = ink;
  }
  return row;
}

/** How many cells spans hold when none overlap. */
export function spanCells(spans: readonly Span[]): number {
  let count = 0;
  for (const { from, to, every } of spans) if (to >= from) count += Math.floor((to - from) / every) + 1;
  return count;
}

export type PaintPlan = { kind: 'patch'; patch: Patch } | { kind: 'refused'; message: string } | null;

/** “Paint 348 cells”: what Undo says of a stroke. */
export function cellsLabel(verb: string, count: number): string {
  return `${verb} ${count} ${count === 1 ? 'cell' : 'cells'}`;
}

/** The patch that paints spans with an ink; null when it would change nothing; refused when the ink cannot stand there. */
export function planPaint(document: EditorDocument, spans: readonly Span[], ink: number, verb = 'Paint'): PaintPlan {
  const message = indexRefusal(document, spans, ink);
  if (message !== null) return { kind: 'refused', message };
  const { fftSize } = document.settings;
  const rows: CellRows[] = [];
  const ordered = [...spans].sort((a, b) => a.symbol - b.symbol);
  for (let i = 0; i < ordered.length;) {
    const { symbol } = ordered[i]!;
    let next = i + 1;
    while (next < ordered.length && ordered[next]!.symbol === symbol) next++;
    const before = document.cells.subarray(symbol * fftSize, (symbol + 1) * fftSize);
    const row = diffRow(symbol, before, paintRow(before.slice(), ordered.slice(i, next), ink));
    if (row) pushRow(rows, row);
    i = next;
  }
  if (rows.length === 0) return null;
  return { kind: 'patch', patch: { label: cellsLabel(verb, changedCells(rows)), changes: [{ kind: 'cells', rows }] } };
}
