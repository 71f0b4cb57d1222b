/**
 * Error-free products and quotients of doubles: the exact result as the unevaluated sum high + low.
 * Results go to a caller's two-element buffer, so that nothing is allocated in loops.
 * Source: Dekker, A floating-point technique for extending the available precision, 1971; Knuth, TAOCP vol. 2, 4.2.2.
 */
export type Pair = Float64Array;

const SPLITTER = 134217729; // 2^27 + 1

/** A buffer for one double-double: [high, low]. */
export function createPair(): Pair {
  return new Float64Array(2);
}

/** out = a · b exactly, for |a|, |b| < 2^996 and a product that is not subnormal. */
export function twoProduct(a: number, b: number, out: Pair): void {
  const product = a * b;
  const aScaled = SPLITTER * a;
  const aHigh = aScaled - (aScaled - a);
  const aLow = a - aHigh;
  const bScaled = SPLITTER * b;
  const bHigh = bScaled - (bScaled - b);
  const bLow = b - bHigh;
  out[1] = aLow * bLow - (product - aHigh * bHigh - aLow * bHigh - aHigh * bLow);
  out[0] = product;
}

/** out = numerator / denominator to about 2^-104 relative; both finite, denominator not 0, quotient not subnormal. */
export function divide(numerator: number, denominator: number, out: Pair): void {
  const high = numerator / denominator;
  twoProduct(high, denominator, out);
  const low = (numerator - out[0]! - out[1]!) / denominator;
  const sum = high + low;
  out[1] = low - (sum - high);
  out[0] = sum;
}

/** out = (xHigh + xLow) · (yHigh + yLow) to about 2^-102 relative. */
export function multiply(xHigh: number, xLow: number, yHigh: number, yLow: number, out: Pair): void {
  twoProduct(xHigh, yHigh, out);
  const high = out[0]!;
  const low = out[1]! + (xHigh * yLow + xLow * yHigh);
  const sum = high + low;
  out[1] = low - (sum - high);
  out[0] = sum;
}
