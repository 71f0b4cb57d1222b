import { powerOfDecibels } from '../math/exponential';
import { interpolationOf } from '../synthesize/layout';
import type { WaveformContent } from '../types';
import { clipAndFilter, type SymbolOutcome } from './clipFilter';
import { reserveTones, type ReservationScratch } from './toneReservation';
import { createWorkSpace } from './workSpace';

/** A content's peak reduction, symbol by symbol. */
export interface SymbolReducer {
  /** By ink number: whether the reduction may change its cells. */
  readonly mayChange: readonly boolean[];
  /**
   * Changes the values of one symbol in place: 2·N numbers in units of x (a/√N), position p = k + ⌊N/2⌋; `inks` are its N ink numbers.
   * `meanPower` is what the target stands over: mean |x|² of the frame before any reduction, silent symbols left out.
   */
  reduce(cells: Float64Array, inks: Uint8Array, meanPower: number): SymbolOutcome;
}

/**
 * The reduction of content.peakReduction; null for kind "none". In clip and filter the cells of data and reserved inks change, pilots and
 * tones keep their values (a receiver knows them), null cells stay empty; in tone reservation reserved cells alone change. Judged on the
 * M′·N-point symbol, whatever is rendered. Not for two callers at once.
 */
export function createSymbolReducer(content: WaveformContent): SymbolReducer | null {
  const { peakReduction, fftSize, tray } = content;
  if (peakReduction.kind === 'none') return null;
  const { kind, targetPaprDb, iterations } = peakReduction;
  const ratio = powerOfDecibels(targetPaprDb);
  const mayChange = tray.map(({ role }) => role === 'reserved' || (kind === 'clipAndFilter' && role === 'data'));
  const isFree = new Uint8Array(fftSize);
  const space = createWorkSpace(fftSize, interpolationOf(content.oversampling));
  const samples = new Float64Array(2 * space.samples);
  const step = new Float64Array(2 * fftSize);
  const reservation: ReservationScratch | null =
    kind === 'toneReservation'
      ? {
          samples,
          step,
          excess: new Float64Array(2 * space.samples),
          change: new Float64Array(2 * space.samples),
          best: new Float64Array(2 * fftSize),
        }
      : null;
  return {
    mayChange,
    reduce(cells, inks, meanPower) {
      let freeCells = 0;
      for (let p = 0; p < fftSize; p++) freeCells += isFree[p] = mayChange[inks[p]!] === true ? 1 : 0;
      const most = freeCells === 0 ? 0 : iterations;
      const limitPower = ratio * meanPower;
      if (reservation) return reserveTones(space, cells, isFree, limitPower, most, reservation);
      return clipAndFilter(space, cells, isFree, limitPower, most, samples, step);
    },
  };
}
