import {
  PaintStyle,
  Skia,
  TileMode,
  FilterMode,
  MipmapMode,
  type SkCanvas,
  type SkImage,
  type SkPaint,
} from '@shopify/react-native-skia';
import { cellMark } from '@/lib/drawing/cellMarks';
import { markOf, type InkStyleKey } from '@/lib/drawing/inkStyle';
import type { ThemeColors } from '@/components/ui/theme';
import { imageOfPixels, pixelOf, type DrawScope } from './scope';

/** One mark at a place, in the theme's mark colour: what the grid, the lens and a swatch share. */
export function drawMark(
  canvas: SkCanvas,
  scope: DrawScope,
  theme: ThemeColors,
  style: InkStyleKey,
  x: number,
  y: number,
  widthPx: number,
  heightPx: number,
): void {
  const color = theme.cell[style].mark;
  for (const shape of cellMark(markOf(style), widthPx, heightPx)) {
    if (shape.shape === 'dot') canvas.drawCircle(x + shape.xPx, y + shape.yPx, shape.radiusPx, scope.fill(color));
    else if (shape.shape === 'ring')
      canvas.drawCircle(x + shape.xPx, y + shape.yPx, shape.radiusPx, scope.stroke(color, shape.strokePx));
    else
      canvas.drawLine(
        x + shape.x1Px,
        y + shape.y1Px,
        x + shape.x2Px,
        y + shape.y2Px,
        scope.stroke(color, shape.strokePx),
      );
  }
}

export interface MarkSheet {
  image: SkImage;
  /** Side of a mark's square in the image, in image pixels, and how many image pixels stand for one drawing px. */
  side: number;
  scale: number;
  order: readonly InkStyleKey[];
}

const MARK_SIDE_PX = 20;

/**
 * The marks of all looks side by side in one image, so that thousands of cells are marked in one call. Marks are drawn
 * for cells of `cellPx` (the smaller side, up to 18).
 */
export function markSheet(
  scope: DrawScope,
  theme: ThemeColors,
  themeName: string,
  cellPx: number,
  scale: number,
): MarkSheet | null {
  const order = (Object.keys(theme.cell) as InkStyleKey[]).filter((style) => style !== 'reserved');
  const side = MARK_SIDE_PX * scale;
  const image = scope.image(`marks ${themeName} ${cellPx} ${scale}`, () => {
    const surface = Skia.Surface.Make(side * order.length, side);
    if (!surface) return null;
    const canvas = surface.getCanvas();
    canvas.clear(Skia.Color('transparent'));
    canvas.scale(scale, scale);
    const inset = (MARK_SIDE_PX - cellPx) / 2;
    order.forEach((style, i) => drawMark(canvas, scope, theme, style, i * MARK_SIDE_PX + inset, inset, cellPx, cellPx));
    const made = surface.makeImageSnapshot();
    surface.dispose();
    return made;
  });
  return image && { image, side, scale, order };
}

const HATCH_PX = 4;

/** A paint that lays the reserved hatch (45°, 4 px pitch) over whatever is filled with it. */
export function hatchPaint(scope: DrawScope, theme: ThemeColors, themeName: string): SkPaint {
  return scope.paint(`hatch ${themeName}`, () => {
    const paint = Skia.Paint();
    paint.setStyle(PaintStyle.Fill);
    const tile = hatchTile(theme);
    if (tile) {
      paint.setShader(
        tile.makeShaderOptions(
          TileMode.Repeat,
          TileMode.Repeat,
          FilterMode.Linear,
          MipmapMode.None,
          Skia.Matrix([0.5, 0, 0, 0, 0.5, 0, 0, 0, 1]),
        ),
      );
      tile.dispose();
    }
    return paint;
  });
}

/** The hatch's unit at twice the size, so that it stays fine on dense screens. */
function hatchTile(theme: ThemeColors): SkImage | null {
  const side = HATCH_PX * 2;
  const mark = pixelOf(theme.cell.reserved.mark);
  const pixels = new Uint32Array(side * side);
  for (let y = 0; y < side; y++) {
    for (let x = 0; x < side; x++) {
      const off = (x + y) % side;
      // A stroke of 1 px at 45° covers about 1.4 px along the row: two full image pixels and a part of a third.
      const cover = off < 2 ? 1 : off === 2 || off === side - 1 ? 0.4 : 0;
      pixels[y * side + x] = (mark & 0x00ffffff) | (Math.round(cover * 204) << 24);
    }
  }
  return imageOfPixels(new Uint8Array(pixels.buffer), side, side);
}
