import {
  BlendMode,
  FilterMode,
  MipmapMode,
  Skia,
  type SkCanvas,
  type SkRSXform,
  type SkRect,
} from '@shopify/react-native-skia';
import { MARK_CELL_PX_LEAST } from '@/lib/drawing/cellMarks';
import type { Viewport } from '@/lib/editor/types';
import type { ThemeColors } from '@/components/ui/theme';
import { hatchPaint, markSheet } from './markSheet';
import type { GridCells, InkFills, ReducedImage, Tile } from './gridImages';
import type { DrawScope } from './scope';
import { clipTo, fillRect, lines, type Point, type Rect } from './shapes';

export interface GridModel {
  grid: GridCells;
  fills: InkFills;
  view: Viewport;
  /** Tiles of one pixel a cell, or the reduced picture when a cell is narrower than a device pixel. */
  tiles: Tile[];
  reduced: ReducedImage | null;
  /** Device pixels a drawing px. */
  density: number;
  themeName: string;
}

/** Cells from this width on are ruled apart; symbols from this height on. */
const RULED_CELL_PX = 8;
const RULED_SYMBOL_PX = 4;

/** Cells of the part that is seen, whole ones. */
export function seenCells({ grid, view }: Pick<GridModel, 'grid' | 'view'>): {
  p0: number;
  p1: number;
  l0: number;
  l1: number;
} {
  const along = view.turned ? view.heightPx : view.widthPx;
  const across = view.turned ? view.widthPx : view.heightPx;
  return {
    p0: Math.max(0, Math.floor(view.firstPosition)),
    p1: Math.min(grid.fftSize, Math.ceil(view.firstPosition + along / view.subcarrierPx)),
    l0: Math.max(0, Math.floor(view.firstSymbol)),
    l1: Math.min(grid.symbolCount, Math.ceil(view.firstSymbol + across / view.symbolPx)),
  };
}

/** The grid at the origin of its plot area (0…widthPx, 0…heightPx of the view): fills, rules, hatch, marks. */
export function drawGrid(canvas: SkCanvas, scope: DrawScope, model: GridModel, theme: ThemeColors): void {
  const { view } = model;
  const area: Rect = { x: 0, y: 0, width: view.widthPx, height: view.heightPx };
  canvas.save();
  clipTo(canvas, area);
  fillRect(canvas, scope.fill(theme.surface.sunken), 0, 0, area.width, area.height);
  canvas.save();
  // Turned: subcarriers run upwards, symbols to the right. The picture is drawn as if not turned and laid over.
  if (view.turned) canvas.concat([0, 1, 0, -1, 0, view.heightPx, 0, 0, 1]);
  drawFills(canvas, scope, model);
  drawHatch(canvas, scope, model, theme);
  drawRules(canvas, scope, model, theme);
  canvas.restore();
  drawMarks(canvas, scope, model, theme);
  canvas.restore();
}

function drawFills(canvas: SkCanvas, scope: DrawScope, { view, tiles, reduced }: GridModel): void {
  const paint = scope.fill('#000000');
  const draw = (image: Tile['image'], width: number, height: number, x: number, y: number, w: number, h: number) =>
    canvas.drawImageRectOptions(
      image,
      Skia.XYWHRect(0, 0, width, height),
      Skia.XYWHRect(x, y, w, h),
      FilterMode.Nearest,
      MipmapMode.None,
      paint,
    );
  if (reduced) {
    const along = view.turned ? view.heightPx : view.widthPx;
    const y = (reduced.symbolFrom - view.firstSymbol) * view.symbolPx;
    const height = reduced.rows * reduced.symbolsPerRow * view.symbolPx;
    draw(reduced.image, reduced.columns, reduced.rows, 0, y, along, height);
    return;
  }
  for (const tile of tiles)
    draw(
      tile.image,
      tile.positions,
      tile.symbols,
      (tile.position - view.firstPosition) * view.subcarrierPx,
      (tile.symbol - view.firstSymbol) * view.symbolPx,
      tile.positions * view.subcarrierPx,
      tile.symbols * view.symbolPx,
    );
}

/** Reserved keeps its hatch at every size, so that it is never taken for null. */
function drawHatch(canvas: SkCanvas, scope: DrawScope, model: GridModel, theme: ThemeColors): void {
  const { view, grid, fills, reduced, density, themeName } = model;
  if (!fills.styles.includes('reserved')) return;
  const paint = hatchPaint(scope, theme, themeName);
  if (reduced) {
    for (let i = 0; i < reduced.reserved.length; i += 3) {
      const symbol = reduced.symbolFrom + reduced.reserved[i]! * reduced.symbolsPerRow;
      const from = reduced.reserved[i + 1]! / density;
      const to = reduced.reserved[i + 2]! / density;
      fillRect(
        canvas,
        paint,
        from,
        (symbol - view.firstSymbol) * view.symbolPx,
        to - from,
        reduced.symbolsPerRow * view.symbolPx,
      );
    }
    return;
  }
  const { p0, p1, l0, l1 } = seenCells(model);
  for (let l = l0; l < l1; l++) {
    let from = -1;
    for (let p = p0; p <= p1; p++) {
      const isReserved = p < p1 && fills.styles[grid.cells[l * grid.fftSize + p]!] === 'reserved';
      if (isReserved && from < 0) from = p;
      if (isReserved || from < 0) continue;
      const x = (from - view.firstPosition) * view.subcarrierPx;
      fillRect(canvas, paint, x, (l - view.firstSymbol) * view.symbolPx, (p - from) * view.subcarrierPx, view.symbolPx);
      from = -1;
    }
  }
}

function drawRules(canvas: SkCanvas, scope: DrawScope, model: GridModel, theme: ThemeColors): void {
  const { view } = model;
  const { p0, p1, l0, l1 } = seenCells(model);
  const left = (p0 - view.firstPosition) * view.subcarrierPx;
  const right = (p1 - view.firstPosition) * view.subcarrierPx;
  const top = (l0 - view.firstSymbol) * view.symbolPx;
  const bottom = (l1 - view.firstSymbol) * view.symbolPx;
  const rule = scope.stroke(theme.canvas.cellRule, 1);
  const ends: Point[] = [];
  if (view.symbolPx >= RULED_SYMBOL_PX) {
    for (let l = l0 + 1; l <= l1; l++) {
      const y = Math.round((l - view.firstSymbol) * view.symbolPx) - 0.5;
      ends.push({ x: left, y }, { x: right, y });
    }
  }
  if (view.subcarrierPx >= RULED_CELL_PX) {
    for (let p = p0 + 1; p <= p1; p++) {
      const x = Math.round((p - view.firstPosition) * view.subcarrierPx) - 0.5;
      ends.push({ x, y: top }, { x, y: bottom });
    }
  }
  lines(canvas, rule, ends);
}

/** Cells from 10 px carry their mark, all in one call from the sheet of marks. */
function drawMarks(canvas: SkCanvas, scope: DrawScope, model: GridModel, theme: ThemeColors): void {
  const { view, grid, fills, density, themeName } = model;
  const least = Math.floor(Math.min(view.subcarrierPx, view.symbolPx));
  if (least < MARK_CELL_PX_LEAST) return;
  const sheet = markSheet(scope, theme, themeName, Math.min(least, 18), density > 1 ? 2 : 1);
  if (!sheet) return;
  const sources = fills.styles.map((style): SkRect | null => {
    const place = sheet.order.indexOf(style);
    return place < 0 || (style === 'null' && least < 18)
      ? null
      : Skia.XYWHRect(place * sheet.side, 0, sheet.side, sheet.side);
  });
  const half = sheet.side / sheet.scale / 2;
  const from: SkRect[] = [];
  const to: SkRSXform[] = [];
  const { p0, p1, l0, l1 } = seenCells(model);
  for (let l = l0; l < l1; l++) {
    const across = Math.round((l + 0.5 - view.firstSymbol) * view.symbolPx * 2) / 2;
    for (let p = p0; p < p1; p++) {
      const source = sources[grid.cells[l * grid.fftSize + p]!];
      if (!source) continue;
      const along = Math.round((p + 0.5 - view.firstPosition) * view.subcarrierPx * 2) / 2;
      const x = (view.turned ? across : along) - half;
      const y = (view.turned ? view.heightPx - along : across) - half;
      from.push(source);
      to.push(Skia.RSXform(1 / sheet.scale, 0, x - 0.5, y - 0.5));
    }
  }
  if (from.length === 0) return;
  canvas.drawAtlas(sheet.image, from, to, scope.fill('#000000'), BlendMode.SrcOver, undefined, {
    filter: FilterMode.Linear,
  });
  for (const form of to) form.dispose();
}
