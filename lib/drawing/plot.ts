/** Helpers that turn traces into what a plot draws; pixels from the plot area's upper left. */

export interface PlotScale {
  from: number;
  to: number;
  heightPx: number;
}

/** Height of a value: `to` at the top edge, `from` at the lower, cut to the area. */
export function plotY(value: number, { from, to, heightPx }: PlotScale): number {
  const ratio = (value - from) / (to - from);
  return heightPx * (1 - Math.min(Math.max(ratio, 0), 1));
}

/**
 * The polygon of a min/max trace, interleaved x, y: along the maxima to the right and back along the minima. One px a
 * column; a trace of n columns is drawn over n · columnPx.
 */
export function minMaxPolygon(min: Float32Array, max: Float32Array, columnPx: number, scale: PlotScale): Float32Array {
  const columns = max.length;
  const points = new Float32Array(columns * 4);
  for (let c = 0; c < columns; c++) {
    const xPx = (c + 0.5) * columnPx;
    points[2 * c] = xPx;
    points[2 * c + 1] = plotY(max[c]!, scale);
    const back = 2 * (2 * columns - 1 - c);
    points[back] = xPx;
    points[back + 1] = plotY(min[c]!, scale);
  }
  return points;
}

/** The outline of a min/max trace as one polyline that visits each column's least and highest value: no peak is skipped. */
export function minMaxLine(min: Float32Array, max: Float32Array, columnPx: number, scale: PlotScale): Float32Array {
  const points = new Float32Array(max.length * 4);
  for (let c = 0; c < max.length; c++) {
    const xPx = (c + 0.5) * columnPx;
    const isRising = c % 2 === 0;
    points[4 * c] = xPx;
    points[4 * c + 1] = plotY(isRising ? min[c]! : max[c]!, scale);
    points[4 * c + 2] = xPx;
    points[4 * c + 3] = plotY(isRising ? max[c]! : min[c]!, scale);
  }
  return points;
}

/** A round upper end for a scale that starts at zero: 1, 1.5, 2, 2.5, 3, 4, 5, 6, 8 times a power of ten. */
export function niceCeiling(value: number): number {
  if (!(value > 0)) return 1;
  const power = 10 ** Math.floor(Math.log10(value));
  const step = [1, 1.5, 2, 2.5, 3, 4, 5, 6, 8, 10].find((candidate) => candidate * power >= value * (1 - 1e-12));
  return (step ?? 10) * power;
}
