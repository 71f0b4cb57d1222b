import type { SymbolPeaks } from '../fit/types';
import { log10 } from '../math/exponential';
import { medianPeak, outstandingSymbols } from './tally';

/**
 * How far the highest symbol stands above the median of those that send something. `peaks`: largest |x|² of each symbol's useful part on the
 * interpolated waveform, 0 where it is silent. Null where all are.
 */
export function symbolPeaksOf(peaks: Float64Array): SymbolPeaks | null {
  const median = medianPeak(peaks);
  if (median === null) return null;
  let symbol = 0;
  peaks.forEach((peak, i) => {
    if (peak > peaks[symbol]!) symbol = i;
  });
  return { aboveMedianDb: 10 * log10(peaks[symbol]! / median), symbol, outstanding: outstandingSymbols(peaks) };
}
