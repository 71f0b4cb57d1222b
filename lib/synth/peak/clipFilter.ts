import { peakPowerOf, type WorkSpace } from './workSpace';

/** What a symbol's reduction came to. */
export interface SymbolOutcome {
  /** Passes done: none where the symbol lies below the limit already. */
  passes: number;
  /** Largest |x|² on the interpolated symbol, before and after. */
  peakBefore: number;
  peakAfter: number;
}

/** Sets every sample that is longer than √limitPower to that length, its angle kept: the soft limiter of an envelope. In place. */
export function clipEnvelope(samples: Float64Array, limitPower: number): void {
  const limit = Math.sqrt(limitPower);
  for (let i = 0; i < samples.length; i += 2) {
    const re = samples[i]!;
    const im = samples[i + 1]!;
    const power = re * re + im * im;
    if (power <= limitPower) continue;
    const gain = limit / Math.sqrt(power);
    samples[i] = re * gain;
    samples[i + 1] = im * gain;
  }
}

/**
 * Clip and filter, one symbol in place: each pass clips the envelope of the interpolated symbol at √limitPower and gives the free
 * cells (`isFree`, one byte a position) what the clipped symbol has there; all others keep their values, so that nothing is left
 * outside of the painted cells. Ends after `most` passes, or before the first pass that would find no sample above the limit.
 * `cells` and `samples` as WorkSpace has them; `samples` and `clipped` (2·N) are scratch.
 * Source: repeated clipping and filtering, after Armstrong, Peak-to-average power reduction for OFDM, 2002 (from memory).
 */
export function clipAndFilter(
  space: WorkSpace,
  cells: Float64Array,
  isFree: Uint8Array,
  limitPower: number,
  most: number,
  samples: Float64Array,
  clipped: Float64Array,
): SymbolOutcome {
  space.toSamples(cells, samples);
  const peakBefore = peakPowerOf(samples);
  let peakAfter = peakBefore;
  let passes = 0;
  while (passes < most && peakAfter > limitPower) {
    clipEnvelope(samples, limitPower);
    space.toCells(samples, clipped);
    for (let p = 0; p < space.fftSize; p++) {
      if (isFree[p] === 0) continue;
      cells[2 * p] = clipped[2 * p]!;
      cells[2 * p + 1] = clipped[2 * p + 1]!;
    }
    passes++;
    space.toSamples(cells, samples);
    peakAfter = peakPowerOf(samples);
  }
  return { passes, peakBefore, peakAfter };
}
