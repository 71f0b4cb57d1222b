import type { RemedyPrice } from './types';

/** How figures are spelled in findings and cautions: minus U+2212, groups of three by a narrow no-break space from five digits up. */

const MINUS = '\u2212';
const NARROW_SPACE = '\u202f';

function group(digits: string): string {
  if (digits.length < 5) return digits;
  let out = '';
  for (let i = 0; i < digits.length; i++) {
    if (i > 0 && (digits.length - i) % 3 === 0) out += NARROW_SPACE;
    out += digits[i]!;
  }
  return out;
}

/** A number with `decimals` places. A value that rounds to zero has no sign. */
export function spell(value: number, decimals = 0): string {
  const text = Math.abs(value).toFixed(decimals);
  const [whole, rest] = text.split('.');
  const sign = value < 0 && Number(text) !== 0 ? MINUS : '';
  return sign + group(whole!) + (rest === undefined ? '' : `.${rest}`);
}

/** A level with its sign always shown where it is above zero: "+7.7". */
export function spellSigned(value: number, decimals: number): string {
  const text = spell(value, decimals);
  return value > 0 && !/^[0.]+$/.test(text) ? `+${text}` : text;
}

/** "1 sample", "2 samples". */
export function counted(count: number, one: string, many = `${one}s`): string {
  return `${spell(count)} ${count === 1 ? one : many}`;
}

/** A frequency in Hz, kHz, MHz or GHz, with as many places as it takes, at most `places`. */
export function spellHz(hz: number, places = 9): string {
  const size = Math.abs(hz);
  const [scale, unit] =
    size >= 1e9 ? [1e9, 'GHz'] : size >= 1e6 ? [1e6, 'MHz'] : size >= 1e3 ? [1e3, 'kHz'] : [1, 'Hz'];
  const text = Math.abs(hz / scale)
    .toFixed(places)
    .replace(/\.?0+$/, '');
  const [whole, rest] = text.split('.');
  return `${hz < 0 ? MINUS : ''}${group(whole!)}${rest ? `.${rest}` : ''} ${unit}`;
}

/** A time in s, ms, µs or ns with three significant places or so. */
export function spellSeconds(seconds: number): string {
  const size = Math.abs(seconds);
  const [scale, unit] = size >= 1 ? [1, 's'] : size >= 1e-3 ? [1e3, 'ms'] : size >= 1e-6 ? [1e6, 'µs'] : [1e9, 'ns'];
  const value = seconds * scale;
  return `${spell(value, Math.abs(value) >= 100 ? 0 : Math.abs(value) >= 10 ? 1 : 2)} ${unit}`;
}

/** Parts per million with as many places as its size deserves; a change too small for them is still said. */
export function spellPpm(ppm: number): string {
  const size = Math.abs(ppm);
  if (size === 0) return '0 ppm';
  if (size < 0.0001) return 'less than 0.0001 ppm';
  const text = spell(ppm, size >= 1000 ? 0 : size >= 100 ? 1 : size >= 1 ? 2 : 4);
  return `${ppm > 0 ? '+' : ''}${text} ppm`;
}

/** "2048 samples more, 0 ppm". */
export function priceWords({ samples, ppm }: RemedyPrice): string {
  const count =
    samples === 0 ? 'No sample more' : `${counted(Math.abs(samples), 'sample')} ${samples > 0 ? 'more' : 'fewer'}`;
  return `${count}, ${spellPpm(ppm)}`;
}
