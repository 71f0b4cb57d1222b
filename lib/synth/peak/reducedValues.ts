import type { Placement, PlacedValues } from '../synthesize/cellValues';
import type { SymbolReducer } from './symbolReducer';

/**
 * Values as they are sent: those of `meant`, in units of x, put through the reducer symbol by symbol. All else is the meant values' own.
 * `meanPower` is asked at each symbol; what it gives must not change while equal bits are wanted.
 */
export function createReducedValues(
  meant: PlacedValues,
  reducer: SymbolReducer,
  meanPower: () => number,
): PlacedValues {
  const { fftSize } = meant.content;
  const natural: Placement = { split: fftSize, low: 0, high: 0 };
  const cells = new Float64Array(2 * fftSize);

  function writeReduced(repeat: number, symbol: number): void {
    cells.fill(0);
    meant.writePlaced(repeat, symbol, cells, natural);
    const inks = meant.cells.subarray(symbol * fftSize, (symbol + 1) * fftSize);
    reducer.reduce(cells, inks, meanPower());
  }

  return {
    content: meant.content,
    cells: meant.cells,
    inks: meant.inks,
    rowOf: () => -1,
    isSteadyRow: () => false,
    painted: { first: 0, end: fftSize },
    writePlaced(repeat, symbol, out, { split, low, high }) {
      writeReduced(repeat, symbol);
      out.set(cells.subarray(0, 2 * split), 2 * low);
      out.set(cells.subarray(2 * split, 2 * fftSize), 2 * (high + split));
    },
    write(repeat, symbol, out) {
      writeReduced(repeat, symbol);
      out.set(cells);
    },
    bitsPerRepeat: meant.bitsPerRepeat,
    bitsOfSymbol: meant.bitsOfSymbol,
    readBits: meant.readBits,
    firstBits: meant.firstBits,
    get isRepeatAlike() {
      return meant.isRepeatAlike;
    },
    touch: meant.touch,
  };
}
