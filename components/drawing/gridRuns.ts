import { reduceRow, toothPitch, toothWidthPx } from '@/lib/drawing/cellReduction';
import { inkStyleOf, priorityOf, type InkStyleKey } from '@/lib/drawing/inkStyle';
import type { WaveformContent } from '@/lib/synth';
import type { Band } from './Straightedge';

/** A stretch of one look in a row, in px from the band's left edge. */
export interface LookRun {
  xPx: number;
  widthPx: number;
  style: InkStyleKey;
}

/** Rows of a grid picture: symbols that follow each other with the same cells are one. */
export interface GridRow {
  fromSymbol: number;
  toSymbol: number;
  runs: LookRun[];
}

function cellsOfRow(row: readonly number[], fftSize: number): Uint8Array {
  const cells = new Uint8Array(fftSize);
  let at = 0;
  for (let i = 0; i < row.length; i += 2) {
    cells.fill(row[i + 1]!, at, at + row[i]!);
    at += row[i]!;
  }
  return cells;
}

/** Cells narrower than a pixel: each column takes the ink that comes first, and teeth keep their width where they stand apart. */
function reducedRuns(
  cells: Uint8Array,
  styles: readonly InkStyleKey[],
  band: Band,
  cellPx: number,
  widthPx: number,
): LookRun[] {
  const columns = new Int16Array(widthPx);
  reduceRow(cells, band.from, cellPx, styles.map(priorityOf), columns);
  const teeth = new Map<number, number>();
  styles.forEach((style, ink) => {
    if (style === 'pilot' || style === 'tone')
      teeth.set(ink, toothWidthPx(style, toothPitch(cells, ink) * cellPx, cellPx));
  });
  for (let x = widthPx - 2; x >= 0; x--) {
    const ink = columns[x]!;
    const tooth = ink < 0 ? undefined : teeth.get(ink);
    if (tooth !== undefined && tooth >= 2 && !teeth.has(columns[x + 1]!)) columns[x + 1] = ink;
  }
  const runs: LookRun[] = [];
  for (let x = 0; x < widthPx; x++) {
    if (columns[x]! < 0) continue;
    const style = styles[columns[x]!]!;
    const last = runs.at(-1);
    if (last && last.style === style && last.xPx + last.widthPx === x) last.widthPx++;
    else runs.push({ xPx: x, widthPx: 1, style });
  }
  return runs;
}

function wholeRuns(
  row: readonly number[],
  styles: readonly InkStyleKey[],
  band: Band,
  cellPx: number,
  widthPx: number,
): LookRun[] {
  const runs: LookRun[] = [];
  let at = 0;
  for (let i = 0; i < row.length; i += 2) {
    const from = Math.max(0, (at - band.from) * cellPx);
    at += row[i]!;
    const to = Math.min(widthPx, (at - band.from) * cellPx);
    if (to > from) runs.push({ xPx: from, widthPx: to - from, style: styles[row[i + 1]!]! });
  }
  return runs;
}

/** A grid on `widthPx` pixels of a band, after the design's rule for cells below a pixel. */
export function gridRows(content: WaveformContent, band: Band, widthPx: number): GridRow[] {
  const styles = content.tray.map(inkStyleOf);
  const cellPx = widthPx / (band.to - band.from);
  const known = new Map<number, LookRun[]>();
  const rows: GridRow[] = [];
  content.grid.rowOfSymbol.forEach((rowAt, symbol) => {
    let runs = known.get(rowAt);
    if (!runs) {
      const row = content.grid.rows[rowAt]!;
      runs =
        cellPx < 1
          ? reducedRuns(cellsOfRow(row, content.fftSize), styles, band, cellPx, widthPx)
          : wholeRuns(row, styles, band, cellPx, widthPx);
      known.set(rowAt, runs);
    }
    const last = rows.at(-1);
    if (last && last.runs === runs) last.toSymbol = symbol + 1;
    else rows.push({ fromSymbol: symbol, toSymbol: symbol + 1, runs });
  });
  return rows;
}
