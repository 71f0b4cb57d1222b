import type { SkCanvas } from '@shopify/react-native-skia';
import type { CellPoint } from '@/lib/editor/types';
import type { ThemeColors } from '@/components/ui/theme';
import { drawMark, hatchPaint } from '../draw/markSheet';
import type { GridCells, InkFills } from '../draw/gridImages';
import type { DrawScope } from '../draw/scope';
import { fillRect, frame, type Rect } from '../draw/shapes';

export const LENS_POSITIONS = 11;
export const LENS_SYMBOLS = 7;

export interface LensModel {
  grid: GridCells;
  fills: InkFills;
  cursor: CellPoint;
  themeName: string;
}

/** 11 × 7 cells round the cursor, large enough for their marks at any zoom. */
export function drawLens(canvas: SkCanvas, scope: DrawScope, block: Rect, model: LensModel, theme: ThemeColors): void {
  const { grid, fills, cursor, themeName } = model;
  fillRect(canvas, scope.fill(theme.surface.sunken), block.x, block.y, block.width, block.height);
  const firstPosition = cursor.position - Math.floor(LENS_POSITIONS / 2);
  const firstSymbol = Math.min(
    Math.max(cursor.symbol - Math.floor(LENS_SYMBOLS / 2), 0),
    Math.max(0, grid.symbolCount - LENS_SYMBOLS),
  );
  const xAt = (i: number) => Math.round(block.x + 1 + (i * (block.width - 1)) / LENS_POSITIONS);
  const yAt = (i: number) => Math.round(block.y + 1 + (i * (block.height - 1)) / LENS_SYMBOLS);
  for (let r = 0; r < LENS_SYMBOLS; r++) {
    const symbol = firstSymbol + r;
    if (symbol >= grid.symbolCount) continue;
    for (let c = 0; c < LENS_POSITIONS; c++) {
      const position = firstPosition + c;
      if (position < 0 || position >= grid.fftSize) continue;
      const style = fills.styles[grid.cells[symbol * grid.fftSize + position]!] ?? 'null';
      const [x, y] = [xAt(c), yAt(r)];
      const [width, height] = [xAt(c + 1) - x - 1, yAt(r + 1) - y - 1];
      fillRect(canvas, scope.fill(theme.cell[style].fill), x, y, width, height);
      if (style === 'reserved') fillRect(canvas, hatchPaint(scope, theme, themeName), x, y, width, height);
      else drawMark(canvas, scope, theme, style, x, y, width, height);
    }
  }
  const [x, y] = [xAt(cursor.position - firstPosition), yAt(cursor.symbol - firstSymbol)];
  const [width, height] = [
    xAt(cursor.position - firstPosition + 1) - x - 1,
    yAt(cursor.symbol - firstSymbol + 1) - y - 1,
  ];
  frame(canvas, scope.stroke(theme.canvas.selectionLight, 1), {
    x: x - 2,
    y: y - 2,
    width: width + 4,
    height: height + 4,
  });
  frame(canvas, scope.stroke(theme.canvas.selectionDark, 1), {
    x: x - 1,
    y: y - 1,
    width: width + 2,
    height: height + 2,
  });
  frame(canvas, scope.stroke(theme.canvas.selectionLight, 1), { x, y, width, height });
  frame(canvas, scope.stroke(theme.rule.line, 1), block);
}
