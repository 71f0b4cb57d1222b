import type { SkCanvas } from '@shopify/react-native-skia';
import { rectOnScreen } from '@/lib/editor/kernels/hitTest';
import type { CellPoint, CellRect, Viewport } from '@/lib/editor/types';
import type { ThemeColors } from '@/components/ui/theme';
import type { DrawScope } from './scope';
import { clipTo, fillRect } from './shapes';

export interface OverlayModel {
  view: Viewport;
  cursor: CellPoint;
  selection: CellRect | null;
  hover: CellPoint | null;
  preview: CellRect | null;
  /** The canvas has the keyboard: the cursor cell stands out. */
  hasFocus: boolean;
  dcPosition: number;
}

/** A dark and a light line side by side: one of them stands out on every fill. */
export function outline(canvas: SkCanvas, scope: DrawScope, theme: ThemeColors, view: Viewport, rect: CellRect): void {
  const { xPx, yPx, widthPx, heightPx } = rectOnScreen(view, rect);
  // A block narrower than its outline is widened, or nothing but lines would be seen.
  const grow = Math.max(0, 4 - widthPx) / 2;
  const x = Math.round(xPx - grow);
  const y = Math.round(yPx);
  const width = Math.max(4, Math.round(widthPx + 2 * grow));
  const height = Math.max(4, Math.round(heightPx));
  const ring = (color: string, inset: number) => {
    const paint = scope.fill(color);
    const [l, t, w, h] = [x - inset, y - inset, width + 2 * inset, height + 2 * inset];
    fillRect(canvas, paint, l, t, w, 1);
    fillRect(canvas, paint, l, t + h - 1, w, 1);
    fillRect(canvas, paint, l, t, 1, h);
    fillRect(canvas, paint, l + w - 1, t, 1, h);
  };
  ring(theme.canvas.selectionLight, 2);
  ring(theme.canvas.selectionDark, 1);
  ring(theme.canvas.selectionLight, 0);
}

/** DC, the block a form would paint, the selection, the cursor cell and the pointer's cell, over the grid. */
export function drawOverlay(canvas: SkCanvas, scope: DrawScope, model: OverlayModel, theme: ThemeColors): void {
  const { view, cursor, selection, hover, preview } = model;
  canvas.save();
  clipTo(canvas, { x: 0, y: 0, width: view.widthPx, height: view.heightPx });
  drawDcLine(canvas, scope, model, theme);
  if (preview) {
    const { xPx, yPx, widthPx, heightPx } = rectOnScreen(view, preview);
    const paint = scope.stroke(theme.canvas.hover, 1, { dash: [4, 3] });
    canvas.drawRect(
      {
        x: Math.round(xPx) + 0.5,
        y: Math.round(yPx) + 0.5,
        width: Math.max(2, widthPx - 1),
        height: Math.max(2, heightPx - 1),
      },
      paint,
    );
  }
  if (hover && (hover.position !== cursor.position || hover.symbol !== cursor.symbol)) {
    const { xPx, yPx, widthPx, heightPx } = rectOnScreen(view, cellRect(hover));
    const width = Math.max(2, widthPx);
    canvas.drawRect(
      { x: xPx - (width - widthPx) / 2 + 0.5, y: yPx + 0.5, width: width - 1, height: Math.max(1, heightPx - 2) },
      scope.stroke(theme.canvas.hover, 1.5),
    );
  }
  outline(canvas, scope, theme, view, selection ?? cellRect(cursor));
  canvas.restore();
}

function cellRect({ position, symbol }: CellPoint): CellRect {
  return { positionFrom: position, positionTo: position, symbolFrom: symbol, symbolTo: symbol };
}

/** Subcarrier 0 is a thin broken line through the grid. */
function drawDcLine(canvas: SkCanvas, scope: DrawScope, { view, dcPosition }: OverlayModel, theme: ThemeColors): void {
  const along = (dcPosition + 0.5 - view.firstPosition) * view.subcarrierPx;
  const paint = scope.stroke(theme.canvas.dcLine, 1, { dash: [2, 4] });
  if (view.turned) {
    const y = Math.round(view.heightPx - along) + 0.5;
    canvas.drawLine(0, y, view.widthPx, y, paint);
  } else {
    const x = Math.round(along) + 0.5;
    canvas.drawLine(x, 0, x, view.heightPx, paint);
  }
}
