import type { Factor } from '@/lib/synth/index';
import { paintedGrid } from '../paintedGrid';
import { standardPreset } from './preset';
import { dataInk, listed, nullInk, pilotInk, runningPayload } from './presetParts';

const fftSize = 64;
const symbolCount = 16;
const dataAt = 1;
const pilotAt = 2;
const pilotSubcarriers = new Set([-21, -7, 7, 21]);

function inkOf(subcarrier: number): number {
  if (subcarrier === 0 || Math.abs(subcarrier) > 26) return 0;
  return pilotSubcarriers.has(subcarrier) ? pilotAt : dataAt;
}

/** P at k = −21, −7, 7, 21 (17.3.5.10). */
const baseValues: Factor = { sequence: listed([1, 1, 1, -1]), counter: 'symbolCell', start: 0 };

/**
 * The polarity p_(n + before): 1 − 2 × the output of the scrambler x^7 + x^4 + 1 started with ones (17.3.5.5, 17.3.5.10).
 * Our register gives its seven ones first, so p_n stands at n + 7; `before` symbols of the head took p_0, p_1 ….
 */
export const pilotPolarity = (before: number): Factor => ({
  sequence: { kind: 'pn', stages: 7, taps: [4, 7], seed: 127, inverted: false },
  counter: 'symbol',
  start: 7 + before,
});

export const ieee80211At20MHz = standardPreset({
  presetId: 'ieee80211-20mhz',
  title: 'OFDM PHY at 20 MHz',
  basedOn: 'IEEE Std 802.11-2020, clause 17 (OFDM PHY): 17.3.2.4 timing, 17.3.5.8 maps, 17.3.5.10 pilots',
  holds:
    '16 data symbols of 48 data and 4 pilot subcarriers, 312.5 kHz apart, with a prefix of 16 of 80 samples at 20 MS/s.',
  leftOut: [
    'the short and the long training symbols and the SIGNAL symbol',
    'scrambling, convolutional coding and interleaving: the payload bits go to the cells as they come',
    'the window of the symbol borders (the overlap is 0; the clause leaves it to the maker)',
  ],
  fromMemory: 'the timing of table 17-5',
  numbers: { fftSize, subcarrierSpacingHz: [312500, 1], symbolCount },
  content: () => ({
    prefixSamples: [16],
    tray: [
      nullInk,
      dataInk(dataAt, 'Data, 16-QAM', '16qam', 'ieee80211'),
      pilotInk(pilotAt, 'Pilots', [baseValues, pilotPolarity(1)]),
    ],
    grid: paintedGrid(fftSize, symbolCount, inkOf, () => 0),
    streams: runningPayload(),
  }),
});
