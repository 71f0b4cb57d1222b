import type { CellPoint, CellRect, GridSize, ScreenPoint, Viewport } from '../types';

/** The cell under a screen point, whole numbers that may lie outside of the grid (a stroke may leave and come back). */
export function cellUnder(view: Viewport, at: ScreenPoint): CellPoint {
  const alongPx = view.turned ? view.heightPx - at.yPx : at.xPx;
  const acrossPx = view.turned ? at.xPx : at.yPx;
  return {
    position: Math.floor(view.firstPosition + alongPx / view.subcarrierPx),
    symbol: Math.floor(view.firstSymbol + acrossPx / view.symbolPx),
  };
}

export function isInside(grid: GridSize, cell: CellPoint): boolean {
  return cell.position >= 0 && cell.position < grid.fftSize && cell.symbol >= 0 && cell.symbol < grid.symbolCount;
}

/** The cell under a screen point, or null outside of the grid. */
export function hitTest(view: Viewport, grid: GridSize, at: ScreenPoint): CellPoint | null {
  const cell = cellUnder(view, at);
  return isInside(grid, cell) ? cell : null;
}

/** Where a block of cells stands in the plot area. */
export function rectOnScreen(
  view: Viewport,
  rect: CellRect,
): { xPx: number; yPx: number; widthPx: number; heightPx: number } {
  const alongPx = (rect.positionFrom - view.firstPosition) * view.subcarrierPx;
  const lengthPx = (rect.positionTo - rect.positionFrom + 1) * view.subcarrierPx;
  const acrossPx = (rect.symbolFrom - view.firstSymbol) * view.symbolPx;
  const depthPx = (rect.symbolTo - rect.symbolFrom + 1) * view.symbolPx;
  return view.turned
    ? { xPx: acrossPx, yPx: view.heightPx - alongPx - lengthPx, widthPx: depthPx, heightPx: lengthPx }
    : { xPx: alongPx, yPx: acrossPx, widthPx: lengthPx, heightPx: depthPx };
}
