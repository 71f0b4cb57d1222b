import type { WaveformContent } from '@/lib/synth/index';
import { inkStyleOf } from './inkStyle';
import type { InkStyleKey } from './inkStyle';

/**
 * A small picture of a grid for lists: blocks of equal look. `styles` names the fills; a look mixes them by area, as pairs
 * [style, share of 1…16] that sum to 16; a pattern is one picture row as runs [columns, look, …]; `rows` are runs of
 * patterns from the first symbol down, [picture rows, pattern, …].
 */
export interface GridPicture {
  columns: number;
  rowCount: number;
  styles: InkStyleKey[];
  looks: number[][];
  patterns: number[][];
  rows: number[];
}

const SHARES = 16;

/** Shares in sixteenths that sum to 16; what is painted at all keeps one, so that a sparse comb does not vanish. */
function quantize(area: Float64Array): number[] {
  let total = 0;
  for (const part of area) total += part;
  if (total === 0) return [];
  const pairs: number[] = [];
  let largest = 1;
  let excess = -SHARES;
  area.forEach((part, style) => {
    if (part <= 0) return;
    const share = Math.max(1, Math.round((part / total) * SHARES));
    pairs.push(style, share);
    excess += share;
    if (share > pairs[largest]!) largest = pairs.length - 1;
  });
  pairs[largest]! -= excess;
  return pairs;
}

/** Number lists kept once each, named by their place. */
function createTable(): { entries: number[][]; indexOf(list: number[]): number } {
  const entries: number[][] = [];
  const places = new Map<string, number>();
  return {
    entries,
    indexOf(list) {
      const key = list.join();
      let place = places.get(key);
      if (place === undefined) places.set(key, (place = entries.push(list) - 1));
      return place;
    },
  };
}

function extendRuns(runs: number[], value: number): void {
  if (runs.length > 0 && runs[runs.length - 1] === value) runs[runs.length - 2]!++;
  else runs.push(1, value);
}

/**
 * The picture of a content: `columns` across the whole band and at most `rows` down (fewer symbols give one row each).
 * Reads the run-length grid, so that a large one costs as little as its runs.
 */
export function gridPicture(content: WaveformContent, columns: number, rows: number): GridPicture {
  const { fftSize, symbolCount, grid, tray } = content;
  const styles = [...new Set(tray.map(inkStyleOf))];
  const styleOfInk = tray.map((ink) => styles.indexOf(inkStyleOf(ink)));
  const rowCount = Math.min(rows, symbolCount);
  const looks = createTable();
  const patterns = createTable();

  // Areas by column and style, in cells · columns: whole numbers, so that no order of adding rounds.
  const area = new Float64Array(columns * styles.length);
  const addRow = (runs: readonly number[], times: number) => {
    let from = 0;
    let column = 0;
    let columnEnd = fftSize;
    for (let i = 0; i < runs.length; i += 2) {
      const to = from + runs[i]! * columns;
      const style = styleOfInk[runs[i + 1]!] ?? 0;
      while (to > columnEnd) {
        area[column * styles.length + style]! += times * (columnEnd - from);
        from = columnEnd;
        columnEnd += fftSize;
        column++;
      }
      area[column * styles.length + style]! += times * (to - from);
      from = to;
    }
  };

  const picture: number[] = [];
  for (let r = 0; r < rowCount; r++) {
    const uses = new Map<number, number>();
    const symbolFrom = Math.floor((r * symbolCount) / rowCount);
    const symbolTo = Math.floor(((r + 1) * symbolCount) / rowCount);
    for (let l = symbolFrom; l < symbolTo; l++) {
      const row = grid.rowOfSymbol[l]!;
      uses.set(row, (uses.get(row) ?? 0) + 1);
    }
    area.fill(0);
    for (const [row, times] of uses) addRow(grid.rows[row]!, times);
    const runs: number[] = [];
    for (let at = 0; at < area.length; at += styles.length)
      extendRuns(runs, looks.indexOf(quantize(area.subarray(at, at + styles.length))));
    extendRuns(picture, patterns.indexOf(runs));
  }
  return { columns, rowCount, styles, looks: looks.entries, patterns: patterns.entries, rows: picture };
}

export interface PictureBlock {
  x: number;
  y: number;
  width: number;
  height: number;
  /** The mixed fill, "#rrggbb". */
  fill: string;
}

function mix(pairs: readonly number[], styles: readonly InkStyleKey[], fills: Record<InkStyleKey, string>): string {
  const sum = [0, 0, 0];
  for (let i = 0; i < pairs.length; i += 2) {
    const rgb = Number.parseInt(fills[styles[pairs[i]!]!].slice(1), 16);
    const share = pairs[i + 1]! / SHARES;
    [16, 8, 0].forEach((bits, c) => (sum[c]! += share * ((rgb >> bits) & 255)));
  }
  return `#${sum.map((value) => Math.round(value).toString(16).padStart(2, '0')).join('')}`;
}

/** Rectangles in picture units (columns × rowCount) with a theme's fills: for an SVG with viewBox 0 0 columns rowCount. */
export function pictureBlocks(picture: GridPicture, fills: Record<InkStyleKey, string>): PictureBlock[] {
  const colours = picture.looks.map((pairs) => mix(pairs, picture.styles, fills));
  const blocks: PictureBlock[] = [];
  let y = 0;
  for (let r = 0; r < picture.rows.length; r += 2) {
    const height = picture.rows[r]!;
    const runs = picture.patterns[picture.rows[r + 1]!]!;
    let x = 0;
    for (let i = 0; i < runs.length; i += 2) {
      blocks.push({ x, y, width: runs[i]!, height, fill: colours[runs[i + 1]!]! });
      x += runs[i]!;
    }
    y += height;
  }
  return blocks;
}
