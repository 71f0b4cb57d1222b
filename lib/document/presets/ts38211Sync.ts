import type { Factor } from '@/lib/synth/index';
import { paintedGrid } from '../paintedGrid';
import { standardPreset } from './preset';
import { dataInk, nullInk, pilotInk, runningPayload } from './presetParts';
import { firstSlotPrefixes, goldQpsk } from './ts38211';

const fftSize = 256;
const slotSymbols = 14;
const cellId = 500;
/** Where blocks begin in a slot at 30 kHz, case C (TS 38.213, 4.1). */
const firstSymbols = [2, 8];

const bare = 0;
const broadcast = 1;
const primary = 2;
const secondary = 3;
/** The reference signals of block 0; each block has a c_init, and so an ink, of its own. */
const references = 4;

/** Table 7.4.3.1-1 as it reads: for each of the block's four symbols, runs over its 240 subcarriers. */
const blockTable: readonly (readonly [ink: number, subcarriers: number])[][] = [
  [
    [bare, 56],
    [primary, 127],
    [bare, 57],
  ],
  [[broadcast, 240]],
  [
    [broadcast, 48],
    [bare, 8],
    [secondary, 127],
    [bare, 9],
    [broadcast, 48],
  ],
  [[broadcast, 240]],
];
const block = blockTable.map((runs) => runs.flatMap(([ink, subcarriers]) => new Array<number>(subcarriers).fill(ink)));
const halfBlock = block[0]!.length / 2;

function inkOf(subcarrier: number, symbol: number): number {
  const number = firstSymbols.findIndex((first) => symbol >= first && symbol < first + block.length);
  if (number < 0) return bare;
  const fromLowest = subcarrier + halfBlock;
  const ink = block[symbol - firstSymbols[number]!]![fromLowest] ?? bare;
  // every fourth broadcast cell, from v = N_ID mod 4 on, is a reference
  return ink === broadcast && fromLowest % 4 === cellId % 4 ? references + number : ink;
}

/** d(n) = 1 − 2x((n + shift) mod 127) of a register of seven stages; x(0) is the seed's lowest bit. */
const shifted = (taps: number[], seed: number, shift: number): Factor => ({
  sequence: { kind: 'pn', stages: 7, taps, seed, inverted: false },
  counter: 'symbolCell',
  start: shift,
});

/** x(i+7) = x(i+4) + x(i): three and seven back. */
const byFour = [3, 7];
/** x(i+7) = x(i+1) + x(i): six and seven back. */
const byOne = [6, 7];

/** PSS (7.4.2.2.1): x(6)…x(0) = 1110110, shifted by 43·N2. */
export const primarySignal = (cell: number): Factor[] => [shifted(byFour, 0b1110110, 43 * (cell % 3))];

/** SSS (7.4.2.3.1): the product of two that begin with x(0) = 1 alone; m0 = 15⌊N1/112⌋ + 5·N2, m1 = N1 mod 112. */
export function secondarySignal(cell: number): Factor[] {
  const [n1, n2] = [Math.floor(cell / 3), cell % 3];
  return [shifted(byFour, 1, 15 * Math.floor(n1 / 112) + 5 * n2), shifted(byOne, 1, n1 % 112)];
}

/** c_init = 2^11·(i + 1)·(⌊N_ID/4⌋ + 1) + 2^6·(i + 1) + N_ID mod 4 (7.4.1.4.1), block i of the first half frame. */
export const broadcastReferenceInit = (cell: number, index: number): number =>
  (index + 1) * (2 ** 11 * (Math.floor(cell / 4) + 1) + 2 ** 6) + (cell % 4);

export const ts38211SyncBlock = standardPreset({
  presetId: 'ts38211-sync-block',
  title: 'Sync blocks, 30 kHz',
  basedOn:
    '3GPP TS 38.211, 7.4.2 synchronization signals, 7.4.3 SS/PBCH block, 7.4.1.4 its reference signals; TS 38.213, 4.1, case C',
  holds: `One slot with two SS/PBCH blocks, each 240 subcarriers by 4 symbols, beginning at symbols ${firstSymbols.join(' and ')}; cell identity ${cellId}.`,
  remark: `Cell identity ${cellId} is invented. Looks like a base station: use it on cable only.`,
  leftOut: [
    'coding and scrambling of the broadcast channel: its cells take the payload bits as they come',
    'everything else of a carrier: the rest of the slot and all other slots are silent',
    'the 3 dB that the standard lets the primary signal have',
  ],
  fromMemory:
    'the cells of a block (table 7.4.3.1-1), its first symbols (TS 38.213) and the c_init of its reference signals',
  numbers: { fftSize, subcarrierSpacingHz: [30000, 1], symbolCount: slotSymbols },
  content: () => ({
    prefixSamples: firstSlotPrefixes(1, fftSize),
    tray: [
      nullInk,
      dataInk(broadcast, 'Broadcast, QPSK', 'qpsk', 'ts38211'),
      pilotInk(primary, 'Primary (PSS)', primarySignal(cellId)),
      pilotInk(secondary, 'Secondary (SSS)', secondarySignal(cellId)),
      // one sequence runs through the three symbols of a block
      ...firstSymbols.map((_, index) =>
        pilotInk(references + index, `DM-RS, block ${index}`, [
          goldQpsk(broadcastReferenceInit(cellId, index), 'cell'),
        ]),
      ),
    ],
    grid: paintedGrid(fftSize, slotSymbols, inkOf),
    streams: runningPayload(),
  }),
});
