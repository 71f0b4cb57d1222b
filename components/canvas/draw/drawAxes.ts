import type { SkCanvas } from '@shopify/react-native-skia';
import { linearTicks, megahertzTicks, subcarrierTicks, symbolTicks, type AxisTick } from '@/lib/drawing/axis';
import { formatNumber } from '@/lib/drawing/quantities';
import type { Viewport } from '@/lib/editor/types';
import type { ThemeColors } from '@/components/ui/theme';
import type { DrawScope } from './scope';
import { fillRect, frame, line, lines, text, type Point, type Rect } from './shapes';

export interface StraightedgeModel {
  view: Viewport;
  fftSize: number;
  spacingHz: number;
  /** Left edge and width of the scale within the bar: the grid's columns. */
  plotX: number;
  plotWidth: number;
  /** The pointer's reading in place of the dots' scale while pointing. */
  reading: readonly [string, string] | null;
}

/** The bar between grid and spectrum: subcarriers on its upper edge, MHz on its lower, DC in bold. */
export function drawStraightedge(
  canvas: SkCanvas,
  scope: DrawScope,
  bar: Rect,
  model: StraightedgeModel,
  theme: ThemeColors,
): void {
  const { view, fftSize, spacingHz, plotX, plotWidth, reading } = model;
  const tick = theme.canvas.ruleTick;
  const bottom = bar.y + bar.height;
  fillRect(canvas, scope.fill(theme.canvas.ruleEdge), bar.x, bar.y, bar.width, bar.height);
  frame(canvas, scope.stroke(theme.rule.line, 1), bar);
  // Turned, the grid's subcarriers run upwards; bar and spectrum go on showing the same part of the band.
  const along = view.turned ? view.heightPx : view.widthPx;
  const span = {
    from: view.firstPosition,
    to: view.firstPosition + along / view.subcarrierPx,
    lengthPx: plotWidth,
  };
  const ends: Point[] = [];
  const put = (ticks: AxisTick[], edge: number, inwards: 1 | -1, baseline: number, marginPx: number) => {
    for (const { atPx, label, isZero } of ticks) {
      const x = Math.round(plotX + atPx) + 0.5;
      if (x < plotX || x > plotX + plotWidth) continue;
      ends.push({ x, y: edge }, { x, y: edge + inwards * (label ? 6 : 3) });
      if (!label || atPx < marginPx || atPx > plotWidth - marginPx) continue;
      const isDc = isZero && inwards === 1;
      // The carrier is named once, on the upper edge.
      if (isZero && !isDc) continue;
      text(canvas, scope, label, x, baseline, isDc ? theme.ink.strong : tick, {
        font: isDc ? 'axisStrong' : 'axis',
        align: 'middle',
      });
    }
  };
  put(subcarrierTicks(span, fftSize, 56), bar.y, 1, bar.y + 17, 10);
  const megahertzPx = plotWidth < 500 ? 64 : 90;
  const small = megahertzTicks(span, fftSize, spacingHz, megahertzPx / 4).map((one) => ({ ...one, label: '' }));
  put(small, bottom, -1, bottom - 8, 18);
  put(megahertzTicks(span, fftSize, spacingHz, megahertzPx), bottom, -1, bottom - 8, 18);
  lines(canvas, scope.stroke(tick, 1), ends);
  text(canvas, scope, 'k', plotX - 5, bar.y + 17, tick, { align: 'end' });
  text(canvas, scope, 'MHz', plotX - 5, bottom - 8, tick, { align: 'end' });
  if (reading) {
    const x = plotX + plotWidth + 12;
    text(canvas, scope, reading[0], x, bar.y + 16, theme.plot.cursor, { font: 'figure' });
    text(canvas, scope, reading[1], x, bottom - 7, theme.plot.cursor, { font: 'figure' });
  }
}

/** Symbol numbers left of the grid; the chosen one in bold. Turned: along its lower edge. */
export function drawSymbolNumbers(
  canvas: SkCanvas,
  scope: DrawScope,
  grid: Rect,
  view: Viewport,
  symbolCount: number,
  chosen: number,
  fftSize: number,
  theme: ThemeColors,
): void {
  if (view.turned) return drawTurnedNumbers(canvas, scope, grid, view, symbolCount, chosen, fftSize, theme);
  const to = view.firstSymbol + grid.height / view.symbolPx;
  const ticks = symbolTicks({ from: view.firstSymbol, to, lengthPx: grid.height }, symbolCount, 12);
  if (!ticks.some((tick) => tick.value === chosen)) {
    const atPx = (chosen + 0.5 - view.firstSymbol) * view.symbolPx;
    if (atPx >= 0 && atPx <= grid.height)
      ticks.push({ value: chosen, atPx, label: formatNumber(chosen), isZero: false });
  }
  for (const { value, atPx, label } of ticks) {
    if (atPx < 6 || atPx > grid.height - 2) continue;
    const isChosen = value === chosen;
    text(
      canvas,
      scope,
      label,
      grid.x - 8,
      Math.round(grid.y + atPx + 4),
      isChosen ? theme.ink.strong : theme.ink.quiet,
      {
        font: isChosen ? 'axisStrong' : 'axis',
        align: 'end',
      },
    );
  }
}

/** Turned axes: subcarriers at the left, upwards; symbol numbers over the grid. */
function drawTurnedNumbers(
  canvas: SkCanvas,
  scope: DrawScope,
  grid: Rect,
  view: Viewport,
  symbolCount: number,
  chosen: number,
  fftSize: number,
  theme: ThemeColors,
): void {
  const along = {
    from: view.firstPosition,
    to: view.firstPosition + grid.height / view.subcarrierPx,
    lengthPx: grid.height,
  };
  for (const { atPx, label, isZero } of subcarrierTicks(along, fftSize, 40)) {
    if (!label || atPx < 6 || atPx > grid.height - 4) continue;
    const y = Math.round(grid.y + grid.height - atPx + 4);
    const font = isZero ? 'axisStrong' : 'axis';
    text(canvas, scope, label, grid.x - 6, y, isZero ? theme.ink.strong : theme.ink.quiet, { font, align: 'end' });
  }
  const across = { from: view.firstSymbol, to: view.firstSymbol + grid.width / view.symbolPx, lengthPx: grid.width };
  for (const { value, atPx, label } of symbolTicks(across, symbolCount, 28)) {
    if (atPx < 6 || atPx > grid.width - 6) continue;
    const isChosen = value === chosen;
    text(canvas, scope, label, grid.x + atPx, grid.y - 4, isChosen ? theme.ink.strong : theme.ink.quiet, {
      font: isChosen ? 'axisStrong' : 'axis',
      align: 'middle',
    });
  }
}

export interface PeakModel {
  view: Viewport;
  symbolPaprDb: Float32Array;
  before: Float32Array | null;
  worst: number | null;
  isStale: boolean;
}

/** The scale of the peak dots, hollow ones too: whole dB round what is shown, at least 3 dB wide. */
export function peakScale(values: Float32Array, before: Float32Array | null): { from: number; to: number } {
  let least = Infinity;
  let most = -Infinity;
  for (const all of before ? [values, before] : [values]) {
    for (const value of all) {
      if (!Number.isFinite(value)) continue;
      least = Math.min(least, value);
      most = Math.max(most, value);
    }
  }
  if (least > most) return { from: 0, to: 12 };
  const from = Math.floor(least - 0.3);
  return { from, to: Math.max(Math.ceil(most + 0.3), from + 3) };
}

const peakTicks = (from: number, to: number, area: Rect) =>
  linearTicks({ from, to, lengthPx: area.width - 16 }, 22).filter((tick) => Number.isInteger(tick.value));

/** One dot a symbol beside its row: its PAPR, the worst in danger ink. */
export function drawPeakDots(
  canvas: SkCanvas,
  scope: DrawScope,
  area: Rect,
  model: PeakModel,
  theme: ThemeColors,
): void {
  const { view, symbolPaprDb, before, worst, isStale } = model;
  if (view.turned) return;
  const { from, to } = peakScale(symbolPaprDb, before);
  const xOf = (db: number) => area.x + 8 + ((db - from) / (to - from)) * (area.width - 16);
  for (const { value } of peakTicks(from, to, area)) {
    const x = Math.round(xOf(value)) + 0.5;
    line(canvas, scope.stroke(theme.plot.grid, 1), x, area.y, x, area.y + area.height);
  }
  const first = Math.max(0, Math.floor(view.firstSymbol));
  const last = Math.min(symbolPaprDb.length, Math.ceil(view.firstSymbol + area.height / view.symbolPx));
  const radius = Math.min(3, Math.max(1, view.symbolPx / 4));
  for (let l = first; l < last; l++) {
    const db = symbolPaprDb[l]!;
    const y = area.y + (l + 0.5 - view.firstSymbol) * view.symbolPx;
    if (!Number.isFinite(db) || y < area.y || y > area.y + area.height) continue;
    const was = before?.[l] ?? NaN;
    if (Number.isFinite(was)) {
      line(canvas, scope.stroke(theme.plot.before, 1), xOf(db), y, xOf(was), y);
      canvas.drawCircle(xOf(was), y, radius, scope.fill(theme.plot.background));
      canvas.drawCircle(xOf(was), y, radius, scope.stroke(theme.plot.before, 1.25));
    }
    const color = l === worst ? theme.plot.peak : theme.plot.trace;
    canvas.drawCircle(xOf(db), y, radius, scope.fill(color, isStale ? 0.4 : 1));
  }
}

/** The dots' scale on the straightedge. */
export function drawPeakScale(
  canvas: SkCanvas,
  scope: DrawScope,
  area: Rect,
  { symbolPaprDb, before }: Pick<PeakModel, 'symbolPaprDb' | 'before'>,
  theme: ThemeColors,
): void {
  const { from, to } = peakScale(symbolPaprDb, before);
  const tick = theme.canvas.ruleTick;
  line(canvas, scope.stroke(theme.rule.line, 1), area.x + 0.5 - 4, area.y, area.x + 0.5 - 4, area.y + area.height);
  for (const { atPx, label } of peakTicks(from, to, area)) {
    const x = Math.round(area.x + 8 + atPx) + 0.5;
    line(canvas, scope.stroke(tick, 1), x, area.y, x, area.y + 6);
    text(canvas, scope, label, x, area.y + 17, tick, { align: 'middle' });
  }
}
