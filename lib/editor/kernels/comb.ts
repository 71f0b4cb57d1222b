import type { CombSettings, GridSize, Span } from '../types';

/**
 * The cells of a comb. Pass j paints symbol symbolFrom + j · everySymbol; its first tooth stands (shift · j) modulo the
 * step above subcarrierFrom, so a shifted comb walks through its step and begins again.
 */
export function combSpans(comb: CombSettings, grid: GridSize): Span[] {
  const zero = Math.floor(grid.fftSize / 2);
  const every = Math.max(1, Math.floor(comb.everySubcarrier));
  const everySymbol = Math.max(1, Math.floor(comb.everySymbol));
  const lowest = Math.min(comb.subcarrierFrom, comb.subcarrierTo) + zero;
  const highest = Math.min(Math.max(comb.subcarrierFrom, comb.subcarrierTo) + zero, grid.fftSize - 1);
  const symbolLast = Math.min(Math.max(comb.symbolFrom, comb.symbolTo), grid.symbolCount - 1);
  const spans: Span[] = [];
  let pass = 0;
  for (let symbol = Math.min(comb.symbolFrom, comb.symbolTo); symbol <= symbolLast; symbol += everySymbol, pass++) {
    if (symbol < 0) continue;
    const shift = (((comb.shiftPerPass * pass) % every) + every) % every;
    let from = lowest + shift;
    if (from < 0) from += Math.ceil(-from / every) * every;
    if (from <= highest) spans.push({ symbol, from, to: highest, every });
  }
  return spans;
}
