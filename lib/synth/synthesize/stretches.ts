import type { FrameLayout } from './types';

/**
 * Where a stretch of about `most` samples from sample `from` ends, so that work on it is whole: not inside a symbol or the suffix behind
 * the last one, anywhere in the silence after it. At most `most` samples, but never less than one symbol. `from` < samples.
 */
export function stretchEnd(layout: FrameLayout, from: number, most: number): number {
  const { repeats, repeatSamples, frameSamples, symbolStarts, symbolCount, samples } = layout;
  const target = from + most;
  if (target >= samples) return samples;
  const repeat = Math.min(repeats - 1, Math.floor(target / repeatSamples));
  const origin = repeat * repeatSamples;
  const inRepeat = target - origin;
  const activeEnd = origin + (repeat === repeats - 1 ? layout.lastActiveSamples : layout.activeSamples);
  if (target >= activeEnd) return target;
  let symbol = 0;
  for (let end = symbolCount; end - symbol > 1;) {
    const middle = (symbol + end) >> 1;
    if (symbolStarts[middle]! <= inRepeat) symbol = middle;
    else end = middle;
  }
  const start = origin + symbolStarts[symbol]!;
  if (inRepeat < frameSamples && start > from) return start;
  return symbol === symbolCount - 1 ? activeEnd : origin + symbolStarts[symbol + 1]!;
}
