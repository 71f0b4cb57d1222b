import { reduceRuns, toothPitches, toothWidthPx } from '@/lib/drawing/cellReduction';
import { inkStyleOf, priorityOf, type InkStyleKey } from '@/lib/drawing/inkStyle';
import type { WaveformContent } from '@/lib/synth';
import type { Band } from './Straightedge';

/** All that a grid picture fills with one look, as the data of one SVG path: a grid of any size is a dozen elements. */
export interface LookPath {
  style: InkStyleKey;
  path: string;
}

interface Place {
  styles: readonly InkStyleKey[];
  priorities: readonly number[];
  band: Band;
  cellPx: number;
  widthPx: number;
}

/** Stretches of one look in a row of the picture, [from px, to px, ink, …]. */
type LookRuns = number[];

/** Cells of a pixel and more: each run stands where its cells do. */
function wholeRuns(row: readonly number[], { band, cellPx, widthPx }: Place): LookRuns {
  const runs: LookRuns = [];
  let at = 0;
  for (let i = 0; i < row.length; i += 2) {
    const from = Math.max(0, (at - band.from) * cellPx);
    at += row[i]!;
    const to = Math.min(widthPx, (at - band.from) * cellPx);
    if (to > from) runs.push(from, to, row[i + 1]!);
  }
  return runs;
}

/** The inks of a row's pixel columns: the ink that comes first, and teeth keep their width where they stand apart. */
function columnsOf(row: readonly number[], place: Place, columns: Int16Array): void {
  const { band, cellPx, priorities, styles } = place;
  if (cellPx >= 1) {
    columns.fill(-1);
    const whole = wholeRuns(row, place);
    for (let i = 0; i < whole.length; i += 3)
      columns.fill(whole[i + 2]!, Math.round(whole[i]!), Math.round(whole[i + 1]!));
    return;
  }
  reduceRuns(row, band.from, cellPx, priorities, columns);
  const pitches = toothPitches(row, styles.length);
  // By ink: 0 where it is no tooth.
  const widths = styles.map((style, ink) =>
    style === 'pilot' || style === 'tone' ? toothWidthPx(style, pitches[ink]! * cellPx, cellPx) : 0,
  );
  if (!widths.some((width) => width >= 2)) return;
  for (let x = columns.length - 2; x >= 0; x--) {
    const ink = columns[x]!;
    if (ink >= 0 && widths[ink]! >= 2 && !widths[columns[x + 1]!]) columns[x + 1] = ink;
  }
}

/** One row of the picture for all the symbols that it stands for. */
function reducedRuns(rows: readonly (readonly number[])[], place: Place): LookRuns {
  const { priorities, widthPx } = place;
  const held = new Int16Array(widthPx).fill(-1);
  const columns = new Int16Array(widthPx);
  for (const row of rows) {
    columnsOf(row, place, columns);
    for (let x = 0; x < widthPx; x++) {
      const ink = columns[x]!;
      if (ink >= 0 && (held[x]! < 0 || priorities[ink]! < priorities[held[x]!]!)) held[x] = ink;
    }
  }
  const runs: LookRuns = [];
  for (let x = 0, from = 0; x < widthPx; x++) {
    if (x + 1 < widthPx && held[x + 1] === held[x]) continue;
    if (held[x]! >= 0) runs.push(from, x + 1, held[x]!);
    from = x + 1;
  }
  return runs;
}

const tidy = (px: number) => Math.round(px * 100) / 100;

/**
 * A grid on `widthPx` × `heightPx` pixels of a band, after the design's rule for cells below a pixel, in both directions. Reads runs, not
 * cells, and each set of symbols with the same rows once. Null cells are left out: they are the ground.
 */
export function gridPaths(content: WaveformContent, band: Band, widthPx: number, heightPx: number): LookPath[] {
  const { grid, symbolCount, tray } = content;
  const styles = tray.map(inkStyleOf);
  const cellPx = widthPx / (band.to - band.from);
  const place: Place = { styles, priorities: styles.map(priorityOf), band, cellPx, widthPx };
  const symbolsPerRow = Math.max(1, Math.ceil(symbolCount / heightPx));
  const yOf = (symbol: number) => Math.round((Math.min(symbol, symbolCount) * heightPx) / symbolCount);
  const known = new Map<string, LookRuns>();
  const parts = styles.map((): string[] => []);
  const fill = (runs: LookRuns, from: number, to: number) => {
    const height = yOf(to) - yOf(from);
    for (let i = 0; i < runs.length; i += 3) {
      const width = tidy(runs[i + 1]! - runs[i]!);
      parts[runs[i + 2]!]!.push(`M${tidy(runs[i]!)} ${yOf(from)}h${width}v${height}h-${width}z`);
    }
  };
  let held: LookRuns = [];
  let heldFrom = 0;
  for (let symbol = 0; symbol < symbolCount; symbol += symbolsPerRow) {
    const used = [...new Set(grid.rowOfSymbol.slice(symbol, symbol + symbolsPerRow))].sort((a, b) => a - b);
    const key = used.join();
    let runs = known.get(key);
    if (!runs) {
      const rows = used.map((row) => grid.rows[row]!);
      runs = cellPx >= 1 && rows.length === 1 ? wholeRuns(rows[0]!, place) : reducedRuns(rows, place);
      known.set(key, runs);
    }
    if (runs === held) continue;
    fill(held, heldFrom, symbol);
    held = runs;
    heldFrom = symbol;
  }
  fill(held, heldFrom, symbolCount);
  const looks = new Map<InkStyleKey, string[]>();
  styles.forEach((style, ink) => {
    if (style !== 'null' && parts[ink]!.length > 0) looks.set(style, [...(looks.get(style) ?? []), ...parts[ink]!]);
  });
  return [...looks].map(([style, all]) => ({ style, path: all.join('') }));
}
