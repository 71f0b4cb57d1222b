import {
  type ExactFraction,
  bitsOfInk,
  createCellCensus,
  exactFraction,
  fileSamples,
  fractionToNumber,
  prefixSum,
  sampleClock,
} from '../numerology';
import type { WaveformContent } from '../types';
import { decimalFraction, divideFractions, multiplyFractions, nearestWhole, subtractFractions } from './exact';
import { periodOf } from './period';

const REPEATS_MOST = 65536;

/**
 * A loop counts as closed within 2^−30 of a turn (the seam then stands below −160 dB): most offsets fs·turns/T have no exact decimal or
 * binary form, and the nearest one must close.
 */
const CLOSED_WITHIN_TURNS = 1 / 1073741824;

/** How the frequency offset meets the loop's wrap. */
export interface LoopClosing {
  /** False for a burst, which has no wrap. */
  applies: boolean;
  /** f0 · T/fs, and its distance to the nearest whole number of turns, −½…½. */
  turns: number;
  residualTurns: number;
  closes: boolean;
  /** The nearest offset that closes this length, and how far it moves. */
  nearestOffsetHz: number;
  nearestChangeHz: number;
  /** The least number of repeats that closes this offset (all else kept), null above 65536. */
  repeatsThatClose: number | null;
}

/** Where the offset's turns over the file are not whole, what would make them so. Offsets are taken as the decimals that were typed. */
export function loopClosing(content: WaveformContent): LoopClosing {
  const offset = decimalFraction(content.frequencyOffsetHz);
  const clock = sampleClock(content);
  const samples = fileSamples(content);
  const perSample = divideFractions(offset, clock);
  const turns = multiplyFractions(perSample, { numerator: BigInt(samples), denominator: 1n });
  const whole = nearestWhole(turns);
  const residual = fractionToNumber(subtractFractions(turns, { numerator: whole, denominator: 1n }));
  const nearest = multiplyFractions(clock, exactSigned(whole, BigInt(samples)));
  const closes = Math.abs(residual) <= CLOSED_WITHIN_TURNS;
  const nearestOffsetHz = closes ? content.frequencyOffsetHz : fractionToNumber(nearest);
  return {
    applies: content.timing.mode === 'loop',
    turns: fractionToNumber(turns),
    residualTurns: residual,
    closes,
    nearestOffsetHz,
    nearestChangeHz: nearestOffsetHz - content.frequencyOffsetHz,
    repeatsThatClose: closes ? content.timing.repeats : closingRepeats(content, perSample),
  };
}

function exactSigned(numerator: bigint, denominator: bigint) {
  if (numerator < 0n) {
    const size = exactFraction(-numerator, denominator);
    return { numerator: -size.numerator, denominator: size.denominator };
  }
  return exactFraction(numerator, denominator);
}

/**
 * The least r ≥ 1 with (one + (r − 1)·step) · numerator ≡ 0 modulo the denominator: a linear congruence, solved exactly.
 * `one` is the file's length with one repeat (its pad in), `step` what each further repeat adds.
 */
function closingRepeats(content: WaveformContent, perSample: ExactFraction): number | null {
  const { timing } = content;
  const one = BigInt(fileSamples({ ...content, timing: { ...timing, repeats: 1 } }));
  const two = BigInt(fileSamples({ ...content, timing: { ...timing, repeats: 2 } }));
  const { denominator } = perSample;
  const step = modulo((two - one) * perSample.numerator, denominator);
  const start = modulo(one * perSample.numerator, denominator);
  const { divisor, inverse } = extendedDivisor(step, denominator);
  if (start % divisor !== 0n) return null;
  const period = denominator / divisor;
  const more = modulo((-start / divisor) * inverse, period);
  return more < BigInt(REPEATS_MOST) ? Number(more) + 1 : null;
}

function modulo(value: bigint, by: bigint): bigint {
  const rest = value % by;
  return rest < 0n ? rest + by : rest;
}

/** The greatest common divisor of a and m, and the inverse of a/divisor modulo m/divisor (Euclid). */
function extendedDivisor(a: bigint, m: bigint): { divisor: bigint; inverse: bigint } {
  let [low, high] = [a, m];
  let [x, y] = [1n, 0n];
  while (low !== 0n) {
    const quotient = high / low;
    [high, low] = [low, high - quotient * low];
    [y, x] = [x, y - quotient * x];
  }
  return { divisor: high, inverse: modulo(y, m / high === 0n ? 1n : m / high) };
}

/** One place where a tone's phase jumps. */
export interface ToneJump {
  inkId: string;
  inkName: string;
  subcarrier: number;
  /** −½…½ of a turn. */
  turns: number;
  /** Between symbols (a tone that is not continuous), or at the loop's wrap. */
  at: 'symbols' | 'wrap';
}

export interface ToneJumps {
  /** Tones (ink and subcarrier) that jump somewhere. */
  count: number;
  worst: ToneJump | null;
  /** Inks that jump between symbols: what `continuous` would mend. */
  inksBetweenSymbols: string[];
}

/** a · b mod m for a, b < 2^53 whose product may not fit: through BigInt. */
function productModulo(a: number, b: number, m: number): number {
  const value = Number((BigInt(a) * BigInt(b)) % BigInt(m));
  return value < 0 ? value + m : value;
}

/**
 * Where painted tones jump: one that is not continuous jumps by k·N_cp/N turns at each border it crosses, a continuous one at the wrap of
 * a loop without gap and pad by k·T/N (T the file at the base rate). A tone that begins or ends in silence does not jump.
 */
export function toneJumps(content: WaveformContent): ToneJumps {
  const { fftSize, symbolCount, timing, prefixSamples, grid, tray } = content;
  const half = Math.floor(fftSize / 2);
  const tonesOfRow = grid.rows.map((runs) => {
    const tones = new Map<number, number>();
    let position = 0;
    for (let i = 0; i + 1 < runs.length; i += 2) {
      const ink = runs[i + 1]!;
      if (tray[ink]?.role === 'tone') for (let j = 0; j < runs[i]!; j++) tones.set(position + j, ink);
      position += runs[i]!;
    }
    return tones;
  });
  const worstOf = new Map<string, ToneJump>();
  const note = (p: number, ink: number, parts: number, at: ToneJump['at']): void => {
    if (parts === 0) return;
    const turns = parts / fftSize > 0.5 ? parts / fftSize - 1 : parts / fftSize;
    const key = `${ink}:${p}`;
    const known = worstOf.get(key);
    if (known && Math.abs(known.turns) >= Math.abs(turns)) return;
    worstOf.set(key, { inkId: `k${ink}`, inkName: tray[ink]!.name, subcarrier: p - half, turns, at });
  };
  const baseSamples = timing.repeats * (prefixSum(content) + symbolCount * fftSize);
  const wraps = timing.mode === 'loop' && timing.gapSamples === 0 && timing.padSamples === 0;
  const repeatsTouch = timing.gapSamples === 0 && (timing.repeats > 1 || wraps);
  for (let l = 0; l < symbolCount; l++) {
    const isLast = l === symbolCount - 1;
    if (isLast && !repeatsTouch) continue;
    const next = isLast ? 0 : l + 1;
    const after = tonesOfRow[grid.rowOfSymbol[next]!]!;
    const prefix = prefixSamples[next % prefixSamples.length]!;
    for (const [p, ink] of tonesOfRow[grid.rowOfSymbol[l]!]!) {
      if (after.get(p) !== ink) continue;
      const value = tray[ink]!.value as { continuous: boolean };
      const k = p - half;
      if (!value.continuous) note(p, ink, productModulo(k, -prefix, fftSize), 'symbols');
      else if (isLast && wraps) note(p, ink, productModulo(k, -baseSamples, fftSize), 'wrap');
    }
  }
  let worst: ToneJump | null = null;
  const between = new Set<string>();
  for (const jump of worstOf.values()) {
    if (jump.at === 'symbols') between.add(jump.inkId);
    if (!worst || Math.abs(jump.turns) > Math.abs(worst.turns)) worst = jump;
  }
  return { count: worstOf.size, worst, inksBetweenSymbols: [...between].sort() };
}

/** How one used stream's payload meets the end of a repeat and the wrap. */
export interface PayloadClosing {
  streamId: string;
  name: string;
  /** Bits by which the source moves on from repeat to repeat (running: those used; anchored: the address step 12·L·N). */
  bitsPerRepeat: number;
  /** Null when the source's period is not known. */
  periodBits: number | null;
  /** The sequence goes on unbroken where the file starts again; null when the period is not known. */
  closes: boolean | null;
  /** Repeats after which it would close when continued: period / gcd(bits, period); null when not known. */
  repeatsToClose: number | null;
  /** An anchored stream that restarts gives each cell fixed bits: no sequence runs, so none breaks. */
  isFixed: boolean;
}

/** Every stream that painted data cells use, and after how many repeats its sequence closes (lcm of bits per frame and period). */
export function payloadClosing(content: WaveformContent): PayloadClosing[] {
  const census = createCellCensus(content);
  const bits = bitsOfInk(content);
  return content.streams.flatMap((stream) => {
    let used = 0;
    content.tray.forEach((ink, id) => {
      if (ink.role === 'data' && ink.value.streamId === stream.streamId) used += bits[id]! * census.cellsOfInk[id]!;
    });
    if (used === 0) return [];
    const isAnchored = stream.fill === 'anchored';
    const bitsPerRepeat = isAnchored ? 12 * content.symbolCount * content.fftSize : used;
    const periodBits = periodOf(stream.source);
    const isFixed = isAnchored && stream.acrossRepeats === 'restart';
    const repeatsToClose =
      periodBits === null ? null : periodBits / greatestCommonDivisor(bitsPerRepeat % periodBits, periodBits);
    const advance = stream.acrossRepeats === 'continue' ? content.timing.repeats : 1;
    const closes = isFixed ? true : repeatsToClose === null ? null : advance % repeatsToClose === 0;
    return [
      { streamId: stream.streamId, name: stream.name, bitsPerRepeat, periodBits, closes, repeatsToClose, isFixed },
    ];
  });
}

function greatestCommonDivisor(a: number, b: number): number {
  while (b !== 0) [a, b] = [b, a % b];
  return a;
}
