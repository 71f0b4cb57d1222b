import type { GridSize } from '../types';

/**
 * Cells at another size: subcarriers keep their signed numbers (DC stays at DC), symbols their numbers; new cells are null.
 * `cutCells`: painted cells that found no place.
 */
export function resizeCells(cells: Uint8Array, from: GridSize, to: GridSize): { cells: Uint8Array; cutCells: number } {
  const shift = Math.floor(to.fftSize / 2) - Math.floor(from.fftSize / 2);
  const resized = new Uint8Array(to.fftSize * to.symbolCount);
  const first = Math.max(0, -shift);
  const last = Math.min(from.fftSize, to.fftSize - shift);
  let painted = 0;
  let kept = 0;
  for (let i = 0; i < cells.length; i++) if (cells[i] !== 0) painted++;
  for (let symbol = 0; symbol < Math.min(from.symbolCount, to.symbolCount); symbol++) {
    const row = cells.subarray(symbol * from.fftSize + first, symbol * from.fftSize + last);
    resized.set(row, symbol * to.fftSize + first + shift);
  }
  for (let i = 0; i < resized.length; i++) if (resized[i] !== 0) kept++;
  return { cells: resized, cutCells: painted - kept };
}
