import type { BrushSize, CellPoint, GridSize, Span } from '../types';

/** The cells of the brush with its middle at a cell (an even size reaches one further up), cut to the grid. */
export function brushSpans(at: CellPoint, size: BrushSize, grid: GridSize): Span[] {
  return strokeSpans(at, at, size, grid);
}

/**
 * The cells between two places of the pointer: a fast stroke leaves no holes. A cell line after Bresenham, the brush
 * at each of its cells, joined to one span a symbol (the brush's places along a line overlap within a symbol).
 */
export function strokeSpans(from: CellPoint, to: CellPoint, size: BrushSize, grid: GridSize): Span[] {
  const left = Math.floor((size.subcarriers - 1) / 2);
  const up = Math.floor((size.symbols - 1) / 2);
  const reach = new Map<number, { from: number; to: number }>();
  const stamp = (position: number, symbol: number) => {
    for (let l = Math.max(0, symbol - up); l < Math.min(grid.symbolCount, symbol - up + size.symbols); l++) {
      const start = position - left;
      const end = start + size.subcarriers - 1;
      const row = reach.get(l);
      if (!row) reach.set(l, { from: start, to: end });
      else {
        row.from = Math.min(row.from, start);
        row.to = Math.max(row.to, end);
      }
    }
  };
  const runPositions = Math.abs(to.position - from.position);
  const runSymbols = Math.abs(to.symbol - from.symbol);
  const stepPosition = from.position < to.position ? 1 : -1;
  const stepSymbol = from.symbol < to.symbol ? 1 : -1;
  let { position, symbol } = from;
  let error = runPositions - runSymbols;
  for (;;) {
    stamp(position, symbol);
    if (position === to.position && symbol === to.symbol) break;
    const twice = 2 * error;
    if (twice > -runSymbols) {
      error -= runSymbols;
      position += stepPosition;
    }
    if (twice < runPositions) {
      error += runPositions;
      symbol += stepSymbol;
    }
  }
  const spans: Span[] = [];
  for (const [l, row] of reach) {
    const start = Math.max(0, row.from);
    const end = Math.min(grid.fftSize - 1, row.to);
    if (start <= end) spans.push({ symbol: l, from: start, to: end, every: 1 });
  }
  return spans;
}
