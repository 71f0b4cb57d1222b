import type { Factor } from '@/lib/synth/index';
import { emptyDocument } from '../newDocument';
import { paintedGrid } from '../paintedGrid';
import type { Preset } from './preset';

const fftSize = 64;
const symbolCount = 16;
const dataInk = 1;
const pilotInk = 2;
const pilotSubcarriers = new Set([-21, -7, 7, 21]);

function inkOf(subcarrier: number): number {
  if (subcarrier === 0 || Math.abs(subcarrier) > 26) return 0;
  return pilotSubcarriers.has(subcarrier) ? pilotInk : dataInk;
}

/** P at k = −21, −7, 7, 21 (17.3.5.10). */
const baseValues: Factor = {
  sequence: {
    kind: 'listed',
    points: [
      [1, 0],
      [1, 0],
      [1, 0],
      [-1, 0],
    ],
  },
  counter: 'symbolCell',
  start: 0,
};

/**
 * The polarity p_n: 1 − 2 × the output of the scrambler x^7 + x^4 + 1 started with ones (17.3.5.5, 17.3.5.10). Our register
 * gives its seven ones first, so p_n stands at n + 7, and the first data symbol takes p_1 (the SIGNAL symbol had p_0).
 */
const polarity: Factor = {
  sequence: { kind: 'pn', stages: 7, taps: [4, 7], seed: 127, inverted: false },
  counter: 'symbol',
  start: 8,
};

const title = 'OFDM PHY at 20 MHz';
const basedOn = 'IEEE Std 802.11-2020, clause 17 (OFDM PHY): 17.3.2.4 timing, 17.3.5.8 maps, 17.3.5.10 pilots';
const leftOut = [
  'the short and the long training symbols and the SIGNAL symbol',
  'scrambling, convolutional coding and interleaving: the payload bits go to the cells as they come',
  'the window of the symbol borders (the overlap is 0; the clause leaves it to the maker)',
];

export const ieee80211At20MHz: Preset = {
  presetId: 'ieee80211-20mhz',
  title,
  basedOn,
  holds:
    '16 data symbols of 48 data and 4 pilot subcarriers, 312.5 kHz apart, with a prefix of 16 of 80 samples at 20 MS/s.',
  leftOut,
  build: () =>
    emptyDocument({
      title,
      basedOn,
      notes: `Data symbols alone. Left out: ${leftOut.join('; ')}.`,
      content: {
        fftSize,
        subcarrierSpacingHz: [312500, 1],
        symbolCount,
        prefixSamples: [16],
        oversampling: 1,
        tray: [
          { inkId: 'k0', name: 'Null', role: 'null', powerDb: 0, value: null },
          {
            inkId: 'k1',
            name: 'Data, 16-QAM',
            role: 'data',
            powerDb: 0,
            value: { constellation: '16qam', bitMap: 'ieee80211', streamId: 's0' },
          },
          { inkId: 'k2', name: 'Pilots', role: 'pilot', powerDb: 0, value: { factors: [baseValues, polarity] } },
        ],
        grid: paintedGrid(fftSize, symbolCount, inkOf),
        streams: [
          {
            streamId: 's0',
            name: 'Payload',
            source: { kind: 'pn', stages: 15, taps: [14, 15], seed: 32767, inverted: true },
            fill: 'running',
            acrossRepeats: 'restart',
          },
        ],
      },
    }),
};
