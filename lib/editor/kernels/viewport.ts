import type { CellRect, GridSize, ScreenPoint, Viewport } from '../types';

/** A cell is shown at most this large, and at least half of the area stays covered by the grid. */
export const CELL_PX_MOST = 64;

/** Broken cell coordinates under a screen point. */
function toGrid(view: Viewport, at: ScreenPoint): { position: number; symbol: number } {
  const alongPx = view.turned ? view.heightPx - at.yPx : at.xPx;
  const acrossPx = view.turned ? at.xPx : at.yPx;
  return {
    position: view.firstPosition + alongPx / view.subcarrierPx,
    symbol: view.firstSymbol + acrossPx / view.symbolPx,
  };
}

/** Length of the area along the subcarriers and along the symbols. */
function spans(view: Viewport): { subcarriersPx: number; symbolsPx: number } {
  return view.turned
    ? { subcarriersPx: view.heightPx, symbolsPx: view.widthPx }
    : { subcarriersPx: view.widthPx, symbolsPx: view.heightPx };
}

function clampFirst(first: number, count: number, shown: number): number {
  return shown >= count ? (count - shown) / 2 : Math.min(Math.max(first, 0), count - shown);
}

/** Keeps zoom and place legal: the whole axis fits at the least zoom, and nothing beyond the grid's edges is shown unless it all fits. */
export function clampViewport(view: Viewport, grid: GridSize): Viewport {
  const { subcarriersPx, symbolsPx } = spans(view);
  if (subcarriersPx <= 0 || symbolsPx <= 0) return view;
  const subcarrierLeast = Math.min(subcarriersPx / grid.fftSize, CELL_PX_MOST);
  const symbolLeast = Math.min(symbolsPx / grid.symbolCount, CELL_PX_MOST);
  const subcarrierPx = Math.min(Math.max(view.subcarrierPx, subcarrierLeast), CELL_PX_MOST);
  const symbolPx = Math.min(Math.max(view.symbolPx, symbolLeast), CELL_PX_MOST);
  const shownSymbols = symbolsPx / symbolPx;
  return {
    ...view,
    subcarrierPx,
    symbolPx,
    firstPosition: clampFirst(view.firstPosition, grid.fftSize, subcarriersPx / subcarrierPx),
    // A short grid stands at the upper (or left) edge rather than in the middle.
    firstSymbol: shownSymbols >= grid.symbolCount ? 0 : clampFirst(view.firstSymbol, grid.symbolCount, shownSymbols),
  };
}

/** The whole band over the whole length; symbols as tall as the area allows, down to `symbolPxLeast` where there are many. */
export function fitViewport(view: Viewport, grid: GridSize, symbolPxLeast = 12): Viewport {
  const { subcarriersPx, symbolsPx } = spans(view);
  return clampViewport(
    {
      ...view,
      subcarrierPx: subcarriersPx / grid.fftSize,
      symbolPx: Math.max(symbolsPx / grid.symbolCount, symbolPxLeast),
      firstPosition: 0,
      firstSymbol: 0,
    },
    grid,
  );
}

/** Another size of the area; what stood in its middle along the subcarriers stays there. */
export function resizeViewport(view: Viewport, grid: GridSize, widthPx: number, heightPx: number): Viewport {
  if (view.widthPx <= 0 || view.heightPx <= 0) return fitViewport({ ...view, widthPx, heightPx }, grid);
  const middle = view.firstPosition + spans(view).subcarriersPx / view.subcarrierPx / 2;
  const next = { ...view, widthPx, heightPx };
  const shown = spans(next).subcarriersPx / view.subcarrierPx;
  return clampViewport({ ...next, firstPosition: middle - shown / 2 }, grid);
}

/** Moves the drawing by pixels: to the right and down is positive, as the pointer moves. */
export function panViewport(view: Viewport, grid: GridSize, dxPx: number, dyPx: number): Viewport {
  const subcarriers = view.turned ? dyPx / view.subcarrierPx : -dxPx / view.subcarrierPx;
  const symbols = view.turned ? -dxPx / view.symbolPx : -dyPx / view.symbolPx;
  return clampViewport(
    { ...view, firstPosition: view.firstPosition + subcarriers, firstSymbol: view.firstSymbol + symbols },
    grid,
  );
}

/** Puts the document point `grid point` under the screen point again. */
function pin(view: Viewport, to: { position: number; symbol: number }, at: ScreenPoint): Viewport {
  const now = toGrid(view, at);
  return {
    ...view,
    firstPosition: view.firstPosition + to.position - now.position,
    firstSymbol: view.firstSymbol + to.symbol - now.symbol,
  };
}

/** Zooms by factors along each axis; the document point under the pointer stays under it (but for the edges). */
export function zoomViewport(
  view: Viewport,
  grid: GridSize,
  at: ScreenPoint,
  factorSubcarriers: number,
  factorSymbols: number,
): Viewport {
  const fixed = toGrid(view, at);
  const zoomed = clampViewport(
    { ...view, subcarrierPx: view.subcarrierPx * factorSubcarriers, symbolPx: view.symbolPx * factorSymbols },
    grid,
  );
  return clampViewport(pin(zoomed, fixed, at), grid);
}

/** Two fingers from one pair of places to another: zooms by their spread (both axes alike) and follows their middle. */
export function pinchViewport(
  view: Viewport,
  grid: GridSize,
  from: readonly [ScreenPoint, ScreenPoint],
  to: readonly [ScreenPoint, ScreenPoint],
): Viewport {
  const spread = ([a, b]: readonly [ScreenPoint, ScreenPoint]) => Math.hypot(a.xPx - b.xPx, a.yPx - b.yPx);
  const middle = ([a, b]: readonly [ScreenPoint, ScreenPoint]) => ({
    xPx: (a.xPx + b.xPx) / 2,
    yPx: (a.yPx + b.yPx) / 2,
  });
  const factor = spread(from) > 0 ? spread(to) / spread(from) : 1;
  const fixed = toGrid(view, middle(from));
  const zoomed = clampViewport(
    { ...view, subcarrierPx: view.subcarrierPx * factor, symbolPx: view.symbolPx * factor },
    grid,
  );
  return clampViewport(pin(zoomed, fixed, middle(to)), grid);
}

/** Turns the axes; zoom and the place in the middle are kept per axis. */
export function turnViewport(view: Viewport, grid: GridSize): Viewport {
  const { subcarriersPx, symbolsPx } = spans(view);
  const middlePosition = view.firstPosition + subcarriersPx / view.subcarrierPx / 2;
  const middleSymbol = view.firstSymbol + symbolsPx / view.symbolPx / 2;
  const turned = { ...view, turned: !view.turned };
  const after = spans(turned);
  return clampViewport(
    {
      ...turned,
      firstPosition: middlePosition - after.subcarriersPx / view.subcarrierPx / 2,
      firstSymbol: middleSymbol - after.symbolsPx / view.symbolPx / 2,
    },
    grid,
  );
}

/** The largest zoom at which a block of cells is wholly seen, with half a cell round it. */
export function zoomToRect(view: Viewport, grid: GridSize, rect: CellRect): Viewport {
  const { subcarriersPx, symbolsPx } = spans(view);
  const subcarriers = rect.positionTo - rect.positionFrom + 2;
  const symbols = rect.symbolTo - rect.symbolFrom + 2;
  const subcarrierPx = Math.min(subcarriersPx / subcarriers, CELL_PX_MOST);
  const symbolPx = Math.min(symbolsPx / symbols, CELL_PX_MOST);
  return clampViewport(
    {
      ...view,
      subcarrierPx,
      symbolPx,
      firstPosition: (rect.positionFrom + rect.positionTo + 1) / 2 - subcarriersPx / subcarrierPx / 2,
      firstSymbol: (rect.symbolFrom + rect.symbolTo + 1) / 2 - symbolsPx / symbolPx / 2,
    },
    grid,
  );
}

/** The least move that brings a cell wholly into view (for the cursor moved by keys). */
export function revealCell(view: Viewport, grid: GridSize, position: number, symbol: number): Viewport {
  const { subcarriersPx, symbolsPx } = spans(view);
  const reveal = (first: number, shown: number, cell: number) =>
    cell < first ? cell : cell + 1 > first + shown ? cell + 1 - shown : first;
  const firstPosition = reveal(view.firstPosition, subcarriersPx / view.subcarrierPx, position);
  const firstSymbol = reveal(view.firstSymbol, symbolsPx / view.symbolPx, symbol);
  if (firstPosition === view.firstPosition && firstSymbol === view.firstSymbol) return view;
  return clampViewport({ ...view, firstPosition, firstSymbol }, grid);
}

/** Broken cell coordinates of what is seen, cut to the grid: the spectrum's zoom is positions from…to. */
export function visibleRange(
  view: Viewport,
  grid: GridSize,
): { positionFrom: number; positionTo: number; symbolFrom: number; symbolTo: number } {
  const { subcarriersPx, symbolsPx } = spans(view);
  return {
    positionFrom: Math.max(0, view.firstPosition),
    positionTo: Math.min(grid.fftSize, view.firstPosition + subcarriersPx / view.subcarrierPx),
    symbolFrom: Math.max(0, view.firstSymbol),
    symbolTo: Math.min(grid.symbolCount, view.firstSymbol + symbolsPx / view.symbolPx),
  };
}
