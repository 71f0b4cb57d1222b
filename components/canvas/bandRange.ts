import type { Viewport } from '@/lib/editor/types';
import type { GridCells } from './draw/gridImages';

/** Positions of the lowest and highest painted cell, both inside; null for an empty grid. */
export function paintedRange({ cells, fftSize }: GridCells): { from: number; to: number } | null {
  let from = fftSize;
  let to = -1;
  for (let start = 0; start < cells.length; start += fftSize) {
    for (let p = 0; p < from; p++) if (cells[start + p] !== 0) from = p;
    for (let p = fftSize - 1; p > to; p--) if (cells[start + p] !== 0) to = p;
  }
  return to < 0 ? null : { from, to };
}

/** The painted positions with a margin at both sides: what a drawing opens with, and what a phone's strip shows. */
export function bandRange(grid: GridCells, view?: Viewport): { from: number; to: number } {
  const painted = paintedRange(grid);
  if (!painted) return { from: 0, to: grid.fftSize };
  const margin = Math.ceil((painted.to - painted.from + 1) * 0.08) + 2;
  let from = Math.max(0, painted.from - margin);
  let to = Math.min(grid.fftSize, painted.to + 1 + margin);
  if (view) {
    const along = view.turned ? view.heightPx : view.widthPx;
    from = Math.max(0, Math.min(from, view.firstPosition));
    to = Math.min(grid.fftSize, Math.max(to, view.firstPosition + along / view.subcarrierPx));
  }
  return { from, to };
}
