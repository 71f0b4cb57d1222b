import { turnsOf } from '../math/angle';
import { writeUnitOfTurns } from '../math/turns';

/** One symbol read for estimating: where it stands (file samples), what was found and meant (2·N each), and which cells count (N). */
export interface ReadSymbol {
  usefulStart: number;
  /** Symbols of one group share the carrier's phase; between groups it may jump (a loop that the frequency offset does not close). */
  group: number;
  found: Float64Array;
  meant: Float64Array;
  known: Uint8Array;
}

/** What is left between symbols and their common channel. */
export interface Drift {
  /** Carrier: turns per file sample. */
  turnsPerSample: number;
  turnsPerSampleSigma: number;
  /** Clock: file samples that the windows come early per file sample passed; a capture's clock is too fast by as much. */
  clockError: number;
  clockErrorSigma: number;
  /** Channel: Ĥ (2·N), by least squares over the symbols after phase and slope are taken out; 0 where nothing is known. */
  taps: Float64Array;
  /** Per symbol: its common phase in turns, unwrapped. */
  phaseTurns: Float64Array;
  /** Mean square of what is left per known cell, and of what was found. */
  noisePower: number;
  signalPower: number;
}

const ROUNDS = 3;

/**
 * Carrier offset and clock error from symbols in order of time: the common channel by least squares, each symbol's phase and phase slope
 * over the subcarriers against it (weighted by |ĤX|²: the linearised maximum-likelihood estimate), then straight lines over time. `size`: N·M.
 * Needs two symbols; the offset left must be below half a turn from one symbol to the next.
 * Source: Speth, Fechtel, Fock, Meyr, "Optimum receiver design for OFDM-based broadband transmission", IEEE Trans. Commun. 49, 2001 (from memory).
 */
export function estimateDrift(symbols: readonly ReadSymbol[], fftSize: number, size: number): Drift {
  const count = symbols.length;
  const half = Math.floor(fftSize / 2);
  const phaseTurns = new Float64Array(count);
  const slopeTurns = new Float64Array(count); // turns per subcarrier
  const phaseWeight = new Float64Array(count);
  const slopeWeight = new Float64Array(count);
  const taps = new Float64Array(2 * fftSize);
  const power = new Float64Array(fftSize);
  const unit = new Float64Array(2);
  firstPhases(symbols, fftSize, phaseTurns);
  let noisePower = 0;
  let signalPower = 0;
  for (let round = 0; round < ROUNDS; round++) {
    taps.fill(0);
    power.fill(0);
    symbols.forEach(({ found, meant, known }, s) => {
      for (let p = 0; p < fftSize; p++) {
        if (known[p] === 0) continue;
        writeUnitOfTurns(-phaseTurns[s]! - slopeTurns[s]! * (p - half), 0, unit, 0);
        const yRe = found[2 * p]! * unit[0]! - found[2 * p + 1]! * unit[1]!;
        const yIm = found[2 * p]! * unit[1]! + found[2 * p + 1]! * unit[0]!;
        const xRe = meant[2 * p]!;
        const xIm = meant[2 * p + 1]!;
        taps[2 * p] = taps[2 * p]! + yRe * xRe + yIm * xIm;
        taps[2 * p + 1] = taps[2 * p + 1]! + yIm * xRe - yRe * xIm;
        power[p] = power[p]! + xRe * xRe + xIm * xIm;
      }
    });
    for (let p = 0; p < fftSize; p++) {
      if (power[p] === 0) continue;
      taps[2 * p] = taps[2 * p]! / power[p]!;
      taps[2 * p + 1] = taps[2 * p + 1]! / power[p]!;
    }
    noisePower = 0;
    signalPower = 0;
    let cells = 0;
    symbols.forEach(({ found, meant, known }, s) => {
      let weight = 0;
      let weightK = 0;
      let weightKk = 0;
      let cosine = 0;
      let sine = 0;
      let sineK = 0;
      for (let p = 0; p < fftSize; p++) {
        if (known[p] === 0) continue;
        const k = p - half;
        writeUnitOfTurns(phaseTurns[s]! + slopeTurns[s]! * k, 0, unit, 0);
        const hRe = taps[2 * p]! * unit[0]! - taps[2 * p + 1]! * unit[1]!;
        const hIm = taps[2 * p]! * unit[1]! + taps[2 * p + 1]! * unit[0]!;
        const eRe = hRe * meant[2 * p]! - hIm * meant[2 * p + 1]!;
        const eIm = hRe * meant[2 * p + 1]! + hIm * meant[2 * p]!;
        const yRe = found[2 * p]!;
        const yIm = found[2 * p + 1]!;
        const expected = eRe * eRe + eIm * eIm;
        const turned = yIm * eRe - yRe * eIm;
        weight += expected;
        weightK += expected * k;
        weightKk += expected * k * k;
        cosine += yRe * eRe + yIm * eIm;
        sine += turned;
        sineK += turned * k;
        noisePower += (yRe - eRe) * (yRe - eRe) + (yIm - eIm) * (yIm - eIm);
        signalPower += yRe * yRe + yIm * yIm;
        cells++;
      }
      const spread = weight > 0 ? weightKk - (weightK * weightK) / weight : 0;
      const slope = spread > 0 ? (sineK - (weightK / weight) * sine) / spread : 0;
      const middle = weight > 0 ? weightK / weight : 0;
      phaseTurns[s] = phaseTurns[s]! + turnsOf(cosine, sine) - (slope * middle) / TWO_PI;
      slopeTurns[s] = slopeTurns[s]! + slope / TWO_PI;
      phaseWeight[s] = weight;
      slopeWeight[s] = spread;
    });
    noisePower = cells === 0 ? 0 : noisePower / cells;
    signalPower = cells === 0 ? 0 : signalPower / cells;
  }
  const sigma = Math.sqrt(noisePower / 2) / TWO_PI;
  const carrier = lineOf(symbols, phaseTurns, phaseWeight, true);
  const clock = lineOf(symbols, slopeTurns, slopeWeight, false);
  return {
    turnsPerSample: carrier.slope,
    turnsPerSampleSigma: carrier.spread > 0 ? sigma / Math.sqrt(carrier.spread) : Infinity,
    clockError: 0 - clock.slope * size,
    clockErrorSigma: clock.spread > 0 ? (sigma * size) / Math.sqrt(clock.spread) : Infinity,
    taps,
    phaseTurns,
    noisePower,
    signalPower,
  };
}

const TWO_PI = 6.283185307179586;

/** Phases from symbol to symbol by what neighbours have in common, unwrapped: Σ_k (Y_s/X_s)(Y_{s−1}/X_{s−1})*, weighted. */
function firstPhases(symbols: readonly ReadSymbol[], fftSize: number, phaseTurns: Float64Array): void {
  for (let s = 1; s < symbols.length; s++) {
    const now = symbols[s]!;
    const last = symbols[s - 1]!;
    let re = 0;
    let im = 0;
    for (let p = 0; p < fftSize; p++) {
      if (now.known[p] === 0 || last.known[p] === 0) continue;
      const aRe = now.found[2 * p]! * now.meant[2 * p]! + now.found[2 * p + 1]! * now.meant[2 * p + 1]!;
      const aIm = now.found[2 * p + 1]! * now.meant[2 * p]! - now.found[2 * p]! * now.meant[2 * p + 1]!;
      const bRe = last.found[2 * p]! * last.meant[2 * p]! + last.found[2 * p + 1]! * last.meant[2 * p + 1]!;
      const bIm = last.found[2 * p + 1]! * last.meant[2 * p]! - last.found[2 * p]! * last.meant[2 * p + 1]!;
      re += aRe * bRe + aIm * bIm;
      im += aIm * bRe - aRe * bIm;
    }
    phaseTurns[s] = phaseTurns[s - 1]! + turnsOf(re, im);
  }
}

/** A straight line through values over usefulStart, weighted; with groups each has a level of its own. */
function lineOf(
  symbols: readonly ReadSymbol[],
  values: Float64Array,
  weights: Float64Array,
  withGroups: boolean,
): { slope: number; spread: number } {
  const sums = new Map<number, { weight: number; at: number; value: number }>();
  symbols.forEach((symbol, s) => {
    const group = withGroups ? symbol.group : 0;
    const sum = sums.get(group) ?? { weight: 0, at: 0, value: 0 };
    sum.weight += weights[s]!;
    sum.at += weights[s]! * symbol.usefulStart;
    sum.value += weights[s]! * values[s]!;
    sums.set(group, sum);
  });
  let cross = 0;
  let spread = 0;
  symbols.forEach((symbol, s) => {
    const sum = sums.get(withGroups ? symbol.group : 0)!;
    if (sum.weight === 0) return;
    const at = symbol.usefulStart - sum.at / sum.weight;
    cross += weights[s]! * at * (values[s]! - sum.value / sum.weight);
    spread += weights[s]! * at * at;
  });
  return { slope: spread > 0 ? cross / spread : 0, spread };
}
