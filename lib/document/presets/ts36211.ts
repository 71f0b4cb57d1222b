import type { Ink } from '@/lib/synth/index';
import { paintedGrid } from '../paintedGrid';
import { standardPreset, type Preset } from './preset';
import { dataInk, nullInk, pilotInk, runningPayload } from './presetParts';

const mostResourceBlocks = 110;
const cellId = 150;

type Prefix = 'normal' | 'extended';

/** c_init of a cell's reference signals (TS 36.211, 6.10.1.1): its 7 stands for both prefixes, N_CP is 1 for the normal one. */
export function referenceSignalInit(cell: number, slot: number, symbol: number, prefix: Prefix = 'normal'): number {
  return 1024 * (7 * (slot + 1) + symbol + 1) * (2 * cell + 1) + 2 * cell + (prefix === 'normal' ? 1 : 0);
}

/** The first reference subcarrier of antenna port 0 in its raster of six (6.10.1.2), counted from the lowest used one. */
export function referenceSignalShift(cell: number, symbol: number): number {
  return ((symbol === 0 ? 0 : 3) + (cell % 6)) % 6;
}

/** r(m′) with m′ = m + 110 − N_RB: the carrier's own blocks are the middle of the widest one's. */
export const referenceSignalStart = (blocks: number): number => mostResourceBlocks - blocks;

/** The prefixes of a slot at N = 2048 (table 6.12-1); other sizes scale. */
const slotPrefixes: Record<Prefix, number[]> = {
  normal: [160, 144, 144, 144, 144, 144, 144],
  extended: [512, 512, 512, 512, 512, 512],
};

function downlink(megahertz: string, blocks: number, fftSize: number, prefix: Prefix = 'normal'): Preset {
  const perSlot = slotPrefixes[prefix].length;
  const symbolCount = 2 * perSlot;
  const half = (blocks * 12) / 2;
  // port 0 stands in the first symbol of a slot and in its third from last; each has a c_init, and so an ink, of its own
  const referenceSymbols = [0, perSlot - 3, perSlot, 2 * perSlot - 3];
  const referenceInk = (symbol: number, at: number): Ink => {
    const slot = Math.floor(symbol / perSlot);
    const inSlot = symbol % perSlot;
    const cInit = referenceSignalInit(cellId, slot, inSlot, prefix);
    return pilotInk(2 + at, `Reference, slot ${slot}, symbol ${inSlot}`, [
      { sequence: { kind: 'gold', cInit, points: 'qpsk' }, counter: 'symbolCell', start: referenceSignalStart(blocks) },
    ]);
  };
  const inkOf = (subcarrier: number, symbol: number): number => {
    if (subcarrier === 0 || Math.abs(subcarrier) > half) return 0;
    const fromLowest = subcarrier < 0 ? subcarrier + half : subcarrier + half - 1; // DC is no resource element
    const at = referenceSymbols.indexOf(symbol);
    return at >= 0 && fromLowest % 6 === referenceSignalShift(cellId, symbol % perSlot) ? 2 + at : 1;
  };
  const prefixes = slotPrefixes[prefix].map((samples) => (samples * fftSize) / 2048);
  return standardPreset({
    presetId: `ts36211-${megahertz.replace('.', '-')}mhz${prefix === 'normal' ? '' : '-extended'}`,
    title: `Downlink subframe, ${megahertz} MHz${prefix === 'normal' ? '' : `, ${prefix} prefix`}`,
    basedOn: `3GPP TS 36.211, 6.2 grid, 6.10.1 cell-specific reference signals, 6.12 OFDM generation, ${prefix} cyclic prefix`,
    holds: `One subframe of ${2 * half} subcarriers, 15 kHz apart, DC bare, with antenna port 0's reference signals of cell identity ${cellId}.`,
    remark: `Cell identity ${cellId} is invented. Looks like a base station: use it on cable only.`,
    leftOut: [
      'synchronization signals, broadcast and control channels: every other used cell carries data',
      'scrambling, coding and precoding; antenna ports 1 to 3',
      'slots 2 to 19: the subframe of slots 0 and 1 is what a loop repeats',
    ],
    fromMemory:
      "the blocks of each bandwidth, the reference signals' subcarriers and the place m + 110 − N in their sequence",
    numbers: { fftSize, subcarrierSpacingHz: [15000, 1], symbolCount },
    content: () => ({
      prefixSamples: prefixes.every((samples) => samples === prefixes[0]) ? prefixes.slice(0, 1) : prefixes,
      tray: [nullInk, dataInk(1, 'Data, 64-QAM', '64qam', 'ts38211'), ...referenceSymbols.map(referenceInk)],
      grid: paintedGrid(fftSize, symbolCount, inkOf, (symbol) => (referenceSymbols.includes(symbol) ? symbol : 1)),
      streams: runningPayload({ kind: 'pn', stages: 9, taps: [5, 9], seed: 511, inverted: false }),
    }),
  });
}

export const ts36211Presets: readonly Preset[] = [
  downlink('1.4', 6, 128),
  downlink('5', 25, 512),
  downlink('10', 50, 1024),
  downlink('20', 100, 2048),
  downlink('5', 25, 512, 'extended'),
];
