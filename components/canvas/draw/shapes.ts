import { ClipOp, PointMode, Skia, type SkCanvas, type SkPaint } from '@shopify/react-native-skia';
import type { DrawScope, FontKey } from './scope';

export interface Rect {
  x: number;
  y: number;
  width: number;
  height: number;
}

export interface Point {
  x: number;
  y: number;
}

export function fillRect(canvas: SkCanvas, paint: SkPaint, x: number, y: number, width: number, height: number): void {
  canvas.drawRect(Skia.XYWHRect(x, y, width, height), paint);
}

/** A frame of 1 px that lies inside of the block, on whole pixels. */
export function frame(canvas: SkCanvas, paint: SkPaint, { x, y, width, height }: Rect): void {
  canvas.drawRect(Skia.XYWHRect(x + 0.5, y + 0.5, width - 1, height - 1), paint);
}

export function line(canvas: SkCanvas, paint: SkPaint, x1: number, y1: number, x2: number, y2: number): void {
  canvas.drawLine(x1, y1, x2, y2, paint);
}

/** Separate lines from pairs of points in one call. */
export function lines(canvas: SkCanvas, paint: SkPaint, ends: Point[]): void {
  if (ends.length > 1) canvas.drawPoints(PointMode.Lines, ends, paint);
}

/** One broken line through points: cheaper than a path of the same points. */
export function polyline(canvas: SkCanvas, paint: SkPaint, points: Point[]): void {
  if (points.length > 1) canvas.drawPoints(PointMode.Polygon, points, paint);
}

export function dots(canvas: SkCanvas, paint: SkPaint, points: Point[]): void {
  if (points.length > 0) canvas.drawPoints(PointMode.Points, points, paint);
}

export function clipTo(canvas: SkCanvas, { x, y, width, height }: Rect): void {
  canvas.clipRect(Skia.XYWHRect(x, y, width, height), ClipOp.Intersect, false);
}

export interface TextOptions {
  font?: FontKey;
  align?: 'start' | 'middle' | 'end';
}

/** Words at a baseline. */
export function text(
  canvas: SkCanvas,
  scope: DrawScope,
  words: string,
  x: number,
  y: number,
  color: string,
  { font = 'axis', align = 'start' }: TextOptions = {},
): void {
  const made = scope.font(font);
  if (!made) return;
  const width = align === 'start' ? 0 : scope.textWidth(words, font);
  const left = align === 'middle' ? x - width / 2 : x - width;
  canvas.drawText(words, Math.round(left * 2) / 2, y, scope.fill(color), made);
}
