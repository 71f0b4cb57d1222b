import type { SkCanvas } from '@shopify/react-native-skia';
import type { ConstellationTrace } from '@/lib/editor/live/protocol';
import type { ThemeColors } from '@/components/ui/theme';
import type { DrawScope } from '../draw/scope';
import { dots, fillRect, frame, line, type Point, type Rect } from '../draw/shapes';

/** The chosen ink's values: I to the right, Q upwards, one scale for both. */
export function drawConstellation(
  canvas: SkCanvas,
  scope: DrawScope,
  block: Rect,
  trace: ConstellationTrace | null,
  theme: ThemeColors,
): void {
  fillRect(canvas, scope.fill(theme.plot.background), block.x, block.y, block.width, block.height);
  const cx = Math.round(block.x + block.width / 2) + 0.5;
  const cy = Math.round(block.y + block.height / 2) + 0.5;
  line(canvas, scope.stroke(theme.plot.grid, 1), block.x, cy, block.x + block.width, cy);
  line(canvas, scope.stroke(theme.plot.grid, 1), cx, block.y, cx, block.y + block.height);
  if (trace && trace.points.length > 0) {
    let most = 1;
    for (const value of trace.points) most = Math.max(most, Math.abs(value));
    const px = (Math.min(block.width, block.height) / 2 - 12) / most;
    // Equal values fall on one pixel place: each is drawn once.
    const seen = new Set<number>();
    const list: Point[] = [];
    for (let i = 0; i < trace.points.length; i += 2) {
      const x = Math.round((cx + trace.points[i]! * px) * 2) / 2;
      const y = Math.round((cy - trace.points[i + 1]! * px) * 2) / 2;
      const place = Math.round(x * 2) * 65536 + Math.round(y * 2);
      if (seen.has(place)) continue;
      seen.add(place);
      list.push({ x, y });
    }
    const size = list.length <= 64 ? 5 : list.length <= 300 ? 3 : 2;
    dots(canvas, scope.stroke(theme.plot.point, size, { cap: 'round' }), list);
  }
  frame(canvas, scope.stroke(theme.rule.line, 1), block);
}
