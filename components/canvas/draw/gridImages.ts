import type { SkImage } from '@shopify/react-native-skia';
import { reduceRow, toothPitch, TOOTH_PITCH_PX_LEAST } from '@/lib/drawing/cellReduction';
import type { InkStyleKey } from '@/lib/drawing/inkStyle';
import { priorityOf } from '@/lib/drawing/inkStyle';
import { imageOfPixels } from './scope';

/** A tile holds at most this many cells each way: a stroke uploads a part of a large grid, and a texture stays legal. */
export const TILE_POSITIONS = 2048;
export const TILE_SYMBOLS = 512;

export interface GridCells {
  cells: Uint8Array;
  fftSize: number;
  symbolCount: number;
}

/** What is painted with, ink by ink: its look, and its fill as a pixel. */
export interface InkFills {
  styles: readonly InkStyleKey[];
  pixels: Uint32Array;
}

export interface Tile {
  image: SkImage;
  position: number;
  symbol: number;
  positions: number;
  symbols: number;
}

/** Images replaced while an older frame may still show them: freed two frames later. */
export function createLateDisposal(): { add(one: { dispose(): void }): void; frame(): void; flush(): void } {
  let young: { dispose(): void }[] = [];
  let old: { dispose(): void }[] = [];
  const flushOld = () => {
    for (const one of old) one.dispose();
    old = [];
  };
  return {
    add: (one) => void young.push(one),
    frame() {
      flushOld();
      old = young;
      young = [];
    },
    flush() {
      flushOld();
      old = young;
      young = [];
      flushOld();
    },
  };
}

export type LateDisposal = ReturnType<typeof createLateDisposal>;

/** One pixel a cell, in tiles; only dirty ones are made anew. */
export function createTileStore(late: LateDisposal) {
  let tiles: (Tile | null)[] = [];
  let across = 0;
  let size = { fftSize: 0, symbolCount: 0 };
  let stale: boolean[] = [];
  let scratch = new Uint32Array(0);

  function reset(grid: GridCells): void {
    for (const tile of tiles) if (tile) late.add(tile.image);
    across = Math.ceil(grid.fftSize / TILE_POSITIONS);
    const count = across * Math.ceil(grid.symbolCount / TILE_SYMBOLS);
    tiles = new Array<Tile | null>(count).fill(null);
    stale = new Array<boolean>(count).fill(true);
    size = { fftSize: grid.fftSize, symbolCount: grid.symbolCount };
  }

  function make(index: number, grid: GridCells, { pixels }: InkFills): Tile | null {
    const position = (index % across) * TILE_POSITIONS;
    const symbol = Math.floor(index / across) * TILE_SYMBOLS;
    const positions = Math.min(TILE_POSITIONS, grid.fftSize - position);
    const symbols = Math.min(TILE_SYMBOLS, grid.symbolCount - symbol);
    if (scratch.length < positions * symbols) scratch = new Uint32Array(positions * symbols);
    let out = 0;
    for (let l = 0; l < symbols; l++) {
      const start = (symbol + l) * grid.fftSize + position;
      for (let i = start; i < start + positions; i++) scratch[out++] = pixels[grid.cells[i]!]!;
    }
    const image = imageOfPixels(new Uint8Array(scratch.buffer, 0, positions * symbols * 4), positions, symbols);
    return image && { image, position, symbol, positions, symbols };
  }

  return {
    /** Marks symbols as changed; without an argument everything (a new size, other fills). */
    touch(symbolFrom = 0, symbolTo = Infinity): void {
      for (let i = 0; i < stale.length; i++) {
        const symbol = Math.floor(i / across) * TILE_SYMBOLS;
        if (symbol <= symbolTo && symbol + TILE_SYMBOLS > symbolFrom) stale[i] = true;
      }
    },
    /** The tiles that overlap the shown cells, made anew where their cells changed. */
    shown(
      grid: GridCells,
      fills: InkFills,
      range: { positionFrom: number; positionTo: number; symbolFrom: number; symbolTo: number },
    ): Tile[] {
      if (grid.fftSize !== size.fftSize || grid.symbolCount !== size.symbolCount) reset(grid);
      const list: Tile[] = [];
      for (let i = 0; i < tiles.length; i++) {
        const position = (i % across) * TILE_POSITIONS;
        const symbol = Math.floor(i / across) * TILE_SYMBOLS;
        if (position >= range.positionTo || position + TILE_POSITIONS <= range.positionFrom) continue;
        if (symbol >= range.symbolTo || symbol + TILE_SYMBOLS <= range.symbolFrom) continue;
        if (stale[i]) {
          const before = tiles[i];
          if (before) late.add(before.image);
          tiles[i] = make(i, grid, fills);
          stale[i] = false;
        }
        const tile = tiles[i];
        if (tile) list.push(tile);
      }
      return list;
    },
    dispose(): void {
      for (const tile of tiles) tile?.image.dispose();
      tiles = [];
    },
  };
}

export interface ReducedImage {
  image: SkImage;
  /** Pixel columns and rows of the image. */
  columns: number;
  rows: number;
  /** The first row's symbol, and how many symbols a row stands for. */
  symbolFrom: number;
  symbolsPerRow: number;
  /** Runs of reserved columns by row, for the hatch: [row, from, to) triples. */
  reserved: number[];
}

/** Widens lone teeth to two pixels where they stand far enough apart; tones always. `columns` holds an ink or −1. */
function widenTeeth(
  columns: Int16Array,
  row: Uint8Array,
  styles: readonly InkStyleKey[],
  cellPx: number,
  toothPx: number,
): void {
  const wide = new Map<number, boolean>();
  for (let x = 0; x < columns.length - 1; x++) {
    const ink = columns[x]!;
    const style = ink < 0 ? null : styles[ink];
    if (style !== 'pilot' && style !== 'tone') continue;
    let isWide = wide.get(ink);
    if (isWide === undefined) {
      isWide = style === 'tone' || toothPitch(row, ink) * cellPx >= (TOOTH_PITCH_PX_LEAST * toothPx) / 2;
      wide.set(ink, isWide);
    }
    if (!isWide || columns[x + 1] === ink) continue;
    let end = x;
    while (end + 1 < columns.length && end - x + 1 < toothPx) {
      const next = columns[end + 1]!;
      if (next >= 0 && next !== ink && priorityOf(styles[next]!) <= priorityOf(style)) break;
      columns[++end] = ink;
    }
    x = end;
  }
}

export interface ReducedView {
  firstPosition: number;
  cellPx: number;
  columns: number;
  symbolFrom: number;
  symbolTo: number;
  rowsMost: number;
  toothPx: number;
}

/**
 * The shown part when a cell is narrower than a pixel: each device pixel column takes the ink that stands first in the
 * reduction's order, so a pilot comb neither vanishes nor closes to a false bar. Rows likewise where symbols are lower
 * than a pixel. Keeps what it made: while the view stays, only touched symbols are read again. All px are device px.
 */
export function createReducer(late: LateDisposal) {
  let key = '';
  let pixels = new Uint32Array(0);
  let reservedOfRow: number[][] = [];
  let dirty: boolean[] = [];
  let symbolFrom = 0;
  let symbolsPerRow = 1;
  let made: ReducedImage | null = null;

  function readRow(r: number, grid: GridCells, fills: InkFills, view: ReducedView, priorities: number[]): void {
    const columns = new Int16Array(view.columns);
    const held = new Int16Array(view.columns).fill(-1);
    const last = Math.min(view.symbolTo, view.symbolFrom + (r + 1) * symbolsPerRow);
    for (let l = view.symbolFrom + r * symbolsPerRow; l < last; l++) {
      const row = grid.cells.subarray(l * grid.fftSize, (l + 1) * grid.fftSize);
      reduceRow(row, view.firstPosition, view.cellPx, priorities, columns);
      widenTeeth(columns, row, fills.styles, view.cellPx, view.toothPx);
      for (let x = 0; x < columns.length; x++) {
        const ink = columns[x]!;
        const before = held[x]!;
        if (ink >= 0 && (before < 0 || priorities[ink]! < priorities[before]!)) held[x] = ink;
      }
    }
    const reserved: number[] = [];
    let from = -1;
    for (let x = 0; x <= view.columns; x++) {
      const ink = x < view.columns ? held[x]! : -1;
      if (x < view.columns) pixels[r * view.columns + x] = ink >= 0 ? fills.pixels[ink]! : 0;
      const isReserved = ink >= 0 && fills.styles[ink] === 'reserved';
      if (isReserved && from < 0) from = x;
      if (!isReserved && from >= 0) {
        reserved.push(r, from, x);
        from = -1;
      }
    }
    reservedOfRow[r] = reserved;
  }

  return {
    touch(from = 0, to = Infinity): void {
      for (let r = 0; r < dirty.length; r++) {
        const symbol = symbolFrom + r * symbolsPerRow;
        if (symbol <= to && symbol + symbolsPerRow > from) dirty[r] = true;
      }
    },
    image(grid: GridCells, fills: InkFills, view: ReducedView): ReducedImage | null {
      const symbols = view.symbolTo - view.symbolFrom;
      if (symbols <= 0 || view.columns <= 0) return null;
      const next = `${grid.fftSize} ${Object.values(view).join(' ')}`;
      if (next !== key) {
        key = next;
        symbolFrom = view.symbolFrom;
        symbolsPerRow = Math.max(1, Math.ceil(symbols / view.rowsMost));
        const rows = Math.ceil(symbols / symbolsPerRow);
        pixels = new Uint32Array(view.columns * rows);
        reservedOfRow = new Array<number[]>(rows).fill([]);
        dirty = new Array<boolean>(rows).fill(true);
      }
      if (made && !dirty.includes(true)) return made;
      const priorities = fills.styles.map(priorityOf);
      for (let r = 0; r < dirty.length; r++) {
        if (dirty[r]) readRow(r, grid, fills, view, priorities);
        dirty[r] = false;
      }
      if (made) late.add(made.image);
      const image = imageOfPixels(new Uint8Array(pixels.buffer), view.columns, dirty.length);
      const reserved = reservedOfRow.flat();
      made = image && { image, columns: view.columns, rows: dirty.length, symbolFrom, symbolsPerRow, reserved };
      return made;
    },
    dispose(): void {
      made?.image.dispose();
      made = null;
      key = '';
    },
  };
}
