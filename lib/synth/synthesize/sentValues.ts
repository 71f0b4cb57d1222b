import { createSymbolReducer } from '../peak/symbolReducer';
import type { SymbolOutcome } from '../peak/clipFilter';
import type { WaveformContent } from '../types';
import { createCellValues, createPlacedValues } from './cellValues';
import { powerBefore } from './synthesis';
import type { CellValues, RenderOptions } from './types';

/** Values as they are sent, and what the reduction of the last symbol came to (powers of x; null where nothing is reduced). */
export interface SentValues extends CellValues {
  /** The values as they are meant, without peak reduction. */
  readonly meant: CellValues;
  lastOutcome(): SymbolOutcome | null;
}

/**
 * The values of a content's cells as they are sent, after peak reduction: cells that it may not change keep their meant values bit for
 * bit, reserved cells hold what it filled them with. Without a reduction they are the meant values.
 * Throws SynthError as createCellValues does.
 */
export function createSentValues(
  content: WaveformContent,
  options: Pick<RenderOptions, 'cells' | 'engine' | 'powerBefore'> = {},
): SentValues {
  const meant = createCellValues(content, options.cells);
  const reducer = createSymbolReducer(content);
  let outcome: SymbolOutcome | null = null;
  const base = {
    meant,
    lastOutcome: () => outcome,
    content,
    cells: meant.cells,
    bitsPerRepeat: meant.bitsPerRepeat,
    bitsOfSymbol: meant.bitsOfSymbol,
    readBits: meant.readBits,
    firstBits: meant.firstBits,
    get isRepeatAlike() {
      return meant.isRepeatAlike;
    },
    touch: meant.touch,
  };
  if (!reducer) return { ...base, write: meant.write };

  const { fftSize } = content;
  const gain = Math.sqrt(fftSize);
  const scaled = createPlacedValues(content, options.cells, 1 / gain);
  const natural = { split: fftSize, low: 0, high: 0 };
  const meanPower = powerBefore(content, options);
  const cells = new Float64Array(2 * fftSize);
  return {
    ...base,
    write(repeat, symbol, out) {
      meant.write(repeat, symbol, out);
      cells.fill(0);
      scaled.writePlaced(repeat, symbol, cells, natural);
      const inks = meant.cells.subarray(symbol * fftSize, (symbol + 1) * fftSize);
      outcome = reducer.reduce(cells, inks, meanPower());
      for (let p = 0; p < fftSize; p++) {
        if (!reducer.mayChange[inks[p]!]) continue;
        out[2 * p] = cells[2 * p]! * gain;
        out[2 * p + 1] = cells[2 * p + 1]! * gain;
      }
    },
    touch(symbol) {
      meant.touch(symbol);
      scaled.touch(symbol);
    },
  };
}
