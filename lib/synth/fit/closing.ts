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
import type { PayloadSource, ToneValue, WaveformContent } from '../types';
import {
  decimalFraction,
  divideFractions,
  greatestCommonDivisor,
  multiplyFractions,
  nearestWhole,
  subtractFractions,
} from './exact';
import { PAD_MOST, REPEATS_MOST } from './limits';
import { periodOf } from './period';

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
  /** Every so many more repeats it closes again; null where no number of repeats up to 65536 does. */
  repeatsPeriod: number | null;
  /** Output samples of pad that close it, the least, and after how many more it closes again; null beyond the document's range. */
  padThatCloses: { more: number; period: number } | null;
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
  const repeats = closingRepeats(content, perSample);
  return {
    applies: content.timing.mode === 'loop',
    turns: fractionToNumber(turns),
    residualTurns: residual,
    closes,
    nearestOffsetHz,
    nearestChangeHz: nearestOffsetHz - content.frequencyOffsetHz,
    repeatsThatClose: closes ? content.timing.repeats : (repeats?.least ?? null),
    repeatsPeriod: repeats?.period ?? null,
    padThatCloses: closingPad(samples, perSample),
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
function closingRepeats(content: WaveformContent, perSample: ExactFraction): { least: number; period: number } | null {
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
  return more < BigInt(REPEATS_MOST) ? { least: Number(more) + 1, period: Number(period) } : null;
}

/** (samples + p) · numerator ≡ 0 modulo the denominator, the two without a common factor: p ≡ −samples. */
function closingPad(samples: number, { denominator }: ExactFraction): LoopClosing['padThatCloses'] {
  const more = modulo(-BigInt(samples), denominator);
  return more <= BigInt(PAD_MOST) && denominator <= BigInt(Number.MAX_SAFE_INTEGER)
    ? { more: Number(more), period: Number(denominator) }
    : null;
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
  /** The jumps at borders between symbols, one for each tone at its worst, and those at the wrap alone. */
  betweenSymbols: ToneJump[];
  atWrap: ToneJump[];
  /** Inks that jump between symbols: what `continuous` would mend. */
  inksBetweenSymbols: string[];
}

/** Where tones of one grid meet borders, whatever its timing: what toneJumps needs of the cells. */
export interface ToneBorders {
  /** Tones that are not continuous, and their worst jump at a border inside the frame, in parts of a turn of N. */
  inside: { ink: number; position: number; parts: number }[];
  /** Tones in both the last and the first symbol. */
  lastToFirst: { ink: number; position: number }[];
}

/** a · b mod m for a, b < 2^53 whose product may not fit: through BigInt. */
function productModulo(a: number, b: number, m: number): number {
  const value = Number((BigInt(a) * BigInt(b)) % BigInt(m));
  return value < 0 ? value + m : value;
}

/** Parts of N as −½…½ of a turn. */
function turnsOf(parts: number, fftSize: number): number {
  return parts / fftSize > 0.5 ? parts / fftSize - 1 : parts / fftSize;
}

/** Walks the grid once; O(symbols · tones + runs). */
export function toneBorders(content: WaveformContent): ToneBorders {
  const { fftSize, symbolCount, prefixSamples, grid, tray } = content;
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
  const inside = new Map<string, { ink: number; position: number; parts: number }>();
  const lastToFirst: ToneBorders['lastToFirst'] = [];
  for (let l = 0; l < symbolCount; l++) {
    const isLast = l === symbolCount - 1;
    const next = isLast ? 0 : l + 1;
    const after = tonesOfRow[grid.rowOfSymbol[next]!]!;
    const prefix = prefixSamples[next % prefixSamples.length]!;
    for (const [position, ink] of tonesOfRow[grid.rowOfSymbol[l]!]!) {
      if (after.get(position) !== ink) continue;
      if (isLast) lastToFirst.push({ ink, position });
      else if (!(tray[ink]!.value as ToneValue).continuous) {
        const parts = productModulo(position - half, -prefix, fftSize);
        const key = `${ink}:${position}`;
        const known = inside.get(key);
        if (!known || Math.abs(turnsOf(parts, fftSize)) > Math.abs(turnsOf(known.parts, fftSize)))
          inside.set(key, { ink, position, parts });
      }
    }
  }
  return { inside: [...inside.values()], lastToFirst };
}

/**
 * Where painted tones jump: one that is not continuous jumps by k·N_cp/N turns at each border it crosses, a continuous one at the wrap of
 * a loop without gap and pad by k·T/N (T the file at the base rate). A tone that begins or ends in silence does not jump. `borders` is
 * what toneBorders reads out of the content's grid, kept by the caller.
 */
export function toneJumps(content: WaveformContent, borders: ToneBorders = toneBorders(content)): ToneJumps {
  const { fftSize, symbolCount, timing, prefixSamples, tray } = content;
  const half = Math.floor(fftSize / 2);
  const between = new Map<string, ToneJump>();
  const atWrap: ToneJump[] = [];
  const jumpOf = (ink: number, position: number, parts: number, at: ToneJump['at']): ToneJump => ({
    inkId: `k${ink}`,
    inkName: tray[ink]!.name,
    subcarrier: position - half,
    turns: turnsOf(parts, fftSize),
    at,
  });
  const noteBetween = (ink: number, position: number, parts: number): void => {
    if (parts === 0) return;
    const jump = jumpOf(ink, position, parts, 'symbols');
    const known = between.get(`${ink}:${position}`);
    if (!known || Math.abs(jump.turns) > Math.abs(known.turns)) between.set(`${ink}:${position}`, jump);
  };
  const baseSamples = timing.repeats * (prefixSum(content) + symbolCount * fftSize);
  const wraps = timing.mode === 'loop' && timing.gapSamples === 0 && timing.padSamples === 0;
  const repeatsTouch = timing.gapSamples === 0 && (timing.repeats > 1 || wraps);
  for (const { ink, position, parts } of borders.inside) noteBetween(ink, position, parts);
  if (repeatsTouch) {
    for (const { ink, position } of borders.lastToFirst) {
      const k = position - half;
      if (!(tray[ink]!.value as ToneValue).continuous) {
        noteBetween(ink, position, productModulo(k, -prefixSamples[0]!, fftSize));
      } else if (wraps) {
        const parts = productModulo(k, -baseSamples, fftSize);
        if (parts !== 0) atWrap.push(jumpOf(ink, position, parts, 'wrap'));
      }
    }
  }
  const betweenSymbols = [...between.values()];
  let worst: ToneJump | null = null;
  for (const jump of [...betweenSymbols, ...atWrap]) {
    if (!worst || Math.abs(jump.turns) > Math.abs(worst.turns)) worst = jump;
  }
  return {
    count: betweenSymbols.length + atWrap.length,
    worst,
    betweenSymbols,
    atWrap,
    inksBetweenSymbols: [...new Set(betweenSymbols.map((jump) => jump.inkId))].sort(),
  };
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

/**
 * Every stream that painted data cells use, and after how many repeats its sequence closes (lcm of bits per frame and period). `known`
 * carries what was read out of the same grid and sources before.
 */
export function payloadClosing(
  content: WaveformContent,
  known: { cellsOfInk: Float64Array; periodOf: (source: PayloadSource) => number | null } = {
    cellsOfInk: createCellCensus(content).cellsOfInk,
    periodOf,
  },
): PayloadClosing[] {
  const bits = bitsOfInk(content);
  return content.streams.flatMap((stream) => {
    let used = 0;
    content.tray.forEach((ink, id) => {
      if (ink.role === 'data' && ink.value.streamId === stream.streamId) used += bits[id]! * known.cellsOfInk[id]!;
    });
    if (used === 0) return [];
    const isAnchored = stream.fill === 'anchored';
    const bitsPerRepeat = isAnchored ? 12 * content.symbolCount * content.fftSize : used;
    const periodBits = known.periodOf(stream.source);
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
