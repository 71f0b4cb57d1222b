import { demand } from '../errors';
import { log10 } from '../math/exponential';
import type { EvmFigure, EvmRecipe, EvmReport } from './types';

/** Which cells are compared, and how the channel is taken out first. */
export interface EvmOptions {
  fftSize: number;
  symbolCount: number;
  inkCount: number;
  /** Inks (by number) whose cells are compared; every one with a meant value by default. Ink 0 never is. */
  inks?: readonly number[];
  /**
   * Ĥ: `none` compares as found, `oneGain` fits one complex gain over all named cells, `taps` divides each subcarrier by its own
   * (2·N, from `createTapEstimate` or known) first.
   */
  estimate:
    | 'none'
    | 'oneGain'
    | { taps: Float64Array; from: 'tapPerSubcarrier' | 'tapFromPilots'; symbolsPerTap: number | null };
  /**
   * The part of the error's degrees of freedom that the fit left, 0…1, where it is known better than 1 − 1/symbolsPerTap: in all, per ink,
   * per position. 0: the fit took all of it, so nothing was measured and the figure is null.
   */
  kept?: { all: number; byInk: ArrayLike<number>; bySubcarrier: ArrayLike<number> };
  /** False leaves the figures per subcarrier out: an empty list. */
  bySubcarrier?: boolean;
  /** Words for the recipe. */
  cellsWords?: string;
  dftWindow?: string;
  phaseTracking?: EvmRecipe['phaseTracking'];
}

/** Compares found cells with meant ones and pools by power. */
export interface EvmMeter {
  /** One symbol of one frame: L symbols count from 0, `row` its N inks, `found` and `meant` 2·N values in position order. */
  add(symbol: number, row: Uint8Array, found: Float64Array, meant: Float64Array): void;
  /** Tells that a frame is complete (for the recipe alone). */
  endFrame(): void;
  /** All that was added so far, to be put into another meter of the same options; owned by the meter. */
  readonly sums: EvmSums;
  /** Adds what another meter of the same options found, `times` as if it had been found so often. */
  take(sums: EvmSums, times?: number): void;
  report(): EvmReport;
}

/** The running sums of a meter, as plain numbers: a thread can hand them to another. */
export interface EvmSums {
  groups: [all: Float64Array, byInk: Float64Array, bySymbol: Float64Array, bySubcarrier: Float64Array];
  frames: number;
}

/** Below this normalised correlation no EVM is told: what was found does not look like what was meant. */
const LEAST_CORRELATION = 0.3;

/** Places of the sums kept per group: Σ|D|², Re and Im ΣD·X*, Σ|X|², cells. D = Y/Ĥ₀ − X. */
const PLACES = 5;

/**
 * EVM = √(Σ|Y/Ĥ − X|² / Σ|X|²) over the named cells, frames pooled by power, in all and per ink, symbol and subcarrier, each over its
 * own Σ|X|². The sums are of D = Y − X, so that a fitted gain loses no digits however small the error: with g = 1 + ε,
 * ε = ΣDX* / Σ|X|², a group's error is Σ|D − εX|² / |1 + ε|².
 * A least-squares fit over S symbols takes a part 1/S of the error with it: corrected by −10 lg(1 − 1/S), both shown.
 * Buffers that are added stay the caller's and are not kept; `found`, `meant` and `taps` are in one unit. Throws SynthError
 * `buffer_too_small` for fewer taps than subcarriers.
 */
export function createEvmMeter(options: EvmOptions): EvmMeter {
  const { fftSize, symbolCount, inkCount, estimate } = options;
  const taps = typeof estimate === 'object' ? estimate.taps : null;
  const isNamed = new Uint8Array(256);
  for (let ink = 1; ink < inkCount; ink++) isNamed[ink] = !options.inks || options.inks.includes(ink) ? 1 : 0;
  demand(!taps || taps.length >= 2 * fftSize, 'buffer_too_small', 'One tap a subcarrier.');
  const all = new Float64Array(PLACES);
  const byInk = new Float64Array(PLACES * inkCount);
  const bySymbol = new Float64Array(PLACES * symbolCount);
  const bySubcarrier = new Float64Array(options.bySubcarrier === false ? 0 : PLACES * fftSize);
  let frames = 0;

  const put = (
    into: Float64Array,
    at: number,
    error: number,
    re: number,
    im: number,
    meant: number,
    cells: number,
  ): void => {
    into[at] = into[at]! + error;
    into[at + 1] = into[at + 1]! + re;
    into[at + 2] = into[at + 2]! + im;
    into[at + 3] = into[at + 3]! + meant;
    into[at + 4] = into[at + 4]! + cells;
  };

  /** Cells first…end−1 of a symbol, all of one ink: the groups take their sums at the end. */
  function addRun(
    symbol: number,
    ink: number,
    first: number,
    end: number,
    found: Float64Array,
    meant: Float64Array,
  ): void {
    const hasSubcarriers = bySubcarrier.length > 0;
    let [error, re, im, size, cells] = [0, 0, 0, 0, 0];
    for (let p = first; p < end; p++) {
      const xRe = meant[2 * p]!;
      const xIm = meant[2 * p + 1]!;
      let yRe = found[2 * p]!;
      let yIm = found[2 * p + 1]!;
      if (taps) {
        const hRe = taps[2 * p]!;
        const hIm = taps[2 * p + 1]!;
        const power = hRe * hRe + hIm * hIm;
        if (power === 0) continue;
        const turned = (yRe * hRe + yIm * hIm) / power;
        yIm = (yIm * hRe - yRe * hIm) / power;
        yRe = turned;
      }
      const dRe = yRe - xRe;
      const dIm = yIm - xIm;
      const ownError = dRe * dRe + dIm * dIm;
      const ownRe = dRe * xRe + dIm * xIm;
      const ownIm = dIm * xRe - dRe * xIm;
      const ownSize = xRe * xRe + xIm * xIm;
      error += ownError;
      re += ownRe;
      im += ownIm;
      size += ownSize;
      cells++;
      if (hasSubcarriers) put(bySubcarrier, PLACES * p, ownError, ownRe, ownIm, ownSize, 1);
    }
    put(all, 0, error, re, im, size, cells);
    put(byInk, PLACES * ink, error, re, im, size, cells);
    put(bySymbol, PLACES * symbol, error, re, im, size, cells);
  }

  return {
    add(symbol, row, found, meant) {
      for (let p = 0; p < fftSize;) {
        const ink = row[p]!;
        let end = p + 1;
        while (end < fftSize && row[end] === ink) end++;
        if (isNamed[ink] === 1) addRun(symbol, ink, p, end, found, meant);
        p = end;
      }
    },
    endFrame() {
      frames++;
    },
    get sums(): EvmSums {
      return { groups: [all, byInk, bySymbol, bySubcarrier], frames };
    },
    take(sums, times = 1) {
      [all, byInk, bySymbol, bySubcarrier].forEach((own, group) => {
        const more = sums.groups[group]!;
        for (let i = 0; i < own.length; i++) own[i] = own[i]! + times * more[i]!;
      });
      frames += times * sums.frames;
    },
    report() {
      const meantAll = all[3]!;
      const fitted = estimate === 'oneGain' && meantAll > 0;
      const gainRe = fitted ? all[1]! / meantAll : 0;
      const gainIm = fitted ? all[2]! / meantAll : 0;
      const foundAll = meantAll + 2 * all[1]! + all[0]!;
      const cross = Math.sqrt((meantAll + all[1]!) * (meantAll + all[1]!) + all[2]! * all[2]!);
      const correlation = meantAll > 0 && foundAll > 0 ? Math.min(1, cross / Math.sqrt(meantAll * foundAll)) : 0;
      const symbolsPerTap = fitted ? all[4]! : typeof estimate === 'object' ? estimate.symbolsPerTap : null;
      // one symbol a tap fits everything: nothing is left to correct
      const keptAll = options.kept?.all ?? (symbolsPerTap !== null && symbolsPerTap > 1 ? 1 - 1 / symbolsPerTap : 1);
      const isTold = correlation >= LEAST_CORRELATION;
      const figure = (sums: Float64Array, at: number, left: number): EvmFigure => {
        const meant = sums[at + 3]!;
        const cells = sums[at + 4]!;
        if (meant === 0 || !isTold || left <= 0) return { ratio: null, db: null, uncorrectedDb: null, cells };
        const rest =
          sums[at]! -
          2 * (gainRe * sums[at + 1]! + gainIm * sums[at + 2]!) +
          (gainRe * gainRe + gainIm * gainIm) * meant;
        const power = Math.max(0, rest) / ((1 + gainRe) * (1 + gainRe) + gainIm * gainIm) / meant;
        return {
          ratio: Math.sqrt(power / left),
          db: 10 * log10(power / left),
          uncorrectedDb: 10 * log10(power),
          cells,
        };
      };
      const group = (sums: Float64Array, left?: ArrayLike<number>): EvmFigure[] =>
        Array.from({ length: sums.length / PLACES }, (_, i) => figure(sums, PLACES * i, left ? left[i]! : keptAll));
      const recipe: EvmRecipe = {
        cells: options.cellsWords ?? 'all used cells',
        estimate: typeof estimate === 'object' ? estimate.from : estimate,
        phaseTracking: options.phaseTracking ?? 'none',
        dftWindow: options.dftWindow ?? 'the useful part, from its first sample',
        frames,
        symbolsPerTap,
      };
      return {
        all: figure(all, 0, keptAll),
        byInk: group(byInk, options.kept?.byInk),
        bySymbol: group(bySymbol),
        bySubcarrier: group(bySubcarrier, options.kept?.bySubcarrier),
        correlation,
        recipe,
      };
    },
  };
}

/** Least squares of one tap a subcarrier from known cells. */
export interface TapEstimate {
  /** One symbol; `known`: 1 for each position whose meant value may be used (2·N values each). */
  add(known: Uint8Array, found: Float64Array, meant: Float64Array): void;
  /** Ĥ_k = ΣYX* / Σ|X|², 0 where nothing is known. A new array of 2·N. */
  taps(): Float64Array;
}

/** An empty estimate over `fftSize` subcarriers. What is added stays the caller's and is not kept. */
export function createTapEstimate(fftSize: number): TapEstimate {
  const cross = new Float64Array(2 * fftSize);
  const power = new Float64Array(fftSize);
  return {
    add(known, found, meant) {
      for (let p = 0; p < fftSize; p++) {
        if (known[p] === 0) continue;
        const xRe = meant[2 * p]!;
        const xIm = meant[2 * p + 1]!;
        const yRe = found[2 * p]!;
        const yIm = found[2 * p + 1]!;
        cross[2 * p] = cross[2 * p]! + yRe * xRe + yIm * xIm;
        cross[2 * p + 1] = cross[2 * p + 1]! + yIm * xRe - yRe * xIm;
        power[p] = power[p]! + xRe * xRe + xIm * xIm;
      }
    },
    taps: () => cross.map((value, i) => (power[i >> 1] === 0 ? 0 : value / power[i >> 1]!)),
  };
}
