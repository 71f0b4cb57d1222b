import { exactFraction, type ExactFraction } from '../numerology';

/** The shortest decimal that reads back as `value` (finite), as an exact fraction: 0.1 is 1/10, what a person typed. Sign in the numerator. */
export function decimalFraction(value: number): ExactFraction {
  const [mantissa, exponent = '0'] = Math.abs(value).toString().toLowerCase().split('e');
  const [whole, rest = ''] = mantissa!.split('.');
  const power = Number(exponent) - rest.length;
  const digits = BigInt(whole! + rest);
  let scale = 1n;
  for (let i = Math.abs(power); i > 0; i--) scale *= 10n;
  if (digits === 0n) return { numerator: 0n, denominator: 1n };
  const { numerator, denominator } = power >= 0 ? exactFraction(digits * scale, 1n) : exactFraction(digits, scale);
  return { numerator: value < 0 ? -numerator : numerator, denominator };
}

/** a · b of fractions, reduced (sign kept in the numerator). */
export function multiplyFractions(a: ExactFraction, b: ExactFraction): ExactFraction {
  const numerator = a.numerator * b.numerator;
  const denominator = a.denominator * b.denominator;
  if (numerator === 0n) return { numerator: 0n, denominator: 1n };
  const size = exactFraction(numerator < 0n ? -numerator : numerator, denominator);
  return { numerator: numerator < 0n ? -size.numerator : size.numerator, denominator: size.denominator };
}

/** a / b; b not zero and positive. */
export function divideFractions(a: ExactFraction, b: ExactFraction): ExactFraction {
  return multiplyFractions(a, { numerator: b.denominator, denominator: b.numerator });
}

/** −1, 0, 1 as a is less than, equal to or more than b. */
export function compareFractions(a: ExactFraction, b: ExactFraction): number {
  const left = a.numerator * b.denominator;
  const right = b.numerator * a.denominator;
  return left < right ? -1 : left > right ? 1 : 0;
}

/** The whole number nearest to a fraction, halves upwards. */
export function nearestWhole({ numerator, denominator }: ExactFraction): bigint {
  const doubled = 2n * numerator + denominator;
  const by = 2n * denominator;
  const quotient = doubled / by;
  return doubled % by < 0n ? quotient - 1n : quotient;
}

/** a − b. */
export function subtractFractions(a: ExactFraction, b: ExactFraction): ExactFraction {
  const numerator = a.numerator * b.denominator - b.numerator * a.denominator;
  return multiplyFractions(
    { numerator, denominator: a.denominator * b.denominator },
    { numerator: 1n, denominator: 1n },
  );
}

/** Of whole numbers below 2^53. */
export function greatestCommonDivisor(a: number, b: number): number {
  while (b !== 0) [a, b] = [b, a % b];
  return a;
}
