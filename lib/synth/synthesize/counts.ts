import type { CellRuns } from './cellRuns';
import type { InkPlan } from './inkPlan';

/** How many cells of each ink stand before a symbol (in a repeat), kept up to date under edits. */
export interface CellCounts {
  /** Cells of the ink in symbols 0…symbol−1. symbol 0…L. */
  cellsBefore(symbol: number, ink: number): number;
  /** Payload bits of the stream's cells in symbols 0…symbol−1. */
  bitsBefore(symbol: number, stream: number): number;
  touch(symbol: number): void;
}

/** Counts lazily: nothing is scanned until a count is asked for. */
export function createCellCounts(cellRuns: CellRuns, symbolCount: number, inks: readonly InkPlan[]): CellCounts {
  const kinds = inks.length;
  let before: Float64Array | null = null;
  let valid = 0; // before[] holds for symbols 0…valid
  const row = new Uint32Array(256);

  function ensure(symbol: number): Float64Array {
    before ??= new Float64Array((symbolCount + 1) * kinds);
    for (; valid < symbol; valid++) {
      row.fill(0);
      const runs = cellRuns.of(valid);
      const { numbers } = cellRuns;
      for (let i = 0, start = 0; i < numbers; i += 2) {
        row[runs[i + 1]!]! += runs[i]! - start;
        start = runs[i]!;
      }
      for (let ink = 0; ink < kinds; ink++) {
        before[(valid + 1) * kinds + ink] = before[valid * kinds + ink]! + row[ink]!;
      }
    }
    return before;
  }

  return {
    cellsBefore: (symbol, ink) => ensure(symbol)[symbol * kinds + ink]!,
    bitsBefore(symbol, stream) {
      const counts = ensure(symbol);
      let bits = 0;
      for (let ink = 0; ink < kinds; ink++) {
        const plan = inks[ink]!;
        if (plan.kind === 'data' && plan.stream === stream) bits += plan.bits * counts[symbol * kinds + ink]!;
      }
      return bits;
    },
    touch(symbol) {
      valid = Math.min(valid, symbol);
    },
  };
}
