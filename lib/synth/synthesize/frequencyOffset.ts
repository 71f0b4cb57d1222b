import { divide, createPair } from '../math/doubleDouble';
import { writeUnitOfTurns } from '../math/turns';
import type { WaveformContent } from '../types';

const ANCHOR_SAMPLES = 1024;

/** A finite double as numerator / 2^exponent, exact. */
function fractionOfDouble(value: number): { numerator: bigint; denominator: bigint } {
  let scaled = value;
  let denominator = 1n;
  while (!Number.isInteger(scaled)) {
    scaled *= 2;
    denominator *= 2n;
  }
  return { numerator: BigInt(scaled), denominator };
}

/** Turns of f0 in one output sample as an exact fraction, reduced to 0 ≤ numerator < denominator. */
export function turnsPerSample(
  content: WaveformContent,
  oversampling: number,
): { numerator: bigint; denominator: bigint } {
  const offset = fractionOfDouble(content.frequencyOffsetHz);
  const [spacing, per] = content.subcarrierSpacingHz;
  const clock = BigInt(content.fftSize) * BigInt(oversampling) * BigInt(spacing);
  const denominator = offset.denominator * clock;
  const numerator = (offset.numerator * BigInt(per)) % denominator;
  return { numerator: numerator < 0n ? numerator + denominator : numerator, denominator };
}

/** numerator/denominator in turns, 0 ≤ numerator < denominator, to 2^-100 of a turn, into `out`. */
function writeTurns(numerator: bigint, denominator: bigint, pair: Float64Array, out: Float64Array, at: number): void {
  if (denominator <= 4503599627370496n) divide(Number(numerator), Number(denominator), pair);
  else {
    const fixed = (numerator << 104n) / denominator;
    const high = Number(fixed >> 52n);
    pair[0] = high / 4503599627370496;
    pair[1] = Number(fixed & 0xfffffffffffffn) / 4503599627370496 / 4503599627370496;
  }
  writeUnitOfTurns(pair[0]!, pair[1]!, out, at);
}

/** Multiplies samples by e^{j2πf0n/fs}; n counts from the file's first sample. */
export interface FrequencyOffset {
  /** Turns `count` interleaved samples at data[2·at…]; the first is file sample `first`. */
  apply(data: Float64Array, at: number, count: number, first: number): void;
}

/**
 * The content's frequency offset at its output rate, null when there is none. The turns are reduced in whole numbers:
 * exact at every 1024th sample, and a table of exact turns in between, so a sample errs by two roundings wherever it lies.
 */
export function createFrequencyOffset(content: WaveformContent, oversampling: number): FrequencyOffset | null {
  if (content.frequencyOffsetHz === 0) return null;
  const { numerator, denominator } = turnsPerSample(content, oversampling);
  const pair = createPair();
  const table = new Float64Array(2 * ANCHOR_SAMPLES);
  for (let i = 0; i < ANCHOR_SAMPLES; i++) {
    writeTurns((numerator * BigInt(i)) % denominator, denominator, pair, table, 2 * i);
  }
  const anchor = new Float64Array(2);
  let anchored = -1;
  return {
    apply(data, at, count, first) {
      let done = 0;
      while (done < count) {
        const sample = first + done;
        const from = sample % ANCHOR_SAMPLES;
        if (anchored !== sample - from) {
          anchored = sample - from;
          writeTurns((numerator * BigInt(anchored)) % denominator, denominator, pair, anchor, 0);
        }
        const part = Math.min(count - done, ANCHOR_SAMPLES - from);
        const aRe = anchor[0]!;
        const aIm = anchor[1]!;
        for (let i = 0, d = 2 * (at + done), t = 2 * from; i < part; i++, d += 2, t += 2) {
          const tRe = table[t]!;
          const tIm = table[t + 1]!;
          const uRe = aRe * tRe - aIm * tIm;
          const uIm = aRe * tIm + aIm * tRe;
          const re = data[d]!;
          const im = data[d + 1]!;
          data[d] = re * uRe - im * uIm;
          data[d + 1] = re * uIm + im * uRe;
        }
        done += part;
      }
    },
  };
}
