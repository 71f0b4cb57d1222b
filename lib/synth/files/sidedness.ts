import { compareFractions, decimalFraction, divideFractions, multiplyFractions, nearestWhole } from '../fit/exact';
import type { ExactFraction } from '../numerology';
import type { BenchContent, WaveformContent } from '../types';

const SIZE = 16;
const SUBCARRIER = 2; // N/8
const REPEATS_MOST = 65536;
const SYMBOLS_MOST = 16384;
const SAMPLES_MOST = 8589934592; // 2^33
/** Where the profile allows it the tone stands 2 MHz above the carrier: far from it, and inside any analyser's view. */
const WANTED_HZ = 16000000;
const SPACING_MOST_HZ = 1000000000n;

/** One tone at +N/8 on 16 samples, as often as a profile's lengths ask for. */
export interface SidednessPlan {
  content: Pick<
    WaveformContent,
    | 'fftSize'
    | 'subcarrierSpacingHz'
    | 'symbolCount'
    | 'prefixSamples'
    | 'timing'
    | 'tray'
    | 'grid'
    | 'streams'
    | 'level'
  >;
  /** How far above the carrier the tone stands. */
  toneHz: ExactFraction;
}

/** Why a profile has no room for it; `path` leads into its content. */
export interface SidednessRefusal {
  path: string[];
  words: string;
}

function clockFor({ least, most, step }: BenchContent['sampleClockHz']): ExactFraction | null {
  const wanted = { numerator: BigInt(WANTED_HZ), denominator: 1n };
  const [low, high] = [decimalFraction(least), decimalFraction(most)];
  const size = step === null ? null : decimalFraction(step);
  const inside = compareFractions(wanted, low) < 0 ? low : compareFractions(wanted, high) > 0 ? high : wanted;
  if (size === null) return inside;
  const count = nearestWhole(divideFractions(inside, size));
  // the nearest multiple of the step may lie just outside of the range
  for (const candidate of [count, count + 1n, count - 1n]) {
    const clock = multiplyFractions(size, { numerator: candidate, denominator: 1n });
    if (candidate > 0n && compareFractions(clock, low) >= 0 && compareFractions(clock, high) <= 0) return clock;
  }
  return null;
}

function commonDivisor(a: number, b: number): number {
  return b === 0 ? a : commonDivisor(b, a % b);
}

/** Symbols of a frame and repeats of it that make the least length a profile takes; null where it takes none of them. */
function lengthFor(bench: BenchContent): { symbolCount: number; repeats: number } | null {
  const { granularitySamples: grain, leastSamples, mostSamples } = bench;
  const unit = (SIZE * grain) / commonDivisor(SIZE, grain);
  const units = Math.ceil(leastSamples / unit);
  for (let symbolCount = 1; symbolCount <= SYMBOLS_MOST; symbolCount *= 2) {
    const samples = Math.ceil(units / symbolCount) * symbolCount * unit;
    const repeats = samples / (SIZE * symbolCount);
    if (samples > mostSamples || samples > SAMPLES_MOST) return null;
    if (repeats <= REPEATS_MOST) return { symbolCount, repeats };
  }
  return null;
}

/**
 * A waveform by which an operator sees on an analyser which side of the carrier a generator puts what lies above it: one tone
 * at +N/8, 16 samples, repeated to the profile's least length. A tone below the carrier says that I and Q are taken the other
 * way round, or Q with the other sign. Where the profile leaves no clock or length for it, that in words.
 */
export function sidednessPlan(bench: BenchContent): SidednessPlan | SidednessRefusal {
  const clock = clockFor(bench.sampleClockHz);
  const spacing = clock && multiplyFractions(clock, { numerator: 1n, denominator: BigInt(SIZE) });
  if (spacing === null)
    return {
      path: ['sampleClockHz', 'step'],
      words: 'No multiple of the step lies between the clocks: none can be set.',
    };
  const most = BigInt(Number.MAX_SAFE_INTEGER);
  if (
    spacing.numerator > most ||
    spacing.denominator > most ||
    spacing.numerator > SPACING_MOST_HZ * spacing.denominator
  )
    return {
      path: ['sampleClockHz'],
      words: 'No clock of this profile is 16 times a subcarrier spacing of at most 1 GHz.',
    };
  const length = lengthFor(bench);
  if (length === null)
    return {
      path: ['mostSamples'],
      words: 'No length of this profile holds 16 samples repeated up to its shortest length.',
    };
  return {
    content: {
      fftSize: SIZE,
      subcarrierSpacingHz: [Number(spacing.numerator), Number(spacing.denominator)],
      symbolCount: length.symbolCount,
      prefixSamples: [0],
      timing: { mode: bench.modes[0] ?? 'loop', repeats: length.repeats, gapSamples: 0, padSamples: 0 },
      tray: [
        { inkId: 'k0', name: 'Null', role: 'null', powerDb: 0, value: null },
        {
          inkId: 'k1',
          name: 'Tone above the carrier',
          role: 'tone',
          powerDb: 0,
          value: { factors: [], phaseDeg: 0, continuous: true },
        },
      ],
      grid: {
        rows: [[SIZE / 2 + SUBCARRIER, 0, 1, 1, SIZE / 2 - SUBCARRIER - 1, 0]],
        rowOfSymbol: new Array<number>(length.symbolCount).fill(0),
      },
      streams: [],
      level: { reference: 'interpolatedPeak', headroomDb: Math.max(1, bench.leastHeadroomDb) },
    },
    toneHz: multiplyFractions(spacing, { numerator: BigInt(SUBCARRIER), denominator: 1n }),
  };
}
