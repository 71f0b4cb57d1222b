import { payloadClosing } from '../fit/closing';
import type { WaveformContent } from '../types';
import { turnsPerSample } from './frequencyOffset';
import { frameLayout } from './layout';

const ANCHOR_SAMPLES = 1024; // frequencyOffset's: equal turns are equal bits at equal places between anchors

/** Which repeats have the samples of an earlier one, bit for bit. */
export interface RepeatCopies {
  /** Repeats before this one may differ from all others: the first has no suffix before it, or another one. 0 or 1. */
  firstAlike: number;
  /** Repeat r ≥ firstAlike + period equals repeat r − period. */
  period: number;
}

function gcd(a: number, b: number): number {
  while (b !== 0) [a, b] = [b, a % b];
  return a;
}

/**
 * What repeats of a content's rendering are copies, decided by the document alone; null where none is.
 * They are where payloads restart or have come round, continuous tones and the frequency offset close over `period` repeats.
 * `oversampling` as in frameLayout.
 */
export function repeatCopies(content: WaveformContent, oversampling = content.oversampling): RepeatCopies | null {
  const { repeats } = content.timing;
  const layout = frameLayout(content, oversampling);
  let period = 1;
  /** False once copies are out of reach, so that no product grows beyond exact numbers. */
  const closeOver = (one: number): boolean => {
    period = (period / gcd(period, one)) * one;
    return period < repeats;
  };

  for (const { streamId, repeatsToClose } of payloadClosing(content)) {
    const stream = content.streams.find((candidate) => candidate.streamId === streamId);
    if (stream?.acrossRepeats === 'restart') continue;
    if (repeatsToClose === null || !closeOver(repeatsToClose)) return null;
  }
  for (const one of tonePeriods(content, layout.repeatSamples / oversampling)) if (!closeOver(one)) return null;
  if (content.frequencyOffsetHz !== 0) {
    const { numerator, denominator } = turnsPerSample(content, oversampling);
    if (!closeOver(ANCHOR_SAMPLES / gcd(layout.repeatSamples % ANCHOR_SAMPLES, ANCHOR_SAMPLES))) return null;
    const closing = denominator / bigGcd((numerator * BigInt(layout.repeatSamples)) % denominator, denominator);
    if (closing >= BigInt(repeats) || !closeOver(Number(closing))) return null;
  }
  const { overlapSamples, gapSamples, padSamples, mode } = layout;
  // the suffix of the repeat before stands in the gap, or in a loop's wrap as it does between repeats
  const isFirstAlike = gapSamples >= overlapSamples || (mode === 'loop' && padSamples === 0);
  const firstAlike = isFirstAlike ? 0 : 1;
  return firstAlike + period < repeats ? { firstAlike, period } : null;
}

function bigGcd(a: bigint, b: bigint): bigint {
  while (b !== 0n) [a, b] = [b, a % b];
  return a;
}

/** For each subcarrier that a continuous tone paints: after how many repeats its sine stands as in the first. */
function tonePeriods(content: WaveformContent, repeatSamples: number): Set<number> {
  const { fftSize, tray, grid } = content;
  const turn = repeatSamples % fftSize;
  const lowest = -Math.floor(fftSize / 2);
  const periods = new Set<number>();
  for (const row of grid.rows) {
    for (let i = 0, p = 0; i < row.length; i += 2) {
      const end = p + row[i]!;
      const ink = tray[row[i + 1]!];
      if (ink?.role === 'tone' && ink.value.continuous) {
        for (; p < end; p++) periods.add(fftSize / gcd((Math.abs(p + lowest) * turn) % fftSize, fftSize));
      }
      p = end;
    }
  }
  return periods;
}
