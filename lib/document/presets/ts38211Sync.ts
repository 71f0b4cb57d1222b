import type { Factor } from '@/lib/synth/index';
import { paintedGrid } from '../paintedGrid';
import { standardPreset } from './preset';
import { dataInk, nullInk, pilotInk, runningPayload } from './presetParts';
import { firstSlotPrefixes } from './ts38211';

const fftSize = 256;
const symbolCount = 14;
const cellId = 500;
/** The first symbols of the blocks of a slot at 30 kHz, case C (TS 38.213, 4.1). */
const blockStarts = [2, 8];
const blockSubcarriers = 240;

const register = (taps: number[], seed: number, start: number): Factor => ({
  sequence: { kind: 'pn', stages: 7, taps, seed, inverted: false },
  counter: 'symbolCell',
  start,
});

/** PSS (7.4.2.2.1): 1 − 2x(n + 43·N2), x(i + 7) = x(i + 4) + x(i), begun with x6…x0 = 1110110. */
export const primarySignal = (cell: number): Factor[] => [register([3, 7], 0b1110110, 43 * (cell % 3))];

/** SSS (7.4.2.3.1): two such registers begun with 0000001, shifted by m0 and m1. */
export function secondarySignal(cell: number): Factor[] {
  const first = Math.floor(cell / 3);
  return [register([3, 7], 1, 15 * Math.floor(first / 112) + 5 * (cell % 3)), register([6, 7], 1, first % 112)];
}

/** c_init of the broadcast channel's DM-RS (7.4.1.4.1) of block `block` of the first half frame. */
export const broadcastReferenceInit = (cell: number, block: number): number =>
  2048 * (block + 1) * (Math.floor(cell / 4) + 1) + 64 * (block + 1) + (cell % 4);

const places = { broadcast: 1, primary: 2, secondary: 3, reference: 4 };

/** The ink at subcarrier 0…239 and symbol 0…3 of a block (table 7.4.3.1-1); 0: set to zero. */
function inkInBlock(subcarrier: number, symbol: number, block: number): number {
  const isMiddle = subcarrier >= 56 && subcarrier <= 182;
  if (symbol === 0) return isMiddle ? places.primary : 0;
  if (symbol === 2) {
    if (isMiddle) return places.secondary;
    if (subcarrier >= 48 && subcarrier < 192) return 0;
  }
  return subcarrier % 4 === cellId % 4 ? places.reference + block : places.broadcast;
}

function inkOf(subcarrier: number, symbol: number): number {
  const inBlock = subcarrier + blockSubcarriers / 2;
  const block = blockStarts.findIndex((start) => symbol >= start && symbol < start + 4);
  if (block < 0 || inBlock < 0 || inBlock >= blockSubcarriers) return 0;
  return inkInBlock(inBlock, symbol - blockStarts[block]!, block);
}

export const ts38211SyncBlock = standardPreset({
  presetId: 'ts38211-sync-block',
  title: 'Sync blocks, 30 kHz',
  basedOn:
    '3GPP TS 38.211, 7.4.2 synchronization signals, 7.4.3 SS/PBCH block, 7.4.1.4 its reference signals; TS 38.213, 4.1, case C',
  holds: `One slot with two SS/PBCH blocks of 240 subcarriers by 4 symbols, from symbols 2 and 8, of cell identity ${cellId}.`,
  remark: `Cell identity ${cellId} is invented. Looks like a base station: use it on cable only.`,
  leftOut: [
    'coding and scrambling of the broadcast channel: its cells carry the payload bits as they come',
    'all other channels and the other slots: the rest of the slot is silent',
    'a boost of the primary signal, which the standard permits (0 or 3 dB)',
  ],
  fromMemory:
    "the cells of a block (table 7.4.3.1-1), its first symbols (TS 38.213) and the c_init of the broadcast channel's reference signals",
  numbers: { fftSize, subcarrierSpacingHz: [30000, 1], symbolCount },
  content: () => ({
    prefixSamples: firstSlotPrefixes(1, fftSize),
    tray: [
      nullInk,
      dataInk(places.broadcast, 'Broadcast, QPSK', 'qpsk', 'ts38211'),
      pilotInk(places.primary, 'Primary (PSS)', primarySignal(cellId)),
      pilotInk(places.secondary, 'Secondary (SSS)', secondarySignal(cellId)),
      // one sequence through the three symbols of a block, so the ink's own cells are counted
      ...blockStarts.map((_start, block) =>
        pilotInk(places.reference + block, `DM-RS, block ${block}`, [
          {
            sequence: { kind: 'gold', cInit: broadcastReferenceInit(cellId, block), points: 'qpsk' },
            counter: 'cell',
            start: 0,
          },
        ]),
      ),
    ],
    grid: paintedGrid(fftSize, symbolCount, inkOf),
    streams: runningPayload(),
  }),
});
