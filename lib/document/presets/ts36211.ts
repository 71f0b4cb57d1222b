import type { Ink } from '@/lib/synth/index';
import { emptyDocument } from '../newDocument';
import { paintedGrid } from '../paintedGrid';
import type { Preset } from './preset';

const fftSize = 512;
const symbolsPerSlot = 7;
const symbolCount = 2 * symbolsPerSlot;
const resourceBlocks = 25;
const mostResourceBlocks = 110;
const cellId = 150;
const dataInk = 1;

/** c_init of a cell's reference signals with the normal prefix (TS 36.211, 6.10.1.1). */
export function referenceSignalInit(cell: number, slot: number, symbol: number): number {
  return 1024 * (symbolsPerSlot * (slot + 1) + symbol + 1) * (2 * cell + 1) + 2 * cell + 1;
}

/** The first reference subcarrier of antenna port 0 in its raster of six (6.10.1.2), counted from the lowest used one. */
export function referenceSignalShift(cell: number, symbol: number): number {
  return ((symbol === 0 ? 0 : 3) + (cell % 6)) % 6;
}

/** r(m′) with m′ = m + 110 − N_RB: the carrier's own blocks are the middle of the widest one's. */
export const referenceSignalStart = (blocks: number): number => mostResourceBlocks - blocks;

/** The symbols of port 0's reference signals in a subframe; each has a c_init, and so an ink, of its own. */
const referenceSymbols = [0, 4, 7, 11];

function referenceInk(symbol: number, at: number): Ink {
  const slot = Math.floor(symbol / symbolsPerSlot);
  const inSlot = symbol % symbolsPerSlot;
  return {
    inkId: `k${2 + at}`,
    name: `Reference, slot ${slot}, symbol ${inSlot}`,
    role: 'pilot',
    powerDb: 0,
    value: {
      factors: [
        {
          sequence: { kind: 'gold', cInit: referenceSignalInit(cellId, slot, inSlot), points: 'qpsk' },
          counter: 'symbolCell',
          start: referenceSignalStart(resourceBlocks),
        },
      ],
    },
  };
}

function inkOf(subcarrier: number, symbol: number): number {
  const half = (resourceBlocks * 12) / 2;
  if (subcarrier === 0 || Math.abs(subcarrier) > half) return 0;
  const fromLowest = subcarrier < 0 ? subcarrier + half : subcarrier + half - 1; // DC is no resource element
  const at = referenceSymbols.indexOf(symbol);
  const isReference = at >= 0 && fromLowest % 6 === referenceSignalShift(cellId, symbol % symbolsPerSlot);
  return isReference ? 2 + at : dataInk;
}

const title = 'Downlink subframe, normal prefix, 5 MHz';
const basedOn =
  '3GPP TS 36.211, 6.2 grid, 6.10.1 cell-specific reference signals, 6.12 OFDM generation, normal cyclic prefix';
const leftOut = [
  'synchronization signals, broadcast and control channels: every other used cell carries data',
  'scrambling, coding and precoding; antenna ports 1 to 3',
  'slots 2 to 19: the subframe of slots 0 and 1 is what a loop repeats',
];

export const ts36211At5MHz: Preset = {
  presetId: 'ts36211-5mhz',
  title,
  basedOn,
  holds: `One subframe of 300 subcarriers, 15 kHz apart, DC bare, with antenna port 0's reference signals of cell identity ${cellId}.`,
  leftOut,
  build: () =>
    emptyDocument({
      title,
      basedOn,
      notes: `Cell identity ${cellId} is invented. Left out: ${leftOut.join('; ')}. Looks like a base station: use it on cable only.`,
      content: {
        fftSize,
        subcarrierSpacingHz: [15000, 1],
        symbolCount,
        prefixSamples: [40, 36, 36, 36, 36, 36, 36],
        oversampling: 1,
        tray: [
          { inkId: 'k0', name: 'Null', role: 'null', powerDb: 0, value: null },
          {
            inkId: 'k1',
            name: 'Data, 64-QAM',
            role: 'data',
            powerDb: 0,
            value: { constellation: '64qam', bitMap: 'ts38211', streamId: 's0' },
          },
          ...referenceSymbols.map(referenceInk),
        ],
        grid: paintedGrid(fftSize, symbolCount, inkOf),
        streams: [
          {
            streamId: 's0',
            name: 'Payload',
            source: { kind: 'pn', stages: 9, taps: [5, 9], seed: 511, inverted: false },
            fill: 'running',
            acrossRepeats: 'restart',
          },
        ],
      },
    }),
};
