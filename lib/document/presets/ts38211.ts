import type { Factor, Ink } from '@/lib/synth/index';
import { paintedGrid } from '../paintedGrid';
import { standardPreset, type Preset } from './preset';
import { dataInk, nullInk, pilotInk, runningPayload } from './presetParts';

const slotSymbols = 14;
/** Symbols of half a subframe at 15 kHz; each step of the numerology doubles them. */
const halfSubframeSymbols = 7;
const scramblingId = 77;
const dataPlace = 1;

/**
 * Prefixes of the first slot of a frame, in samples of an N-point transform. TS 38.211, 5.3.1, in units of κ·T_c: the useful
 * part is 2048·2^−µ, the prefix 144·2^−µ, and 16 more in the first symbol of each half subframe. Written as the shortest list
 * that repeats.
 */
export function firstSlotPrefixes(numerology: number, fftSize: number): number[] {
  const samplesPerUnit = (fftSize * 2 ** numerology) / 2048;
  const perHalf = halfSubframeSymbols * 2 ** numerology;
  return Array.from({ length: Math.min(perHalf, slotSymbols) }, (_, symbol) => {
    const units = 144 / 2 ** numerology + (symbol === 0 ? 16 : 0);
    return units * samplesPerUnit;
  });
}

/** QPSK of a Gold sequence, counted by `counter` from its first value on. */
export const goldQpsk = (cInit: number, counter: Factor['counter']): Factor => ({
  sequence: { kind: 'gold', cInit, points: 'qpsk' },
  counter,
  start: 0,
});

/** c_init = (2^17·(14·n_s + l + 1)·(2·N_ID + 1) + 2·N_ID + n_SCID) mod 2^31 with n_SCID = 0 (7.4.1.1.1 down, 6.4.1.1.1.1 up). */
export function dataReferenceInit(scrambling: number, slot: number, symbol: number): number {
  const identity = 2 * scrambling;
  const symbolNumber = slotSymbols * slot + symbol + 1;
  return (symbolNumber * (identity + 1) * 2 ** 17 + identity) % 2 ** 31;
}

interface Carrier {
  numerology: 0 | 1 | 2;
  bandwidth: string;
  resourceBlocks: number;
  fftSize: number;
  /** One letter a symbol: `d` data, `r` DM-RS with data between, `R` DM-RS with nothing between and 3 dB more. */
  slot: string;
}

/** What differs between the two shared channels. */
const directions = {
  PDSCH: {
    name: 'Downlink',
    clause: '7.4.1.1',
    leftOut: 'the sync block, control channels, CSI-RS and tracking signals: the data channel has the whole slot',
  },
  PUSCH: {
    name: 'Uplink',
    clause: '6.4.1.1',
    leftOut: 'control channels, sounding signals, transform precoding and frequency hopping',
  },
};

function sharedChannelSlot(channel: keyof typeof directions, carrier: Carrier): Preset {
  const { numerology, bandwidth, resourceBlocks, fftSize, slot } = carrier;
  const { name, clause, leftOut } = directions[channel];
  const kilohertz = 15 * 2 ** numerology;
  const subcarriers = 12 * resourceBlocks;
  const references = [...slot].flatMap((letter, symbol) => (letter === 'd' ? [] : [symbol]));
  const isAlone = slot.includes('R');

  const referenceInk = (symbol: number, order: number): Ink =>
    pilotInk(
      dataPlace + 1 + order,
      `DM-RS, symbol ${symbol}`,
      [goldQpsk(dataReferenceInit(scramblingId, 0, symbol), 'symbolCell')],
      isAlone ? 3 : 0, // β of two code groups without data (TS 38.214, 4.1 and 6.2.2)
    );

  function inkOf(subcarrier: number, symbol: number): number {
    const fromLowest = subcarrier + subcarriers / 2;
    if (fromLowest < 0 || fromLowest >= subcarriers) return 0;
    const order = references.indexOf(symbol);
    if (order < 0) return dataPlace;
    // type 1, code group 0: every second subcarrier, from the lowest of common resource block 0 on
    if (fromLowest % 2 === 0) return dataPlace + 1 + order;
    return isAlone ? 0 : dataPlace;
  }

  return standardPreset({
    presetId: `ts38211-${kilohertz}khz`,
    title: `${name} slot, ${kilohertz} kHz, ${bandwidth}`,
    basedOn: `3GPP TS 38.211, 4.3.2 slots, 5.3.1 OFDM generation, ${clause} demodulation reference signals of the ${channel}, type 1`,
    holds: `One slot of ${subcarriers} subcarriers, ${kilohertz} kHz apart; single-symbol DM-RS in symbols ${references.join(', ')} ${isAlone ? 'with nothing between them, 3 dB above the data' : 'with data between them'}.`,
    remark: `Scrambling identity ${scramblingId} is invented; the carrier begins at common resource block 0, the slot is number 0. Use it on cable only.`,
    leftOut: [
      leftOut,
      'scrambling, coding and precoding; phase tracking; ports and code groups but the first',
      'the other slots of the frame: slot 0 is what a loop repeats',
    ],
    fromMemory: `the blocks of the bandwidth (TS 38.101-1), the DM-RS’ cells and c_init${isAlone ? ' and their 3 dB (TS 38.214)' : ''}`,
    numbers: { fftSize, subcarrierSpacingHz: [kilohertz * 1000, 1], symbolCount: slotSymbols },
    content: () => ({
      prefixSamples: firstSlotPrefixes(numerology, fftSize),
      tray: [nullInk, dataInk(dataPlace, 'Data, 256-QAM', '256qam', 'ts38211'), ...references.map(referenceInk)],
      grid: paintedGrid(fftSize, slotSymbols, inkOf, (symbol) => (references.includes(symbol) ? symbol : 0)),
      streams: runningPayload(),
    }),
  });
}

/** DM-RS places: mapping type A from symbol 2, 14 symbols, one or two more positions (tables 7.4.1.1.2-3 and 6.4.1.1.3-3). */
export const ts38211Slots: readonly Preset[] = [
  sharedChannelSlot('PDSCH', {
    numerology: 0,
    bandwidth: '20 MHz',
    resourceBlocks: 106,
    fftSize: 2048,
    slot: 'ddrddddddddrdd',
  }),
  sharedChannelSlot('PDSCH', {
    numerology: 1,
    bandwidth: '100 MHz',
    resourceBlocks: 273,
    fftSize: 4096,
    slot: 'ddrddddrdddrdd',
  }),
  sharedChannelSlot('PUSCH', {
    numerology: 2,
    bandwidth: '40 MHz',
    resourceBlocks: 51,
    fftSize: 1024,
    slot: 'ddRddddddddRdd',
  }),
];
