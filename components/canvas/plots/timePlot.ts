import { Skia, type SkCanvas } from '@shopify/react-native-skia';
import { linearScale, linearTicks } from '@/lib/drawing/axis';
import { plotY } from '@/lib/drawing/plot';
import { formatNumber } from '@/lib/drawing/quantities';
import type { TimeTrace } from '@/lib/editor/live/protocol';
import type { ThemeColors } from '@/components/ui/theme';
import type { DrawScope } from '../draw/scope';
import { clipTo, fillRect, frame, line, lines, text, type Point, type Rect } from '../draw/shapes';

/** Space over the plot for the arc, left for the scale, under it for sample numbers. */
const ARC_PX = 34;
const LEFT_PX = 22;
const FOOT_PX = 18;

/** The plot area within a block. */
export function timeArea({ x, y, width, height }: Rect): Rect {
  return { x: x + LEFT_PX, y: y + ARC_PX, width: width - LEFT_PX - 1, height: height - ARC_PX - FOOT_PX };
}

/** One symbol's envelope over its RMS; the prefix and the tail that it copies share one wash, joined by an arc. */
export function drawTimePlot(
  canvas: SkCanvas,
  scope: DrawScope,
  block: Rect,
  trace: TimeTrace | null,
  theme: ThemeColors,
): void {
  const area = timeArea(block);
  const bottom = area.y + area.height;
  fillRect(canvas, scope.fill(theme.plot.background), area.x, area.y, area.width, area.height);
  if (trace) {
    const { toPx } = linearScale({ from: trace.from, to: trace.to, lengthPx: area.width });
    const xOf = (sample: number) => area.x + toPx(sample);
    // A little room over the peak, so that its ring is whole.
    const most = Math.ceil(Math.max(2, (trace.peak?.ratio ?? 0) * 1.06) * 5) / 5;
    const scale = { from: 0, to: most, heightPx: area.height };
    const yOf = (ratio: number) => area.y + plotY(ratio, scale);
    const washes: [number, number][] =
      trace.prefixSamples > 0
        ? [
            [-trace.prefixSamples, 0],
            [trace.tail.from, trace.tail.to],
          ]
        : [];
    drawHeights(canvas, scope, area, most, yOf, theme);
    canvas.save();
    clipTo(canvas, area);
    for (const [from, to] of washes) {
      fillRect(canvas, scope.fill(theme.wash.prefix), xOf(from), area.y, xOf(to) - xOf(from), area.height);
      for (const edge of [from, to]) {
        const x = Math.round(xOf(edge)) + 0.5;
        line(canvas, scope.stroke(theme.wash.prefixEdge, 1), x, area.y, x, bottom);
      }
    }
    drawEnvelope(
      canvas,
      scope,
      area,
      trace,
      yOf,
      washes.map(([from, to]) => [xOf(from), xOf(to)]),
      theme,
    );
    canvas.restore();
    if (washes.length > 0) drawArc(canvas, scope, area, trace, xOf, theme);
    if (trace.peak && trace.paprDb !== null)
      drawPeak(canvas, scope, area, xOf(trace.peak.at), yOf(trace.peak.ratio), trace.paprDb, theme);
    for (const tick of linearTicks({ from: trace.from, to: trace.to, lengthPx: area.width }, 70)) {
      const x = Math.round(area.x + tick.atPx) + 0.5;
      line(canvas, scope.stroke(theme.plot.axis, 1), x, bottom, x, bottom + 4);
      if (tick.atPx > 8 && tick.atPx < area.width - 4)
        text(canvas, scope, tick.label, x, bottom + 15, theme.plot.axis, { align: 'middle' });
    }
  }
  frame(canvas, scope.stroke(theme.rule.line, 1), area);
}

function drawHeights(
  canvas: SkCanvas,
  scope: DrawScope,
  area: Rect,
  most: number,
  yOf: (ratio: number) => number,
  theme: ThemeColors,
): void {
  for (let ratio = 1; ratio < most; ratio++) {
    const y = Math.round(yOf(ratio)) + 0.5;
    const paint =
      ratio === 1 ? scope.stroke(theme.plot.reference, 1, { dash: [4, 3] }) : scope.stroke(theme.plot.grid, 1);
    line(canvas, paint, area.x, y, area.x + area.width, y);
    text(canvas, scope, formatNumber(ratio), area.x - 6, y + 4, theme.plot.axis, { align: 'end' });
  }
}

/** Least to highest of each column as one upright line: no peak is skipped. Within a wash in its own ink. */
function drawEnvelope(
  canvas: SkCanvas,
  scope: DrawScope,
  area: Rect,
  { envelope }: TimeTrace,
  yOf: (ratio: number) => number,
  washes: number[][],
  theme: ThemeColors,
): void {
  const columns = envelope.max.length;
  if (columns === 0) return;
  const columnPx = area.width / columns;
  const plain: Point[] = [];
  const washed: Point[] = [];
  for (let c = 0; c < columns; c++) {
    const x = area.x + (c + 0.5) * columnPx;
    // Neighbouring columns are joined: a column begins where the one before ended, if that lies outside of it.
    const high = Math.max(envelope.max[c]!, c > 0 ? envelope.min[c - 1]! : 0);
    const low = Math.min(envelope.min[c]!, c > 0 ? envelope.max[c - 1]! : Infinity);
    const target = washes.some(([from, to]) => x >= from! && x <= to!) ? washed : plain;
    target.push({ x, y: yOf(high) - 0.5 }, { x, y: yOf(low) + 0.5 });
  }
  lines(canvas, scope.stroke(theme.plot.trace, Math.max(1, columnPx), { crisp: true }), plain);
  lines(canvas, scope.stroke(theme.wash.prefixEdge, Math.max(1, columnPx), { crisp: true }), washed);
}

function drawArc(
  canvas: SkCanvas,
  scope: DrawScope,
  area: Rect,
  trace: TimeTrace,
  xOf: (sample: number) => number,
  theme: ThemeColors,
): void {
  const cut = (x: number) => Math.min(Math.max(x, area.x), area.x + area.width);
  const tail = cut(xOf((trace.tail.from + trace.tail.to) / 2));
  const prefix = cut(xOf(-trace.prefixSamples / 2));
  if (tail - prefix < 40) return;
  const top = area.y - 1;
  const paint = scope.stroke(theme.wash.arc, 1.25);
  const path = Skia.PathBuilder.Make();
  const bend = (tail - prefix) * 0.12;
  path.moveTo(tail, top);
  path.cubicTo(tail - bend, top - ARC_PX * 1.26, prefix + bend, top - ARC_PX * 1.26, prefix, top);
  path.moveTo(prefix - 1.5, top - 6.5);
  path.lineTo(prefix, top + 0.5);
  path.lineTo(prefix + 5.5, top - 3.5);
  const made = path.build();
  canvas.drawPath(made, paint);
  made.dispose();
  path.dispose();
  text(canvas, scope, 'prefix', prefix + 22, area.y - 5, theme.wash.prefixEdge, { font: 'words' });
  text(canvas, scope, 'tail it copies', tail - 22, area.y - 5, theme.wash.prefixEdge, { font: 'words', align: 'end' });
}

function drawPeak(
  canvas: SkCanvas,
  scope: DrawScope,
  area: Rect,
  x: number,
  y: number,
  paprDb: number,
  theme: ThemeColors,
): void {
  if (x < area.x || x > area.x + area.width) return;
  canvas.drawCircle(x, y, 3.5, scope.stroke(theme.plot.peak, 1.5));
  const isRight = x > area.x + area.width * 0.6;
  text(canvas, scope, `${formatNumber(paprDb, 2, true)} dB`, x + (isRight ? -8 : 8), y + 4, theme.plot.peak, {
    font: 'figure',
    align: isRight ? 'end' : 'start',
  });
}
