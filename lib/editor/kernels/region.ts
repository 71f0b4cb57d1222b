import type { CellPoint, CellRect, GridSize, RectangleSettings, Span } from '../types';

/** The block between two cells, whichever corner each is. */
export function rectBetween(a: CellPoint, b: CellPoint): CellRect {
  return {
    positionFrom: Math.min(a.position, b.position),
    positionTo: Math.max(a.position, b.position),
    symbolFrom: Math.min(a.symbol, b.symbol),
    symbolTo: Math.max(a.symbol, b.symbol),
  };
}

/** The part of a block that lies in the grid; null when none does. */
export function cutToGrid(rect: CellRect, grid: GridSize): CellRect | null {
  const cut = {
    positionFrom: Math.max(0, rect.positionFrom),
    positionTo: Math.min(grid.fftSize - 1, rect.positionTo),
    symbolFrom: Math.max(0, rect.symbolFrom),
    symbolTo: Math.min(grid.symbolCount - 1, rect.symbolTo),
  };
  return cut.positionFrom > cut.positionTo || cut.symbolFrom > cut.symbolTo ? null : cut;
}

export function rectSpans(rect: CellRect, grid: GridSize): Span[] {
  const cut = cutToGrid(rect, grid);
  if (!cut) return [];
  const spans: Span[] = [];
  for (let symbol = cut.symbolFrom; symbol <= cut.symbolTo; symbol++)
    spans.push({ symbol, from: cut.positionFrom, to: cut.positionTo, every: 1 });
  return spans;
}

/** Blanks of the sentence (signed subcarriers) to a block and back. */
export function rectOfSettings(settings: RectangleSettings, fftSize: number): CellRect {
  const zero = Math.floor(fftSize / 2);
  return rectBetween(
    { position: settings.subcarrierFrom + zero, symbol: settings.symbolFrom },
    { position: settings.subcarrierTo + zero, symbol: settings.symbolTo },
  );
}

export function settingsOfRect(rect: CellRect, fftSize: number): RectangleSettings {
  const zero = Math.floor(fftSize / 2);
  return {
    subcarrierFrom: rect.positionFrom - zero,
    subcarrierTo: rect.positionTo - zero,
    symbolFrom: rect.symbolFrom,
    symbolTo: rect.symbolTo,
  };
}
