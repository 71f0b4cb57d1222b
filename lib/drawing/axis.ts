import { ticks, tickStep } from 'd3-array';
import { scaleLinear } from 'd3-scale';
import { formatNumber } from './quantities';

export interface AxisTick {
  /** In the axis' own unit. */
  value: number;
  /** Along the axis from its start. */
  atPx: number;
  /** Empty for small ticks between named ones. */
  label: string;
  /** DC, drawn bold. */
  isZero: boolean;
}

/** How an axis lies: the values at its two ends and its length. */
export interface AxisSpan {
  from: number;
  to: number;
  lengthPx: number;
}

/** A straight scale from values to pixels and back. */
export function linearScale({ from, to, lengthPx }: AxisSpan): {
  toPx: (value: number) => number;
  toValue: (px: number) => number;
} {
  const scale = scaleLinear().domain([from, to]).range([0, lengthPx]);
  return { toPx: (value) => scale(value), toValue: (px) => scale.invert(px) };
}

/** About one named tick each `labelPx`, decimals as the step asks for. */
export function linearTicks(span: AxisSpan, labelPx = 72): AxisTick[] {
  const count = Math.max(1, Math.floor(span.lengthPx / labelPx));
  const step = Math.abs(tickStep(span.from, span.to, count));
  const decimals = step > 0 ? Math.max(0, -Math.floor(Math.log10(step) + 1e-9)) : 0;
  const { toPx } = linearScale(span);
  return ticks(span.from, span.to, count).map((value) => ({
    value,
    atPx: toPx(value),
    label: formatNumber(value, decimals, true),
    isZero: value === 0,
  }));
}

/**
 * Subcarrier ticks over positions (broken, p = k + ⌊N/2⌋) from…to: each tick stands at the middle of its cell; DC is
 * named "DC". Whole subcarriers alone.
 */
export function subcarrierTicks(span: AxisSpan, fftSize: number, labelPx = 64): AxisTick[] {
  const zero = Math.floor(fftSize / 2);
  const { toPx } = linearScale(span);
  const from = span.from - zero - 0.5;
  const to = span.to - zero - 0.5;
  const count = Math.max(1, Math.floor(span.lengthPx / labelPx));
  const named = Math.max(1, tickStep(from, to, count));
  const small = Math.max(1, named / 5);
  const result: AxisTick[] = [];
  for (let n = Math.ceil(from / small); n * small <= to; n++) {
    const k = Math.round(n * small);
    if (k < -zero || k >= fftSize - zero) continue;
    const isNamed = Math.abs(k / named - Math.round(k / named)) < 1e-9;
    const label = !isNamed ? '' : k === 0 ? 'DC' : formatNumber(k);
    if (result[result.length - 1]?.value === k) continue;
    result.push({ value: k, atPx: toPx(k + zero + 0.5), label, isZero: k === 0 });
  }
  return result;
}

/** Frequency ticks in MHz from the carrier over the same positions; subcarrier k stands at k · spacing. */
export function megahertzTicks(span: AxisSpan, fftSize: number, spacingHz: number, labelPx = 72): AxisTick[] {
  const zero = Math.floor(fftSize / 2) + 0.5;
  const toMhz = (position: number) => ((position - zero) * spacingHz) / 1e6;
  return linearTicks({ from: toMhz(span.from), to: toMhz(span.to), lengthPx: span.lengthPx }, labelPx);
}

/** Symbol numbers along the other axis: each at the middle of its row, thinned to at least `labelPx`. */
export function symbolTicks(span: AxisSpan, symbolCount: number, labelPx = 18): AxisTick[] {
  const { toPx } = linearScale(span);
  const perSymbol = span.lengthPx / (span.to - span.from);
  const step = perSymbol >= labelPx ? 1 : Math.max(1, tickStep(span.from, span.to, span.lengthPx / labelPx));
  const every = Math.max(1, Math.round(step));
  const result: AxisTick[] = [];
  const first = Math.ceil(Math.max(0, span.from - 0.5) / every) * every;
  for (let symbol = first; symbol < Math.min(symbolCount, span.to); symbol += every)
    result.push({ value: symbol, atPx: toPx(symbol + 0.5), label: formatNumber(symbol), isZero: symbol === 0 });
  return result;
}

/** Powers of ten for probabilities: "1", "10⁻¹" … as base and exponent text. */
export function decadeTicks(fromExponent: number, toExponent: number, lengthPx: number): AxisTick[] {
  const { toPx } = linearScale({ from: toExponent, to: fromExponent, lengthPx });
  const result: AxisTick[] = [];
  for (let exponent = toExponent; exponent >= fromExponent; exponent--)
    result.push({ value: 10 ** exponent, atPx: toPx(exponent), label: decadeLabel(exponent), isZero: exponent === 0 });
  return result;
}

const SUPERSCRIPTS = '⁰¹²³⁴⁵⁶⁷⁸⁹';

function decadeLabel(exponent: number): string {
  if (exponent === 0) return '1';
  const digits = [...String(Math.abs(exponent))].map((digit) => SUPERSCRIPTS[Number(digit)]).join('');
  return `10${exponent < 0 ? '⁻' : ''}${digits}`;
}
