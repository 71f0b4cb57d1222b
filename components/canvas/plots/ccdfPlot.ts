import type { SkCanvas } from '@shopify/react-native-skia';
import { decadeTicks, linearTicks } from '@/lib/drawing/axis';
import { formatNumber } from '@/lib/drawing/quantities';
import type { CcdfTrace } from '@/lib/editor/live/protocol';
import type { ThemeColors } from '@/components/ui/theme';
import type { DrawScope } from '../draw/scope';
import { clipTo, fillRect, frame, line, polyline, text, type Point, type Rect } from '../draw/shapes';

const LEFT_PX = 34;
const FOOT_PX = 18;
const LOWEST_EXPONENT = -5;

/** How often the power passes a threshold over the mean, beside what Gaussian noise would give. */
export function drawCcdf(
  canvas: SkCanvas,
  scope: DrawScope,
  block: Rect,
  trace: CcdfTrace | null,
  theme: ThemeColors,
): void {
  const area: Rect = { x: block.x + LEFT_PX, y: block.y, width: block.width - LEFT_PX, height: block.height - FOOT_PX };
  const bottom = area.y + area.height;
  const most = Math.max(12, Math.ceil(lastShown(trace)));
  const xOf = (db: number) => area.x + (db / most) * area.width;
  const yOf = (probability: number) => area.y + (Math.log10(probability) / LOWEST_EXPONENT) * area.height;
  fillRect(canvas, scope.fill(theme.plot.background), area.x, area.y, area.width, area.height);
  const hair = scope.stroke(theme.plot.grid, 1);
  for (const tick of decadeTicks(LOWEST_EXPONENT, 0, area.height)) {
    const y = Math.round(area.y + tick.atPx) + 0.5;
    line(canvas, hair, area.x, y, area.x + area.width, y);
    decade(
      canvas,
      scope,
      Math.round(Math.log10(tick.value)),
      area.x - 5,
      Math.min(Math.max(y + 4, area.y + 9), bottom + 1),
      theme,
    );
  }
  for (const tick of linearTicks({ from: 0, to: most, lengthPx: area.width }, 56)) {
    const x = Math.round(area.x + tick.atPx) + 0.5;
    line(canvas, hair, x, area.y, x, bottom);
    const isLast = tick.atPx > area.width - 6;
    text(canvas, scope, tick.label, isLast ? x - 1 : x, bottom + 14, theme.plot.axis, {
      align: isLast ? 'end' : 'middle',
    });
  }
  if (trace) {
    canvas.save();
    clipTo(canvas, area);
    const points = (probabilities: Float32Array): Point[] => {
      const list: Point[] = [];
      for (let i = 0; i < probabilities.length; i++)
        if (probabilities[i]! > 0) list.push({ x: xOf(trace.thresholdsDb[i]!), y: yOf(probabilities[i]!) });
      return list;
    };
    dashed(canvas, scope, points(trace.gaussian), theme.plot.reference);
    polyline(canvas, scope.stroke(theme.plot.trace, 1.75), points(trace.probability));
    canvas.restore();
    drawWords(canvas, scope, area, trace, xOf, yOf, theme);
  }
  frame(canvas, scope.stroke(theme.rule.line, 1), area);
}

/** A power of ten with its exponent raised: the figure face has no raised digits. */
function decade(canvas: SkCanvas, scope: DrawScope, exponent: number, x: number, y: number, theme: ThemeColors): void {
  if (exponent === 0) return text(canvas, scope, '1', x, y, theme.plot.axis, { align: 'end' });
  const raised = formatNumber(exponent);
  text(canvas, scope, raised, x, y - 4, theme.plot.axis, { font: 'raised', align: 'end' });
  text(canvas, scope, '10', x - scope.textWidth(raised, 'raised') - 1, y, theme.plot.axis, { align: 'end' });
}

/** Threshold of the last sample that the curve shows. */
function lastShown(trace: CcdfTrace | null): number {
  if (!trace) return 0;
  let last = 0;
  for (let i = 0; i < trace.probability.length; i++)
    if (trace.probability[i]! >= 10 ** LOWEST_EXPONENT) last = trace.thresholdsDb[i]!;
  return last;
}

/** A dashed curve as separate strokes along it: five on, three off. */
function dashed(canvas: SkCanvas, scope: DrawScope, points: Point[], color: string): void {
  const paint = scope.stroke(color, 1.25);
  let along = 0;
  let piece: Point[] = [];
  for (let i = 0; i < points.length; i++) {
    const before = points[i - 1];
    const here = points[i]!;
    if (before) along += Math.hypot(here.x - before.x, here.y - before.y);
    if (along % 8 < 5) piece.push(here);
    else {
      polyline(canvas, paint, piece);
      piece = [];
    }
  }
  polyline(canvas, paint, piece);
}

function drawWords(
  canvas: SkCanvas,
  scope: DrawScope,
  area: Rect,
  trace: CcdfTrace,
  xOf: (db: number) => number,
  yOf: (probability: number) => number,
  theme: ThemeColors,
): void {
  const at = trace.atOneInThousandDb;
  if (at !== null) {
    const x = xOf(at);
    const y = yOf(1e-3);
    canvas.drawCircle(x, y, 3.5, scope.fill(theme.plot.background));
    canvas.drawCircle(x, y, 3.5, scope.stroke(theme.plot.trace, 1.5));
    text(canvas, scope, `${formatNumber(at, 2, true)} dB`, x - 8, y + 14, theme.plot.trace, {
      font: 'figure',
      align: 'end',
    });
  }
  const right = area.x + area.width - 10;
  const y = area.y + 16;
  text(canvas, scope, 'Gaussian', right, y + 4, theme.plot.reference, { font: 'words', align: 'end' });
  const left = right - scope.textWidth('Gaussian', 'words') - 8;
  polyline(canvas, scope.stroke(theme.plot.reference, 1.25), [
    { x: left - 26, y },
    { x: left - 20, y },
  ]);
  for (const start of [-26, -17, -8])
    line(canvas, scope.stroke(theme.plot.reference, 1.25), left + start, y, left + start + 6, y);
}
