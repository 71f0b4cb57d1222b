import { createTransform } from '../fft/transform';
import { log10, powerOfDecibels } from '../math/exponential';
import { sineCosine, writeUnitOfTurns } from '../math/turns';
import { createWindow } from '../measure/window';

/** Sums for one tap a subcarrier. */
export interface TapSums {
  /** One symbol turned back by its common phase: 2·N found and meant values, `known`: 1 where a cell counts. */
  add(found: Float64Array, meant: Float64Array, known: Uint8Array, phaseTurns: number): void;
  /** Ĥ_k = ΣYX* / Σ|X|² (2·N); 0 where nothing was known. A new array. */
  taps(): Float64Array;
  /** Known cells behind each tap (N). Owned by the sums. */
  readonly counts: Float64Array;
}

/** Least squares of one tap a subcarrier. */
export function createTapSums(fftSize: number): TapSums {
  const cross = new Float64Array(2 * fftSize);
  const power = new Float64Array(fftSize);
  const counts = new Float64Array(fftSize);
  return {
    counts,
    add(found, meant, known, phaseTurns) {
      const { cosine, sine } = sineCosine(-phaseTurns);
      for (let p = 0; p < fftSize; p++) {
        if (known[p] === 0) continue;
        const yRe = found[2 * p]! * cosine - found[2 * p + 1]! * sine;
        const yIm = found[2 * p]! * sine + found[2 * p + 1]! * cosine;
        const xRe = meant[2 * p]!;
        const xIm = meant[2 * p + 1]!;
        cross[2 * p] = cross[2 * p]! + yRe * xRe + yIm * xIm;
        cross[2 * p + 1] = cross[2 * p + 1]! + yIm * xRe - yRe * xIm;
        power[p] = power[p]! + xRe * xRe + xIm * xIm;
        counts[p] = counts[p]! + 1;
      }
    },
    taps: () => cross.map((value, i) => (power[i >> 1] === 0 ? 0 : value / power[i >> 1]!)),
  };
}

/**
 * Fills the taps that nothing was known of, between first and last position: linearly between known neighbours, level beyond the outermost.
 * `counts`: 0 where a tap is missing. Changes `taps` (2·N); leaves it alone when no tap is known.
 */
export function interpolateTaps(taps: Float64Array, counts: Float64Array, first: number, last: number): void {
  let left = -1;
  for (let p = 0; p <= last; p++) {
    if (counts[p] === 0) continue;
    if (left < 0) for (let q = first; q < p; q++) copyTap(taps, p, q);
    else
      for (let q = left + 1; q < p; q++) {
        const share = (q - left) / (p - left);
        for (const part of [0, 1])
          taps[2 * q + part] = taps[2 * left + part]! + share * (taps[2 * p + part]! - taps[2 * left + part]!);
      }
    left = p;
  }
  if (left >= 0) for (let q = left + 1; q <= last; q++) copyTap(taps, left, q);
}

function copyTap(taps: Float64Array, from: number, to: number): void {
  taps[2 * to] = taps[2 * from]!;
  taps[2 * to + 1] = taps[2 * from + 1]!;
}

/** A channel over delay. */
export interface ImpulseResponse {
  /** |h|² against its largest, dB, at delays firstDelay, firstDelay + 1, … base-rate samples (N of them); a path of one tap is a lobe a few samples wide. */
  powerDb: Float64Array;
  firstDelay: number;
  /** Local maxima that stand clear of noise and of the lobe's own sides, by delay: power relative to the largest. */
  paths: { delaySamples: number; powerDb: number }[];
}

const PATH_LEAST_DB = -40;

/**
 * The impulse response of taps over positions first…last (filled), with a Hamming taper whose sides lie below −42 dB, and the paths
 * in it: maxima above −40 dB of the largest and 14 dB above `noisePower`, the mean square error of a tap.
 */
export function impulseResponse(
  taps: Float64Array,
  fftSize: number,
  first: number,
  last: number,
  noisePower: number,
): ImpulseResponse {
  const span = last - first + 1;
  const half = Math.floor(fftSize / 2);
  const spectrum = new Float64Array(2 * fftSize);
  let sum = 0;
  let squares = 0;
  const taper = createWindow('hamming', span + 1).weights;
  for (let p = first; p <= last; p++) {
    const weight = taper[p - first + 1]!;
    const k = p - half;
    const bin = k < 0 ? k + fftSize : k;
    spectrum[2 * bin] = weight * taps[2 * p]!;
    spectrum[2 * bin + 1] = weight * taps[2 * p + 1]!;
    sum += weight;
    squares += weight * weight;
  }
  const response = new Float64Array(2 * fftSize);
  createTransform(fftSize).inverse(spectrum, response);
  const firstDelay = -half;
  const power = new Float64Array(fftSize);
  let largest = 0;
  for (let i = 0; i < fftSize; i++) {
    const n = (i + firstDelay + fftSize) % fftSize;
    power[i] = (response[2 * n]! * response[2 * n]! + response[2 * n + 1]! * response[2 * n + 1]!) / (sum * sum);
    largest = Math.max(largest, power[i]!);
  }
  const least = Math.max(largest * 1e-4, (25 * noisePower * squares) / (sum * sum));
  const paths: ImpulseResponse['paths'] = [];
  for (let i = 0; i < fftSize; i++) {
    const here = power[i]!;
    const before = power[(i + fftSize - 1) % fftSize]!;
    const after = power[(i + 1) % fftSize]!;
    if (here >= least && here > before && here >= after)
      paths.push({ delaySamples: i + firstDelay, powerDb: 10 * log10(here / largest) });
  }
  return {
    powerDb: power.map((value) => (largest > 0 ? Math.max(-200, 10 * log10(value / largest)) : -200)),
    firstDelay,
    paths: paths.filter(({ powerDb }) => powerDb >= PATH_LEAST_DB),
  };
}

/**
 * Where in the guard the window should begin, in samples before the useful part, from the paths and the guard (all in base-rate samples):
 * in the middle of what the paths leave free; where they are spread wider than the guard, where the least energy comes from other symbols.
 * Result 0…guard, whole.
 */
export function windowAdvance(paths: ImpulseResponse['paths'], guard: number): number {
  if (paths.length === 0 || guard === 0) return 0;
  const first = paths[0]!.delaySamples;
  const last = paths[paths.length - 1]!.delaySamples;
  const spread = last - first;
  if (spread <= guard) return clampWhole(-first + Math.floor((guard - spread) / 2), guard);
  let best = 0;
  let least = Infinity;
  for (let advance = 0; advance <= guard; advance++) {
    let energy = 0;
    for (const { delaySamples, powerDb } of paths) {
      const excess = Math.max(0, delaySamples - (guard - advance), -advance - delaySamples);
      energy += excess * powerOfDecibels(powerDb);
    }
    if (energy < least) {
      least = energy;
      best = advance;
    }
  }
  return best;
}

function clampWhole(value: number, most: number): number {
  return Math.max(0, Math.min(most, value));
}

/**
 * The delay of the strongest path in base-rate samples, later is positive: where |Σ w_k H_k e^{j2πkτ/N}| is largest, `weights` being the
 * known power behind each tap (N). For one path in white noise this is the maximum-likelihood estimate.
 */
export function strongestDelay(taps: Float64Array, weights: Float64Array, fftSize: number): number {
  const half = Math.floor(fftSize / 2);
  const spectrum = new Float64Array(2 * fftSize);
  for (let p = 0; p < fftSize; p++) {
    const bin = p - half < 0 ? p - half + fftSize : p - half;
    spectrum[2 * bin] = weights[p]! * taps[2 * p]!;
    spectrum[2 * bin + 1] = weights[p]! * taps[2 * p + 1]!;
  }
  const response = new Float64Array(2 * fftSize);
  createTransform(fftSize).inverse(spectrum, response);
  let best = 0;
  let most = -1;
  for (let n = 0; n < fftSize; n++) {
    const power = response[2 * n]! * response[2 * n]! + response[2 * n + 1]! * response[2 * n + 1]!;
    if (power > most) {
      most = power;
      best = n;
    }
  }
  let delay = best >= fftSize / 2 ? best - fftSize : best;
  const unit = new Float64Array(2);
  const moments = (at: number): { power: number; slope: number; bend: number } => {
    let re = 0;
    let im = 0;
    let re1 = 0;
    let im1 = 0;
    let re2 = 0;
    let im2 = 0;
    for (let p = 0; p < fftSize; p++) {
      if (weights[p] === 0) continue;
      const k = p - half;
      writeUnitOfTurns((k * at) / fftSize, 0, unit, 0);
      const a = weights[p]! * (taps[2 * p]! * unit[0]! - taps[2 * p + 1]! * unit[1]!);
      const b = weights[p]! * (taps[2 * p]! * unit[1]! + taps[2 * p + 1]! * unit[0]!);
      re += a;
      im += b;
      re1 -= b * k;
      im1 += a * k;
      re2 -= a * k * k;
      im2 -= b * k * k;
    }
    return {
      power: re * re + im * im,
      slope: 2 * (re * re1 + im * im1),
      bend: 2 * (re1 * re1 + im1 * im1 + re * re2 + im * im2),
    };
  };
  // an eighth of a sample first: Newton's step needs to start on the top
  let top = moments(delay).power;
  const whole = delay;
  for (let i = -7; i <= 7; i++) {
    const { power } = moments(whole + i / 8);
    if (power > top) {
      top = power;
      delay = whole + i / 8;
    }
  }
  for (let i = 0; i < 8; i++) {
    const { slope, bend } = moments(delay);
    if (bend >= 0) break;
    const step = (-slope / bend) * (fftSize / 6.283185307179586);
    if (Math.abs(step) > 0.25) break;
    delay += step;
    if (Math.abs(step) < 1e-12) break;
  }
  return delay;
}
