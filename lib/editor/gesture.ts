import type { EditorDocument } from './document';
import { cellsLabel, paintRow } from './paint';
import { changedCells, diffRow, pushRow } from './patch';
import type { CellRows, Patch, Span } from './types';

/** A stroke under way. Moves are shown at once; commit makes them one step, cancel leaves the document as it was. */
export interface Gesture {
  /** Paints further spans on what the gesture painted so far (a brush). */
  paintMore(spans: readonly Span[], ink: number): void;
  /** Paints spans on what stood before the gesture: earlier moves are taken back (a rectangle that is dragged). */
  paintFresh(spans: readonly Span[], ink: number): void;
  commit(): void;
  cancel(): void;
}

interface GestureHost {
  write(patch: Patch): void;
  closed(patch: Patch | null): void;
}

function bySymbol(spans: readonly Span[]): Map<number, Span[]> {
  const groups = new Map<number, Span[]>();
  for (const span of spans) {
    const group = groups.get(span.symbol);
    if (group) group.push(span);
    else groups.set(span.symbol, [span]);
  }
  return groups;
}

export function createGesture(document: EditorDocument, verb: string, host: GestureHost): Gesture {
  const { fftSize } = document.settings;
  /** Each touched row as it stood before the gesture: the first `before` wins. */
  const rowsBefore = new Map<number, Uint8Array>();
  let isOpen = true;

  const rowNow = (symbol: number) => document.cells.subarray(symbol * fftSize, (symbol + 1) * fftSize);
  const keep = (symbol: number) => {
    let row = rowsBefore.get(symbol);
    if (!row) rowsBefore.set(symbol, (row = rowNow(symbol).slice()));
    return row;
  };

  function writeTargets(symbols: number[], target: (symbol: number) => Uint8Array): void {
    const rows: CellRows[] = [];
    for (const symbol of symbols.sort((a, b) => a - b)) {
      const row = diffRow(symbol, rowNow(symbol), target(symbol));
      if (row) pushRow(rows, row);
    }
    if (rows.length > 0) host.write({ label: verb, changes: [{ kind: 'cells', rows }] });
  }

  function close(patch: Patch | null): void {
    isOpen = false;
    host.closed(patch);
  }

  return {
    paintMore(spans, ink) {
      if (!isOpen) return;
      const groups = bySymbol(spans);
      writeTargets([...groups.keys()], (symbol) => {
        keep(symbol);
        return paintRow(rowNow(symbol).slice(), groups.get(symbol)!, ink);
      });
    },
    paintFresh(spans, ink) {
      if (!isOpen) return;
      const groups = bySymbol(spans);
      for (const symbol of groups.keys()) keep(symbol);
      writeTargets([...rowsBefore.keys()], (symbol) => {
        const group = groups.get(symbol);
        const before = rowsBefore.get(symbol)!;
        return group ? paintRow(before.slice(), group, ink) : before;
      });
    },
    commit() {
      if (!isOpen) return;
      const rows: CellRows[] = [];
      for (const symbol of [...rowsBefore.keys()].sort((a, b) => a - b)) {
        const row = diffRow(symbol, rowsBefore.get(symbol)!, rowNow(symbol));
        if (row) pushRow(rows, row);
      }
      const label = cellsLabel(verb, changedCells(rows));
      close(rows.length > 0 ? { label, changes: [{ kind: 'cells', rows }] } : null);
    },
    cancel() {
      if (!isOpen) return;
      writeTargets([...rowsBefore.keys()], (symbol) => rowsBefore.get(symbol)!);
      close(null);
    },
  };
}
