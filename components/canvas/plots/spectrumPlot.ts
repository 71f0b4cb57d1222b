import type { SkCanvas } from '@shopify/react-native-skia';
import { linearTicks } from '@/lib/drawing/axis';
import { plotY } from '@/lib/drawing/plot';
import type { SpectrumTrace } from '@/lib/editor/live/protocol';
import type { ThemeColors } from '@/components/ui/theme';
import type { DrawScope } from '../draw/scope';
import { clipTo, fillRect, frame, line, lines, polyline, text, type Point, type Rect } from '../draw/shapes';

export interface SpectrumModel {
  trace: SpectrumTrace | null;
  /** Positions at the plot's edges: the grid's own zoom, which may be ahead of the trace while it moves. */
  from: number;
  to: number;
}

/** Upper and lower end of the scale: whole tens round what is shown, from at most +20 to at least −60 dB. */
export function spectrumScale(trace: SpectrumTrace | null): { from: number; to: number } {
  let most = 0;
  if (trace) for (const db of trace.db.max) if (Number.isFinite(db)) most = Math.max(most, db);
  return { from: -65, to: Math.min(45, Math.max(10, Math.ceil((most + 4) / 5) * 5)) };
}

/** Density against the mean used cell, on the grid's own columns. */
export function drawSpectrum(
  canvas: SkCanvas,
  scope: DrawScope,
  area: Rect,
  model: SpectrumModel,
  theme: ThemeColors,
): void {
  const { trace } = model;
  const ends = spectrumScale(trace);
  const scale = { ...ends, heightPx: area.height };
  const yOf = (db: number) => area.y + plotY(db, scale);
  fillRect(canvas, scope.fill(theme.plot.background), area.x, area.y, area.width, area.height);
  for (const tick of linearTicks({ from: ends.from, to: ends.to, lengthPx: area.height }, 26)) {
    const y = Math.round(yOf(tick.value)) + 0.5;
    if (y < area.y + 2 || y > area.y + area.height - 2) continue;
    line(canvas, scope.stroke(theme.plot.grid, 1), area.x, y, area.x + area.width, y);
    text(canvas, scope, tick.label, area.x - 6, y + 4, theme.plot.axis, { align: 'end' });
  }
  if (area.x >= 40) text(canvas, scope, 'dB', area.x - 40, area.y + 12, theme.plot.axis, { font: 'words' });
  if (trace) {
    canvas.save();
    clipTo(canvas, area);
    drawTrace(canvas, scope, area, model, trace, yOf, theme);
    canvas.restore();
  }
  frame(canvas, scope.stroke(theme.rule.line, 1), area);
}

function drawTrace(
  canvas: SkCanvas,
  scope: DrawScope,
  area: Rect,
  { from, to }: SpectrumModel,
  trace: SpectrumTrace,
  yOf: (db: number) => number,
  theme: ThemeColors,
): void {
  const columns = trace.db.max.length;
  if (columns === 0 || to <= from) return;
  const px = area.width / (to - from);
  const step = (trace.to - trace.from) / columns;
  const bottom = area.y + area.height;
  const fill: Point[] = [];
  const outline: Point[] = [];
  for (let c = 0; c < columns; c++) {
    const x = area.x + (trace.from + (c + 0.5) * step - from) * px;
    if (x < area.x - px * step || x > area.x + area.width + px * step) continue;
    const high = yOf(trace.db.max[c]!);
    const low = yOf(trace.db.min[c]!);
    fill.push({ x, y: high }, { x, y: bottom });
    // Upwards and downwards in turn, so that the line visits both ends of each column without a saw.
    if (c % 2 === 0) outline.push({ x, y: low }, { x, y: high });
    else outline.push({ x, y: high }, { x, y: low });
  }
  lines(canvas, scope.stroke(theme.plot.traceFill, Math.max(1, px * step) + 1, { crisp: true }), fill);
  polyline(canvas, scope.stroke(theme.plot.trace, 1.25), outline);
}
