import type { SkCanvas } from '@shopify/react-native-skia';
import type { ThemeColors } from '@/components/ui/theme';
import type { Viewport } from '@/lib/editor/types';
import { FilterMode, MipmapMode, Skia } from '@shopify/react-native-skia';
import type { ReducedImage } from './gridImages';
import type { DrawScope } from './scope';
import { frame, type Rect } from './shapes';

/** The positions that a strip shows: the painted ones and a little on both sides, the window's always among them. */
export interface BandModel {
  from: number;
  to: number;
  picture: ReducedImage | null;
  view: Viewport;
}

/** A phone's strip of the whole band with the window that the grid shows. */
export function drawBandStrip(
  canvas: SkCanvas,
  scope: DrawScope,
  strip: Rect,
  model: BandModel,
  theme: ThemeColors,
): void {
  const { from, to, picture, view } = model;
  if (picture)
    canvas.drawImageRectOptions(
      picture.image,
      Skia.XYWHRect(0, 0, picture.columns, picture.rows),
      Skia.XYWHRect(strip.x, strip.y, strip.width, strip.height),
      FilterMode.Nearest,
      MipmapMode.None,
      scope.fill('#000000'),
    );
  frame(canvas, scope.stroke(theme.rule.line, 1), {
    x: strip.x - 1,
    y: strip.y - 1,
    width: strip.width + 2,
    height: strip.height + 2,
  });
  const px = strip.width / (to - from);
  const shown = (view.turned ? view.heightPx : view.widthPx) / view.subcarrierPx;
  const x = strip.x + (view.firstPosition - from) * px;
  const width = Math.max(8, shown * px);
  canvas.drawRRect(
    Skia.RRectXY(Skia.XYWHRect(x - (width - shown * px) / 2, strip.y - 2, width, strip.height + 4), 2, 2),
    scope.stroke(theme.focus.ring, 2),
  );
}
