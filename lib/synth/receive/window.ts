import { impulseResponse, interpolateTaps, windowAdvance, type ImpulseResponse } from './channel';
import type { Cycle } from './cycle';

/** 1 where a tap (2·N) is there. */
export function tapsThere(taps: Float64Array): Float64Array {
  return Float64Array.from({ length: taps.length / 2 }, (_, p) => (taps[2 * p] !== 0 || taps[2 * p + 1] !== 0 ? 1 : 0));
}

/** Positions of the outermost used subcarriers that the capture's band holds. */
export function usedSpan(cycle: Cycle, captured: number): { first: number; last: number } {
  const half = Math.floor(cycle.content.fftSize / 2);
  return { first: Math.max(cycle.usedLow, -captured) + half, last: Math.min(cycle.usedHigh, captured) + half };
}

/** The impulse response of a cycle's taps (0 where none is known), `noisePower` being the mean square error of a tap. */
export function impulseOf(cycle: Cycle, captured: number, taps: Float64Array, noisePower: number): ImpulseResponse {
  const { first, last } = usedSpan(cycle, captured);
  const filled = taps.slice();
  interpolateTaps(filled, tapsThere(taps), first, last);
  return impulseResponse(filled, cycle.content.fftSize, first, last, noisePower);
}

/** Where the window should begin for these taps, in file samples before the useful part. */
export function advanceOf(
  cycle: Cycle,
  { captured }: { captured: number },
  taps: Float64Array,
  noisePower: number,
): number {
  const { oversampling } = cycle.content;
  const guard = Math.max(0, Math.floor(cycle.guardSamples / oversampling));
  return oversampling * windowAdvance(impulseOf(cycle, captured, taps, noisePower).paths, guard);
}
