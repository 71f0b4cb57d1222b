import { log10 } from '../math/exponential';
import { createSum } from '../math/sums';
import { createEvmMeter } from '../measure/evm';
import type { EvmReport } from '../measure/types';
import { createSentValues } from '../synthesize/sentValues';
import { powerBefore } from '../synthesize/synthesis';
import type { RenderOptions } from '../synthesize/types';
import type { WaveformContent } from '../types';

/** What a content's peak reduction reached and what it costs. Figures in dB are null where nothing is painted. */
export interface ReductionReport {
  kind: 'clipAndFilter' | 'toneReservation';
  /** Over the frame's mean power before the reduction, silent symbols left out; so is `reachedPaprDb`. */
  targetPaprDb: number;
  /** The highest peak of any interpolated symbol after the reduction, and before it. */
  reachedPaprDb: number | null;
  beforePaprDb: number | null;
  isReached: boolean;
  /** The symbol of the frame that holds that peak. */
  worstSymbol: number | null;
  /** The most passes that a symbol took. */
  passes: number;
  /** Sent against meant values of the data cells: as they are, and with one complex gain fitted. */
  evm: EvmReport;
  evmGainFitted: EvmReport;
  /** Σ|sent|² over Σ|meant|², all cells. */
  meanPowerChangeDb: number | null;
  /** Reserved cells that were filled, and the strongest of them (|a|², a data cell of 0 dB has 1). */
  filledCells: number;
  strongestFilledDb: number | null;
}

export interface ReductionMeasuring {
  readonly totalSteps: number;
  readonly doneSteps: number;
  /** One symbol on; false when nothing is left. */
  step(): boolean;
  result(): ReductionReport;
}

/**
 * Measures a content's peak reduction, symbol by symbol: all repeats, or the first where they are alike. Null for kind "none".
 */
export function createReductionMeasure(
  content: WaveformContent,
  options: Pick<RenderOptions, 'cells' | 'engine' | 'powerBefore'> = {},
): ReductionMeasuring | null {
  const { peakReduction, fftSize, symbolCount, tray, timing } = content;
  if (peakReduction.kind === 'none') return null;
  const { kind, targetPaprDb } = peakReduction;
  const before = powerBefore(content, options);
  const values = createSentValues(content, { ...options, powerBefore: before });
  const repeats = values.isRepeatAlike ? 1 : timing.repeats;
  const totalSteps = repeats * symbolCount;
  const meterOptions = {
    fftSize,
    symbolCount,
    inkCount: tray.length,
    inks: tray.flatMap(({ role }, ink) => (role === 'data' ? [ink] : [])),
    cellsWords: 'all data cells, sent against meant',
  };
  const plain = createEvmMeter({ ...meterOptions, estimate: 'none' });
  const fitted = createEvmMeter({ ...meterOptions, estimate: 'oneGain' });
  const isReserved = tray.map(({ role }) => role === 'reserved');
  const meant = new Float64Array(2 * fftSize);
  const sent = new Float64Array(2 * fftSize);
  const meantPower = createSum();
  const sentPower = createSum();
  let done = 0;
  let passes = 0;
  let peakBefore = 0;
  let peakAfter = 0;
  let worstSymbol: number | null = null;
  let filledCells = 0;
  let strongest = 0;

  function addCells(inks: Uint8Array): void {
    for (let p = 0; p < fftSize; p++) {
      meantPower.add(meant[2 * p]! * meant[2 * p]! + meant[2 * p + 1]! * meant[2 * p + 1]!);
      const power = sent[2 * p]! * sent[2 * p]! + sent[2 * p + 1]! * sent[2 * p + 1]!;
      sentPower.add(power);
      if (isReserved[inks[p]!] !== true || power === 0) continue;
      filledCells++;
      if (power > strongest) strongest = power;
    }
  }

  return {
    totalSteps,
    get doneSteps() {
      return done;
    },
    step() {
      if (done === totalSteps) return false;
      const symbol = done % symbolCount;
      const repeat = (done - symbol) / symbolCount;
      values.meant.write(repeat, symbol, meant);
      values.write(repeat, symbol, sent);
      const inks = values.cells.subarray(symbol * fftSize, (symbol + 1) * fftSize);
      addCells(inks);
      for (const meter of [plain, fitted]) {
        meter.add(symbol, inks, sent, meant);
        if (symbol === symbolCount - 1) meter.endFrame();
      }
      const outcome = values.lastOutcome()!;
      passes = Math.max(passes, outcome.passes);
      peakBefore = Math.max(peakBefore, outcome.peakBefore);
      if (outcome.peakAfter > peakAfter) {
        peakAfter = outcome.peakAfter;
        worstSymbol = symbol;
      }
      done++;
      return done < totalSteps;
    },
    result() {
      const mean = before();
      const over = (peak: number): number | null => (mean === 0 ? null : 10 * log10(peak / mean));
      const reachedPaprDb = over(peakAfter);
      return {
        kind,
        targetPaprDb,
        reachedPaprDb,
        beforePaprDb: over(peakBefore),
        // a reached peak may stand a rounding above the target: as many digits as a figure shows
        isReached: reachedPaprDb === null || reachedPaprDb <= targetPaprDb + 1e-9,
        worstSymbol,
        passes,
        evm: plain.report(),
        evmGainFitted: fitted.report(),
        meanPowerChangeDb: meantPower.total() === 0 ? null : 10 * log10(sentPower.total() / meantPower.total()),
        filledCells,
        strongestFilledDb: strongest === 0 ? null : 10 * log10(strongest),
      };
    },
  };
}
