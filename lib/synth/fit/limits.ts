import { fractionToNumber, sampleClock, type ExactFraction } from '../numerology';
import type { BenchContent, WaveformContent } from '../types';
import {
  compareFractions,
  decimalFraction,
  divideFractions,
  multiplyFractions,
  nearestWhole,
  subtractFractions,
} from './exact';

/** The document's own ranges that a remedy could leave. */
export const REPEATS_MOST = 65536;
export const SAMPLES_MOST = 8589934592; // 2^33
export const PAD_MOST = 2147483647;
export const OVERSAMPLING_MOST = 16;
export const HEADROOM_MOST_DB = 60;
export const MARKER_REACH = 2147483648;

/** The largest length that loads: memory counts in whole multiples of the granularity. 0 where the memory holds no single one. */
export function usableMost(bench: Pick<BenchContent, 'granularitySamples' | 'mostSamples'>): number {
  return Math.floor(bench.mostSamples / bench.granularitySamples) * bench.granularitySamples;
}

/** The least length that loads and has at least `samples`, memory aside. */
export function allowedLength(
  samples: number,
  bench: Pick<BenchContent, 'granularitySamples' | 'leastSamples'>,
): number {
  const { granularitySamples: size, leastSamples } = bench;
  return Math.ceil(Math.max(samples, leastSamples) / size) * size;
}

/** Whether a file of this length loads. */
export function isLoadable(
  samples: number,
  bench: Pick<BenchContent, 'granularitySamples' | 'leastSamples' | 'mostSamples'>,
): boolean {
  return samples === allowedLength(samples, bench) && samples <= usableMost(bench);
}

/** Whether a clock can be set, exactly: limits and step count as the decimals that were typed. */
export function isClockAllowed(clock: ExactFraction, { least, most, step }: BenchContent['sampleClockHz']): boolean {
  if (compareFractions(clock, decimalFraction(least)) < 0) return false;
  if (compareFractions(clock, decimalFraction(most)) > 0) return false;
  return step === null || divideFractions(clock, decimalFraction(step)).denominator === 1n;
}

/** The clock nearest to `clock` that can be set; null where no multiple of the step lies in the range. */
export function nearestClock(
  clock: ExactFraction,
  { least, most, step }: BenchContent['sampleClockHz'],
): ExactFraction | null {
  const [low, high] = [decimalFraction(least), decimalFraction(most)];
  if (step === null) {
    if (compareFractions(clock, low) < 0) return low;
    return compareFractions(clock, high) > 0 ? high : clock;
  }
  const size = decimalFraction(step);
  const first = ceilOf(divideFractions(low, size));
  const last = floorOf(divideFractions(high, size));
  if (last < first) return null;
  const wanted = nearestWhole(divideFractions(clock, size));
  const count = wanted < first ? first : wanted > last ? last : wanted;
  return multiplyFractions(size, { numerator: count, denominator: 1n });
}

function floorOf({ numerator, denominator }: ExactFraction): bigint {
  return numerator / denominator; // positive
}

function ceilOf({ numerator, denominator }: ExactFraction): bigint {
  return (numerator + denominator - 1n) / denominator;
}

/** By how much `to` differs from `from`, in parts per million of `from` (positive), rounded once. */
export function ppmBetween(from: ExactFraction, to: ExactFraction): number {
  const share = divideFractions(subtractFractions(to, from), from);
  return fractionToNumber(multiplyFractions(share, { numerator: 1000000n, denominator: 1n }));
}

/** The clock and what it would have to be for this bench. */
export function clockOf(content: WaveformContent, bench: BenchContent) {
  const exact = sampleClock(content);
  const nearest = nearestClock(exact, bench.sampleClockHz);
  return { exact, nearest, isAllowed: isClockAllowed(exact, bench.sampleClockHz) };
}
