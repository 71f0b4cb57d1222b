/** Figures and units: read what people type, write what they read. Value and unit stand apart everywhere. */

export const MINUS = '\u2212';
const NARROW_SPACE = '\u202f';

export interface QuantityText {
  /** "30.72", "−1 048 576" (real minus, groups of three by a narrow space from five digits up). */
  value: string;
  /** "MHz"; empty for bare numbers. */
  unit: string;
}

function groupDigits(digits: string): string {
  if (digits.length < 5) return digits;
  return digits.replace(/\B(?=(\d{3})+$)/g, NARROW_SPACE);
}

/** A number with at most `decimals` places (zeros at the end cut unless `keepZeros`), real minus, grouped digits. */
export function formatNumber(value: number, decimals = 0, keepZeros = false): string {
  if (!Number.isFinite(value)) return value > 0 ? '∞' : value < 0 ? `${MINUS}∞` : '–';
  const fixed = Math.abs(value).toFixed(decimals);
  const [whole = '0', part = ''] = fixed.split('.');
  const kept = keepZeros ? part : part.replace(/0+$/, '');
  const text = kept ? `${groupDigits(whole)}.${kept}` : groupDigits(whole);
  const isZero = /^[0.]*$/.test(whole + part);
  return value < 0 && !isZero ? `${MINUS}${text}` : text;
}

/** A whole number, signed, for subcarriers and counts. */
export function formatInteger(value: number): string {
  return formatNumber(Math.round(value));
}

const SCALES: readonly (readonly [number, string])[] = [
  [1e12, 'T'],
  [1e9, 'G'],
  [1e6, 'M'],
  [1e3, 'k'],
  [1, ''],
  [1e-3, 'm'],
  [1e-6, 'µ'],
  [1e-9, 'n'],
];

/** Units that take no prefix. */
const FIXED_UNITS = new Set(['dB', 'dBm', 'dBFS', 'dBc', '%', '°', 'bit', 'bits', 'samples', 'cells', 'symbols', '']);

/**
 * A quantity in its tidy form, value and unit apart: (30.72e6, 'Hz') → "30.72" "MHz"; (0.001, 's') → "1" "ms".
 * `digits` significant digits where the unit is scaled, as many decimals otherwise.
 */
export function formatQuantity(value: number, unit: string, digits?: number): QuantityText {
  if (FIXED_UNITS.has(unit) || !Number.isFinite(value))
    return { value: formatNumber(value, digits ?? (Number.isInteger(value) ? 0 : 2)), unit };
  const significant = digits ?? 6;
  const size = Math.abs(Number(value.toPrecision(significant)));
  const [factor, prefix] =
    size === 0 ? [1, ''] : (SCALES.find(([scale]) => size >= scale) ?? SCALES[SCALES.length - 1]!);
  const scaled = value / factor;
  const wholeDigits = Math.max(1, Math.floor(Math.log10(Math.max(Math.abs(scaled), 1))) + 1);
  return { value: formatNumber(scaled, Math.max(0, significant - wholeDigits)), unit: prefix + unit };
}

/** The same as one text, value and unit joined by a space that does not break. */
export function quantityText(value: number, unit: string, digits?: number): string {
  const text = formatQuantity(value, unit, digits);
  return text.unit ? `${text.value}\u00a0${text.unit}` : text.value;
}

export type Parsed<T> = { ok: true; value: T } | { ok: false; message: string };

/** Exact prefixes: m is milli, M is mega; u stands for µ. */
const PREFIXES: Record<string, number> = {
  T: 12,
  G: 9,
  M: 6,
  k: 3,
  K: 3,
  '': 0,
  m: -3,
  µ: -6,
  μ: -6,
  u: -6,
  n: -9,
};

interface Decimal {
  negative: boolean;
  digits: bigint;
  /** value = digits · 10^exponent */
  exponent: number;
}

const NOT_A_NUMBER = 'This is not a number.';

function cleaned(text: string): string {
  return text
    .replace(/[\u2212\u2013]/g, '-')
    .replace(/[\s\u00a0\u202f\u2009_]/g, '')
    .trim();
}

/** "30,72M" → 3072 · 10^4, exactly; the unit (any letter case, the prefix before it) may stand behind or not. */
function parseDecimal(text: string, unit: string): Parsed<Decimal> {
  let body = cleaned(text);
  if (unit && body.toLowerCase().endsWith(unit.toLowerCase())) body = body.slice(0, -unit.length);
  const match = /^([+-]?)(\d*)(?:[.,](\d*))?(?:e([+-]?\d{1,3}))?([TGMkKmµμun]?)$/.exec(body);
  if (!match || (match[2] === '' && !match[3])) return { ok: false, message: NOT_A_NUMBER };
  const [, sign, whole = '', part = '', power = '0', prefix = ''] = match;
  return {
    ok: true,
    value: {
      negative: sign === '-',
      digits: BigInt(`${whole}${part}` || '0'),
      exponent: Number(power) + PREFIXES[prefix]! - part.length,
    },
  };
}

function toNumber({ negative, digits, exponent }: Decimal): number {
  const value = Number(`${digits}e${exponent}`);
  return negative && value !== 0 ? -value : value;
}

/** "15k", "30.72M", "2e6", "0,3M", "15 kHz", "−3" → a number in the unit given. */
export function parseQuantity(text: string, unit = ''): Parsed<number> {
  const decimal = parseDecimal(text, unit);
  return decimal.ok ? { ok: true, value: toNumber(decimal.value) } : decimal;
}

/** A whole number: prefixes are taken ("30k"), a rest is refused. */
export function parseInteger(text: string): Parsed<number> {
  const parsed = parseQuantity(text);
  if (parsed.ok && !Number.isInteger(parsed.value)) return { ok: false, message: 'This takes whole numbers.' };
  return parsed;
}

function gcd(a: bigint, b: bigint): bigint {
  while (b) [a, b] = [b, a % b];
  return a;
}

function reduced(numerator: bigint, denominator: bigint): Parsed<[number, number]> {
  if (numerator <= 0n || denominator <= 0n) return { ok: false, message: 'This must be above zero.' };
  const divisor = gcd(numerator, denominator);
  const pair: [number, number] = [Number(numerator / divisor), Number(denominator / divisor)];
  if (pair.some((part) => !Number.isSafeInteger(part)))
    return { ok: false, message: 'This has too many digits to be kept exactly.' };
  return { ok: true, value: pair };
}

function ratioOf({ digits, exponent }: Decimal): [bigint, bigint] {
  return exponent >= 0 ? [digits * 10n ** BigInt(exponent), 1n] : [digits, 10n ** BigInt(-exponent)];
}

/** An exact positive fraction: "15k" → [15000, 1], "31250/7" → [31250, 7], "312.5" → [625, 2]; Hz may stand behind. */
export function parseFraction(text: string, unit = 'Hz'): Parsed<[number, number]> {
  const parts = text.split('/');
  if (parts.length > 2) return { ok: false, message: NOT_A_NUMBER };
  let body = cleaned(text);
  if (parts.length === 2 && body.toLowerCase().endsWith(unit.toLowerCase())) body = body.slice(0, -unit.length);
  const [over, under] = parts.length === 2 ? body.split('/') : [text, '1'];
  const top = parseDecimal(over ?? '', unit);
  const bottom = parseDecimal(under ?? '', parts.length === 2 ? '' : unit);
  if (!top.ok) return top;
  if (!bottom.ok) return bottom;
  if (top.value.negative || bottom.value.negative) return { ok: false, message: 'This must be above zero.' };
  const [a, b] = ratioOf(top.value);
  const [c, d] = ratioOf(bottom.value);
  return reduced(a * d, b * c);
}

/** A fraction in its tidy form: "15" "kHz" where it is a round number, else the exact "31250/7" "Hz". */
export function formatFraction([numerator, denominator]: readonly [number, number], unit = 'Hz'): QuantityText {
  if (denominator === 1) return formatQuantity(numerator, unit, 15);
  const value = numerator / denominator;
  // A decimal with few digits reads better than a fraction with 2s and 5s below.
  if (/^(2|5)*$/.test(primeWord(denominator)) && value.toString().length <= 12) return formatQuantity(value, unit, 12);
  return { value: `${groupDigits(String(numerator))}/${groupDigits(String(denominator))}`, unit };
}

/** The prime factors 2 and 5 of a number as digits, with a 9 where another one is left. */
function primeWord(n: number): string {
  let word = '';
  for (const prime of [2, 5]) {
    while (n % prime === 0) {
      word += prime;
      n /= prime;
    }
  }
  return n === 1 ? word : `${word}9`;
}
