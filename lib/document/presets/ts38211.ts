import { paintedGrid } from '../paintedGrid';
import { standardPreset, type Preset } from './preset';
import { dataInk, nullInk, pilotInk, runningPayload } from './presetParts';

const symbolCount = 14;
const scramblingId = 77;

/** c_init of a data channel's DM-RS with n_SCID 0 and CDM group 0 (TS 38.211, 7.4.1.1.1 down, 6.4.1.1.1.1 up). */
export const dataReferenceInit = (scrambling: number, slot: number, symbol: number): number =>
  (2 ** 17 * (symbolCount * slot + symbol + 1) * (2 * scrambling + 1) + 2 * scrambling) % 2 ** 31;

/** Normal prefixes of the first slot of a frame (5.3.1): the first symbol of each half subframe is 16·2^µ/2048 of N longer. */
export function firstSlotPrefixes(numerology: number, fftSize: number): number[] {
  const usual = (144 * fftSize) / 2048;
  const long = usual + (16 * 2 ** numerology * fftSize) / 2048;
  const halfSubframe = 7 * 2 ** numerology;
  const prefixes = Array.from({ length: symbolCount }, (_, symbol) => (symbol % halfSubframe === 0 ? long : usual));
  return numerology === 0 ? prefixes.slice(0, 7) : prefixes;
}

interface SlotPlan {
  numerology: number;
  megahertz: number;
  blocks: number;
  fftSize: number;
  channel: 'PDSCH' | 'PUSCH';
  /** Without data beside the DM-RS (2 groups) they stand 3 dB above the data (TS 38.214, table 4.1-1 and 6.2.2-1). */
  groupsWithoutData: 1 | 2;
  /** l of the DM-RS: mapping type A, 14 symbols, first at 2 (tables 7.4.1.1.2-3, 6.4.1.1.3-3). */
  referenceSymbols: readonly number[];
}

function slot(plan: SlotPlan): Preset {
  const { numerology, blocks, fftSize, channel, referenceSymbols, groupsWithoutData } = plan;
  const spacingKilohertz = 15 * 2 ** numerology;
  const half = 6 * blocks;
  const [clause, direction] = channel === 'PDSCH' ? ['7.4.1.1', 'Downlink'] : ['6.4.1.1', 'Uplink'];
  const inkOf = (subcarrier: number, symbol: number): number => {
    if (subcarrier < -half || subcarrier >= half) return 0;
    const at = referenceSymbols.indexOf(symbol);
    if (at < 0) return 1;
    // type 1, first port: the even subcarriers of the carrier, which begins at common resource block 0
    if ((subcarrier + half) % 2 === 0) return 2 + at;
    return groupsWithoutData === 2 ? 0 : 1;
  };
  return standardPreset({
    presetId: `ts38211-${spacingKilohertz}khz`,
    title: `${direction} slot, ${spacingKilohertz} kHz, ${plan.megahertz} MHz`,
    basedOn: `3GPP TS 38.211, 4.3.2 slots, 5.3.1 OFDM generation, ${clause} demodulation reference signals of the ${channel}, type 1`,
    holds: `One slot of ${2 * half} subcarriers, ${spacingKilohertz} kHz apart, with single-symbol DM-RS in symbols ${referenceSymbols.join(', ')}${groupsWithoutData === 2 ? ', 3 dB above the data and with nothing between them' : ' and data between them'}.`,
    remark: `Scrambling identity ${scramblingId} is invented; the carrier begins at common resource block 0 and the slot is number 0. Use it on cable only.`,
    leftOut: [
      channel === 'PDSCH'
        ? 'the sync block, control channels, CSI-RS and tracking signals: the data channel has the whole slot'
        : 'control channels, sounding signals, transform precoding and frequency hopping',
      'scrambling, coding and precoding; phase tracking; ports and code groups but the first',
      'the other slots of the frame: slot 0 is what a loop repeats',
    ],
    fromMemory: `the blocks of the bandwidth (TS 38.101-1), the DM-RS' cells and c_init${groupsWithoutData === 2 ? ' and their 3 dB (TS 38.214)' : ''}`,
    numbers: { fftSize, subcarrierSpacingHz: [spacingKilohertz * 1000, 1], symbolCount },
    content: () => ({
      prefixSamples: firstSlotPrefixes(numerology, fftSize),
      tray: [
        nullInk,
        dataInk(1, 'Data, 256-QAM', '256qam', 'ts38211'),
        ...referenceSymbols.map((symbol, at) =>
          pilotInk(
            2 + at,
            `DM-RS, symbol ${symbol}`,
            [
              {
                sequence: { kind: 'gold', cInit: dataReferenceInit(scramblingId, 0, symbol), points: 'qpsk' },
                counter: 'symbolCell',
                start: 0,
              },
            ],
            groupsWithoutData === 2 ? 3 : 0,
          ),
        ),
      ],
      grid: paintedGrid(fftSize, symbolCount, inkOf, (symbol) => (referenceSymbols.includes(symbol) ? symbol : 0)),
      streams: runningPayload(),
    }),
  });
}

export const ts38211Slots: readonly Preset[] = [
  slot({
    numerology: 0,
    megahertz: 20,
    blocks: 106,
    fftSize: 2048,
    channel: 'PDSCH',
    groupsWithoutData: 1,
    referenceSymbols: [2, 11],
  }),
  slot({
    numerology: 1,
    megahertz: 100,
    blocks: 273,
    fftSize: 4096,
    channel: 'PDSCH',
    groupsWithoutData: 1,
    referenceSymbols: [2, 7, 11],
  }),
  slot({
    numerology: 2,
    megahertz: 40,
    blocks: 51,
    fftSize: 1024,
    channel: 'PUSCH',
    groupsWithoutData: 2,
    referenceSymbols: [2, 11],
  }),
];
