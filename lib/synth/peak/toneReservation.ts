import type { SymbolOutcome } from './clipFilter';
import { peakPowerOf, type WorkSpace } from './workSpace';

/** Scratch of tone reservation: 2·U numbers each for samples, excess and change, 2·N each for step and best. */
export interface ReservationScratch {
  samples: Float64Array;
  excess: Float64Array;
  change: Float64Array;
  step: Float64Array;
  best: Float64Array;
}

/**
 * Tone reservation, one symbol in place: only reserved cells (`isReserved`, one byte a position) change. Each pass takes what of the
 * envelope stands above √limitPower, projects it on the reserved cells, and takes away as much of that projection as leaves the least
 * squared excess over the samples that stand above: a gradient of the clipping noise with its step found by least squares. The cells with
 * the lowest peak of all passes are kept, so that no peak is ever raised. Ends after `most` passes, or when no sample is above.
 * Source: the gradient method of Tellado, Peak to Average Power Reduction for Multicarrier Modulation, 1999 (from memory); the step is
 * our own choice.
 */
export function reserveTones(
  space: WorkSpace,
  cells: Float64Array,
  isReserved: Uint8Array,
  limitPower: number,
  most: number,
  scratch: ReservationScratch,
): SymbolOutcome {
  const { samples, excess, change, step, best } = scratch;
  const limit = Math.sqrt(limitPower);
  space.toSamples(cells, samples);
  const peakBefore = peakPowerOf(samples);
  let lowest = peakBefore;
  let peak = peakBefore;
  let passes = 0;
  best.set(cells);
  while (passes < most && peak > limitPower) {
    takeExcess(samples, limitPower, limit, excess);
    space.toCells(excess, step);
    for (let p = 0; p < space.fftSize; p++) if (isReserved[p] === 0) step[2 * p] = step[2 * p + 1] = 0;
    space.toSamples(step, change);
    const size = stepSize(excess, change);
    if (size === 0) break;
    for (let i = 0; i < step.length; i++) cells[i] = cells[i]! - size * step[i]!;
    for (let i = 0; i < samples.length; i++) samples[i] = samples[i]! - size * change[i]!;
    passes++;
    peak = peakPowerOf(samples);
    if (peak < lowest) {
      lowest = peak;
      best.set(cells);
    }
  }
  cells.set(best);
  return { passes, peakBefore, peakAfter: lowest };
}

/** out = x − x·limit/|x| where |x| is above the limit, else 0. */
function takeExcess(samples: Float64Array, limitPower: number, limit: number, out: Float64Array): void {
  for (let i = 0; i < samples.length; i += 2) {
    const re = samples[i]!;
    const im = samples[i + 1]!;
    const power = re * re + im * im;
    const part = power > limitPower ? 1 - limit / Math.sqrt(power) : 0;
    out[i] = part * re;
    out[i + 1] = part * im;
  }
}

/** μ = Σ Re(d*·e)/Σ|d|² over the samples with an excess e, d the change; 0 where d is nothing there. */
function stepSize(excess: Float64Array, change: Float64Array): number {
  let along = 0;
  let power = 0;
  for (let i = 0; i < excess.length; i += 2) {
    if (excess[i] === 0 && excess[i + 1] === 0) continue;
    along += change[i]! * excess[i]! + change[i + 1]! * excess[i + 1]!;
    power += change[i]! * change[i]! + change[i + 1]! * change[i + 1]!;
  }
  return power > 0 ? along / power : 0;
}
