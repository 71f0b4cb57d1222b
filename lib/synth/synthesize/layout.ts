import { demand } from '../errors';
import type { WaveformContent } from '../types';
import type { FrameLayout } from './types';

const SAMPLES_MOST = 549755813888; // 2^33 at M = 1, on M' ≤ 16 times more and room to spare

/** M′ of docs/signal.md: the least multiple of M that is at least 4; what "interpolated" means everywhere. */
export function interpolationOf(oversampling: number): number {
  return oversampling * Math.ceil(4 / oversampling);
}

/**
 * Exact sample positions of a content rendered `oversampling`-fold (its own by default).
 * Throws SynthError `bad_size` unless oversampling is a whole multiple of the content's, `too_large` beyond 2^39 samples.
 */
export function frameLayout(content: WaveformContent, oversampling = content.oversampling): FrameLayout {
  const { fftSize, symbolCount, prefixSamples, timing } = content;
  const scale = oversampling / content.oversampling;
  demand(Number.isInteger(scale) && scale >= 1, 'bad_size', 'Render at a whole multiple of the oversampling.');
  const symbolStarts = new Float64Array(symbolCount);
  const prefixes = new Int32Array(symbolCount);
  const usefulSamples = fftSize * oversampling;
  let at = 0;
  for (let symbol = 0; symbol < symbolCount; symbol++) {
    const prefix = prefixSamples[symbol % prefixSamples.length]! * oversampling;
    symbolStarts[symbol] = at;
    prefixes[symbol] = prefix;
    at += prefix + usefulSamples;
  }
  const frameSamples = at;
  const gapSamples = timing.gapSamples * oversampling;
  const padSamples = timing.padSamples * scale;
  const overlapSamples = content.overlapSamples * oversampling;
  const repeatSamples = frameSamples + gapSamples;
  const tail = timing.mode === 'burst' ? overlapSamples : 0;
  const samples = timing.repeats * repeatSamples + padSamples + tail;
  demand(samples <= SAMPLES_MOST, 'too_large', 'The file is too long.');
  const behindLast = gapSamples + padSamples + tail;
  return {
    samples,
    oversampling,
    repeats: timing.repeats,
    symbolCount,
    mode: timing.mode,
    repeatSamples,
    frameSamples,
    gapSamples,
    padSamples,
    usefulSamples,
    overlapSamples,
    symbolStarts,
    prefixes,
    activeSamples: frameSamples + Math.min(gapSamples, overlapSamples),
    lastActiveSamples: frameSamples + Math.min(behindLast, overlapSamples),
  };
}
