import type { Factor, RunGrid } from '@/lib/synth/index';
import { paintedGrid } from '../paintedGrid';
import { standardPreset } from './preset';
import { dataInk, listed, nullInk, pilotInk, runningPayload } from './presetParts';

/** Data symbols of every layout of this family: a short burst's worth. */
export const dataSymbols = 16;
const dataPlace = 1;
const pilotPlace = 2;

/** The upper half of a band that looks the same below the carrier: from k = 0 up, what is bare, then data with a pilot in each seam. */
export interface HalfBand {
  /** Unused subcarriers from the carrier's own up. */
  bare: number;
  /** Data subcarriers before the first pilot, between pilots, and behind the last. */
  data: readonly number[];
}

/** The same painting in all symbols: the half band and its mirror image. */
export function mirroredBand(fftSize: number, { bare, data }: HalfBand): RunGrid {
  const inks: number[] = new Array<number>(bare).fill(0);
  data.forEach((count, stretch) => {
    if (stretch > 0) inks.push(pilotPlace);
    for (let i = 0; i < count; i += 1) inks.push(dataPlace);
  });
  return paintedGrid(
    fftSize,
    dataSymbols,
    (subcarrier) => inks[Math.abs(subcarrier)] ?? 0,
    () => 0,
  );
}

/** Data subcarriers and pilots of both halves. */
export const countsOf = ({ data }: HalfBand): { data: number; pilots: number } => ({
  data: 2 * data.reduce((sum, count) => sum + count, 0),
  pilots: 2 * (data.length - 1),
});

/**
 * The polarity of a data symbol's pilots (17.3.5.10): p_n is 1 − 2 × bit n of the scrambler's sequence for seven ones (17.3.5.5,
 * x^7 + x^4 + 1), which as a recurrence is b(t) = b(t − 4) ⊕ b(t − 7). The seven ones are the register's state; our register
 * gives its state first, so that p_n is its value n + 7. `spent` polarities went to the symbols before the data.
 */
export function pilotPolarity(spent: number): Factor {
  const stages = 7;
  return {
    sequence: { kind: 'pn', stages, taps: [4, 7], seed: 2 ** stages - 1, inverted: false },
    counter: 'symbol',
    start: stages + spent,
  };
}

/** Clause 17: k = 1…6, pilot 7, 8…20, pilot 21, 22…26 on either side, 48 + 4 in all. */
const band20: HalfBand = { bare: 1, data: [6, 13, 5] };
const numbers20 = { fftSize: 64, subcarrierSpacingHz: [312500, 1] as [number, number], symbolCount: dataSymbols };

export const ieee80211At20MHz = standardPreset({
  presetId: 'ieee80211-20mhz',
  title: 'OFDM PHY at 20 MHz',
  basedOn: 'IEEE Std 802.11-2020, clause 17 (OFDM PHY): 17.3.2.4 timing, 17.3.5.8 maps, 17.3.5.10 pilots',
  holds:
    '16 data symbols at 20 MS/s, 48 data and 4 pilot subcarriers in each, 312.5 kHz apart; 16 of a symbol’s 80 samples are its prefix.',
  leftOut: [
    'what comes before the data: the short and the long training symbols and SIGNAL',
    'scrambler, code and interleaver: the payload bits are mapped as they come',
    'windowed borders, which the clause leaves to the maker: the overlap is 0',
  ],
  fromMemory: 'the timing of table 17-5',
  numbers: numbers20,
  content: () => ({
    prefixSamples: [numbers20.fftSize / 4],
    tray: [
      nullInk,
      dataInk(dataPlace, 'Data, 16-QAM', '16qam', 'ieee80211'),
      pilotInk(pilotPlace, 'Pilots', [
        // k = −21, −7, 7, 21; p_0 is SIGNAL's
        { sequence: listed([1, 1, 1, -1]), counter: 'symbolCell', start: 0 },
        pilotPolarity(1),
      ]),
    ],
    grid: mirroredBand(numbers20.fftSize, band20),
    streams: runningPayload(),
  }),
});
