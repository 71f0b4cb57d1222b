import type { RunGrid } from '../types';

/** The cells of symbols as runs, without a look at each cell where the grid itself says them. */
export interface CellRuns {
  /** [end, ink, end, ink, …] from position 0 to N; `numbers` of them. Valid until the next call. */
  of(symbol: number): Int32Array;
  /** How many numbers the last answer has. */
  readonly numbers: number;
  /** The same number for symbols that are alike for certain, −1 where that is not known. */
  rowOf(symbol: number): number;
}

/** The ends and inks of a grid's rows, each row once: what runsOfGrid walks. */
export function rowsOfGrid(grid: RunGrid): Int32Array[] {
  return grid.rows.map((row) => {
    const runs = new Int32Array(row.length);
    let end = 0;
    for (let i = 0; i < row.length; i += 2) {
      end += row[i]!;
      runs[i] = end;
      runs[i + 1] = row[i + 1]!;
    }
    return runs;
  });
}

/** Runs of a grid; `rows` are its rowsOfGrid. */
export function runsOfGrid({ rowOfSymbol }: RunGrid, rows: readonly Int32Array[]): CellRuns {
  let last = rows[0]!;
  return {
    of: (symbol) => (last = rows[rowOfSymbol[symbol]!]!),
    get numbers() {
      return last.length;
    },
    rowOf: (symbol) => rowOfSymbol[symbol]!,
  };
}

/** Runs of cells that may be edited: looked for anew at each call. */
export function runsOfCells(cells: Uint8Array, fftSize: number): CellRuns {
  const runs = new Int32Array(2 * fftSize);
  let numbers = 0;
  return {
    of(symbol) {
      const from = symbol * fftSize;
      numbers = 0;
      for (let p = 0; p < fftSize;) {
        const ink = cells[from + p]!;
        let end = p + 1;
        while (end < fftSize && cells[from + end] === ink) end++;
        runs[numbers++] = end;
        runs[numbers++] = ink;
        p = end;
      }
      return runs;
    },
    get numbers() {
      return numbers;
    },
    rowOf: () => -1,
  };
}
