const MINUS = 0x2d;
const PLUS = 0x2b;
const DOT = 0x2e;
const ZERO = 0x30;
const LOWER_E = 0x65;
const DIGITS = 8;
/** 10^0…10^22 are exact; the others are near enough, since nine digits tell single precision numbers apart with room. */
const TENS = Array.from({ length: 80 }, (_, i) => Number(`1e${i}`));

/**
 * Writes a single precision number as 15 characters, always: "+1.23456789e-01". Nine significant digits come back as the
 * same number (IEEE 754-2019, 5.12.2), and equal lengths let a reader go to any sample. −0 keeps its sign.
 * The language fixes every digit (ECMA-262, Number.prototype.toExponential).
 */
export function writeCsvNumber(value: number, bytes: Uint8Array, at: number): void {
  const isMinus = value < 0 || Object.is(value, -0);
  const text = Math.abs(value).toExponential(DIGITS);
  bytes[at] = isMinus ? MINUS : PLUS;
  for (let i = 0; i <= DIGITS + 2; i++) bytes[at + 1 + i] = text.charCodeAt(i);
  bytes[at + 12] = text.charCodeAt(11);
  const exponent = text.length === 13 ? text.charCodeAt(12) - ZERO : Number(text.slice(12));
  bytes[at + 13] = ZERO + Math.floor(exponent / 10);
  bytes[at + 14] = ZERO + (exponent % 10);
}

/** The single precision number that stands at bytes[at…at+14], NaN where the characters are not as writeCsvNumber leaves them. */
export function readCsvNumber(bytes: Uint8Array, at: number): number {
  const sign = bytes[at];
  if ((sign !== MINUS && sign !== PLUS) || bytes[at + 2] !== DOT || bytes[at + 11] !== LOWER_E) return NaN;
  let mantissa = bytes[at + 1]! - ZERO;
  let isDigits = mantissa >= 0 && mantissa <= 9;
  for (let i = 3; i <= DIGITS + 2; i++) {
    const digit = bytes[at + i]! - ZERO;
    isDigits &&= digit >= 0 && digit <= 9;
    mantissa = 10 * mantissa + digit;
  }
  const high = bytes[at + 13]! - ZERO;
  const low = bytes[at + 14]! - ZERO;
  const exponentSign = bytes[at + 12];
  isDigits &&= high >= 0 && high <= 9 && low >= 0 && low <= 9;
  if (!isDigits || (exponentSign !== MINUS && exponentSign !== PLUS)) return NaN;
  const exponent = (exponentSign === MINUS ? -1 : 1) * (10 * high + low) - DIGITS;
  // two steps below the smallest exact power keep single precision's own smallest numbers in range
  const size = exponent >= 0 ? mantissa * TENS[Math.min(exponent, 79)]! : mantissa / TENS[Math.min(-exponent, 79)]!;
  return Math.fround(sign === MINUS ? -size : size);
}
