import { createPair, multiply, twoProduct } from './doubleDouble';

const LN2_HIGH = 0.6931471803691238; // 32 bits, so that k · LN2_HIGH is exact
const LN2_LOW = 1.9082149292705877e-10;
const LOG2_E = 1.4426950408889634;
const LN10_TWENTIETH_HIGH = 0.11512925464970228;
const LN10_TWENTIETH_LOW = 5.7995642524661006e-18;
const INVERSE_LN10_HIGH = 0.4342944819032518;
const INVERSE_LN10_LOW = 1.098319650216765e-17;
const LARGEST = 709.782712893384;
const SMALLEST = -745.1332191019412;

const EXPONENT_BITS = new DataView(new ArrayBuffer(8));
const work = createPair();

/** 2^k exactly for −1022 ≤ k ≤ 1023. */
function powerOfTwo(k: number): number {
  EXPONENT_BITS.setUint32(0, (k + 1023) << 20);
  EXPONENT_BITS.setUint32(4, 0);
  return EXPONENT_BITS.getFloat64(0);
}

/** value · 2^k with one rounding at most (two steps, so that subnormal results are reached). */
function scaleByPowerOfTwo(value: number, k: number): number {
  if (k > 1023) return value * powerOfTwo(1023) * powerOfTwo(k - 1023);
  if (k < -1022) return value * powerOfTwo(-1022 + 60) * powerOfTwo(k + 1022 - 60);
  return value * powerOfTwo(k);
}

/** e^{high + low}. */
function exponentialOfPair(high: number, low: number): number {
  if (Number.isNaN(high)) return NaN;
  if (high > LARGEST) return Infinity;
  if (high < SMALLEST) return 0;
  const k = Math.floor(high * LOG2_E + 0.5);
  const first = high - k * LN2_HIGH;
  const correction = low - k * LN2_LOW;
  const r = first + correction;
  const tail = first - r + correction;
  // Taylor to r^13/13!: at |r| ≤ 0.347 the next term is below 2^-57
  const poly =
    1 / 2 +
    r *
      (1 / 6 +
        r *
          (1 / 24 +
            r *
              (1 / 120 +
                r *
                  (1 / 720 +
                    r *
                      (1 / 5040 +
                        r *
                          (1 / 40320 +
                            r *
                              (1 / 362880 +
                                r * (1 / 3628800 + r * (1 / 39916800 + r * (1 / 479001600 + r / 6227020800))))))))));
  const small = r * r * poly + tail * (1 + r);
  const sum = 1 + r;
  return scaleByPowerOfTwo(sum + (1 - sum + r + small), k);
}

/** e^x, ≤ 1 ulp; Infinity above 709.78, 0 below −745.13. Source: Taylor series after exact reduction by ln 2. */
export function exponential(x: number): number {
  return exponentialOfPair(x, 0);
}

/** The amplitude factor 10^(db/20), ≤ 1 ulp; `db` finite. */
export function amplitudeOfDecibels(db: number): number {
  multiply(db, 0, LN10_TWENTIETH_HIGH, LN10_TWENTIETH_LOW, work);
  return exponentialOfPair(work[0]!, work[1]!);
}

/** The power factor 10^(db/10), ≤ 1 ulp; `db` finite. */
export function powerOfDecibels(db: number): number {
  multiply(2 * db, 0, LN10_TWENTIETH_HIGH, LN10_TWENTIETH_LOW, work);
  return exponentialOfPair(work[0]!, work[1]!);
}

/** Natural logarithm of a finite x > 0 as work[0] + work[1], to about 2^-58. */
function logarithmToWork(x: number): void {
  EXPONENT_BITS.setFloat64(0, x);
  let k = 0;
  if (x < 2.2250738585072014e-308) {
    EXPONENT_BITS.setFloat64(0, x * 18014398509481984); // 2^54
    k = -54;
  }
  const head = EXPONENT_BITS.getUint32(0);
  k += (head >>> 20) - 1023;
  EXPONENT_BITS.setUint32(0, (head & 0x000fffff) | 0x3ff00000);
  let mantissa = EXPONENT_BITS.getFloat64(0);
  if (mantissa > 1.4142135623730951) {
    mantissa *= 0.5;
    k += 1;
  }
  // ln(1 + f) = f − f²/2 + s (f²/2 + R), s = f/(2 + f), R = s² (2/3 + 2/5 s² + …)
  const f = mantissa - 1;
  const s = f / (2 + f);
  const z = s * s;
  const series =
    z *
    (2 / 3 +
      z *
        (2 / 5 +
          z *
            (2 / 7 +
              z * (2 / 9 + z * (2 / 11 + z * (2 / 13 + z * (2 / 15 + z * (2 / 17 + z * (2 / 19 + (z * 2) / 21)))))))));
  twoProduct(f, 0.5 * f, work);
  const halfSquare = work[0]!;
  const halfSquareLow = work[1]!;
  const rest = s * (halfSquare + series) + k * LN2_LOW - halfSquareLow;
  const base = k * LN2_HIGH;
  const one = base + f;
  const oneLow = base === 0 ? 0 : base - one + f;
  const two = one - halfSquare;
  const twoBack = one - two;
  const twoLow = twoBack - halfSquare + (one - (two + twoBack));
  const low = oneLow + twoLow + rest;
  const sum = two + low;
  work[1] = low - (sum - two);
  work[0] = sum;
}

/** Natural logarithm, ≤ 1 ulp; −Infinity at 0, NaN below. Source: area tangent series after exact reduction by 2. */
export function logarithm(x: number): number {
  if (Number.isNaN(x) || x < 0) return NaN;
  if (x === 0) return -Infinity;
  if (x === Infinity) return Infinity;
  logarithmToWork(x);
  return work[0]!;
}

/** Decimal logarithm, ≤ 1 ulp; −Infinity at 0, NaN below. */
export function log10(x: number): number {
  if (Number.isNaN(x) || x < 0) return NaN;
  if (x === 0) return -Infinity;
  if (x === Infinity) return Infinity;
  logarithmToWork(x);
  multiply(work[0]!, work[1]!, INVERSE_LN10_HIGH, INVERSE_LN10_LOW, work);
  return work[0]!;
}
