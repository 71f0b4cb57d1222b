import { demand } from '../errors';
import { createPair, divide, multiply } from './doubleDouble';

const TURN_HIGH = 6.283185307179586;
const TURN_LOW = 2.4492935982947064e-16;
const EIGHTH = 0.7853981633974483; // π/4
const DENOMINATOR_MOST = 1125899906842624; // 2^50: four turns' worth stays an exact integer

// Taylor coefficients; at π/4 the first one left out is below 2^-60 of the result.
const S3 = -1 / 6;
const S5 = 1 / 120;
const S7 = -1 / 5040;
const S9 = 1 / 362880;
const S11 = -1 / 39916800;
const S13 = 1 / 6227020800;
const S15 = -1 / 1307674368000;
const S17 = 1 / 355687428096000;
const C4 = 1 / 24;
const C6 = -1 / 720;
const C8 = 1 / 40320;
const C10 = -1 / 3628800;
const C12 = 1 / 479001600;
const C14 = -1 / 87178291200;
const C16 = 1 / 20922789888000;
const C18 = -1 / 6402373705728000;

const work = createPair();

/** Writes e^{j(angle + tail)} for |angle| ≤ π/4 (tail: its rounding), turned by `quarters` right angles. */
function writeReduced(angle: number, tail: number, quarters: number, out: Float64Array, at: number): void {
  const square = angle * angle;
  const sinePoly =
    S3 +
    square * (S5 + square * (S7 + square * (S9 + square * (S11 + square * (S13 + square * (S15 + square * S17))))));
  const half = 0.5 * square;
  let sine = angle + (angle * square * sinePoly + tail * (1 - half));
  const cosinePoly =
    C4 +
    square * (C6 + square * (C8 + square * (C10 + square * (C12 + square * (C14 + square * (C16 + square * C18))))));
  const rest = 1 - half;
  const cosine = rest + (1 - rest - half + (square * square * cosinePoly - angle * tail));
  // the series meet at an eighth: one value for both keeps every table symmetric
  if (angle === EIGHTH) sine = cosine;
  else if (angle === -EIGHTH) sine = -cosine;
  switch (quarters & 3) {
    case 0:
      out[at] = cosine;
      out[at + 1] = sine;
      break;
    case 1:
      out[at] = 0 - sine; // 0 − x and not −x: no negative zeros
      out[at + 1] = cosine;
      break;
    case 2:
      out[at] = 0 - cosine;
      out[at + 1] = 0 - sine;
      break;
    default:
      out[at] = sine;
      out[at + 1] = 0 - cosine;
  }
}

/**
 * e^{j2π(high + low)}: out[at] = cosine, out[at + 1] = sine, each ≤ 1 ulp from the exact value.
 * `high` + `low` is an angle in turns (|high| < 2^51), low its rounding remainder (0 when high is exact).
 * Source: Taylor series on ±π/4 after exact reduction to quarter turns.
 */
export function writeUnitOfTurns(high: number, low: number, out: Float64Array, at: number): void {
  const fraction = high - Math.floor(high + 0.5);
  const quarters = Math.floor(4 * fraction + 0.5);
  multiply(fraction - quarters / 4, low, TURN_HIGH, TURN_LOW, work);
  writeReduced(work[0]!, work[1]!, quarters, out, at);
}

/**
 * e^{j2π·numerator/denominator} of whole numbers, reduced exactly: out[at] = cosine, out[at + 1] = sine, each ≤ 1 ulp.
 * |numerator| ≤ 2^53, denominator 1…2^50, else SynthError `bad_index`.
 */
export function writeUnitOfFraction(numerator: number, denominator: number, out: Float64Array, at: number): void {
  demand(denominator >= 1 && denominator <= DENOMINATOR_MOST, 'bad_index', 'A turn is split into 1 to 2^50 parts.');
  const part = numerator % denominator;
  const quarters = Math.floor((4 * part) / denominator + 0.5);
  const rest = 4 * part - quarters * denominator;
  divide(rest, 4 * denominator, work);
  multiply(work[0]!, work[1]!, TURN_HIGH, TURN_LOW, work);
  writeReduced(work[0]!, work[1]!, quarters & 3, out, at);
}

/** { cosine, sine } of an angle of numerator/denominator turns: writeUnitOfFraction for callers outside loops. */
export function sineCosineOfFraction(numerator: number, denominator: number): { cosine: number; sine: number } {
  const unit = new Float64Array(2);
  writeUnitOfFraction(numerator, denominator, unit, 0);
  return { cosine: unit[0]!, sine: unit[1]! };
}

/** { cosine, sine } of an angle in turns (|turns| < 2^51), each ≤ 1 ulp. */
export function sineCosine(turns: number): { cosine: number; sine: number } {
  const unit = new Float64Array(2);
  writeUnitOfTurns(turns, 0, unit, 0);
  return { cosine: unit[0]!, sine: unit[1]! };
}

/**
 * The `count`-th roots of unity e^{j2πi/count}, i = 0…count−1, interleaved [cos, sin, …]: a new Float64Array of 2·count,
 * each component ≤ 1 ulp.
 */
export function createRootsOfUnity(count: number): Float64Array {
  demand(Number.isInteger(count) && count >= 1 && count <= 16777216, 'bad_size', 'Roots of unity: 1 to 2^24 of them.');
  const roots = new Float64Array(2 * count);
  const quarter = count / 4;
  if (!Number.isInteger(quarter)) {
    for (let i = 0; i < count; i++) writeUnitOfFraction(i, count, roots, 2 * i);
    return roots;
  }
  // one octant is computed, the rest is its mirror and quarter turns: the same bits, as the reduction is symmetric
  for (let i = 0; 2 * i <= quarter; i++) {
    writeUnitOfFraction(i, count, roots, 2 * i);
    roots[2 * (quarter - i)] = roots[2 * i + 1]!;
    roots[2 * (quarter - i) + 1] = roots[2 * i]!;
  }
  for (let i = quarter; i < count; i++) {
    roots[2 * i] = 0 - roots[2 * (i - quarter) + 1]!;
    roots[2 * i + 1] = roots[2 * (i - quarter)]!;
  }
  return roots;
}
