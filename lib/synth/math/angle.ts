import { writeUnitOfTurns } from './turns';

const TWO_PI = 6.283185307179586;
const unit = new Float64Array(2);

/**
 * The angle of re + j·im in turns, −½…½, to a few units in the last place; 0 for 0.
 * Source: a coarse arctangent on one octant, then one step by the exact sine and cosine and the series of arctan for what is left.
 */
export function turnsOf(re: number, im: number): number {
  const absRe = Math.abs(re);
  const absIm = Math.abs(im);
  const high = Math.max(absRe, absIm);
  if (high === 0) return 0;
  const t = Math.min(absRe, absIm) / high;
  let coarse = (t * (0.7853981633974483 + 0.273 * (1 - t))) / TWO_PI;
  if (absIm > absRe) coarse = 0.25 - coarse;
  if (re < 0) coarse = 0.5 - coarse;
  if (im < 0) coarse = -coarse;
  writeUnitOfTurns(coarse, 0, unit, 0);
  const cosine = unit[0]!;
  const sine = unit[1]!;
  const rest = (im * cosine - re * sine) / (re * cosine + im * sine);
  const square = rest * rest;
  return coarse + (rest * (1 - square * (1 / 3 - square / 5))) / TWO_PI;
}
