import type { Constellation, Factor, Fraction } from '@/lib/synth/index';
import { paintedGrid } from '../paintedGrid';
import { pilotPolarity } from './ieee80211';
import { standardPreset } from './preset';
import { dataInk, listed, nullInk, pilotInk, runningPayload } from './presetParts';

const symbolCount = 16;

/**
 * Pilot m of data symbol n carries Ψ at (m + n) mod P: the base values move on by one pilot in each symbol. As a list by
 * the ink's cell number P·n + m that is P² values, one turn in P symbols.
 */
function turningPilots(base: readonly number[]): Factor {
  const count = base.length;
  const values = Array.from({ length: count * count }, (_, cell) => base[(Math.floor(cell / count) + cell) % count]!);
  return { sequence: listed(values), counter: 'cell', start: 0 };
}

interface WidePlan {
  presetId: string;
  title: string;
  basedOn: string;
  fftSize: number;
  subcarrierSpacingHz: Fraction;
  prefix: number;
  /** |k| of the lowest and the highest used subcarrier, and of the pilots. */
  used: [number, number];
  pilots: readonly number[];
  base: readonly number[];
  /** Symbols of the head that use up p_0, p_1 … before the data. */
  before: number;
  constellation: Constellation;
  constellationName: string;
  turned: string | null;
  head: string;
  remembered: string;
}

function widePreset(plan: WidePlan) {
  const { fftSize, subcarrierSpacingHz, used, prefix } = plan;
  const pilots = new Set(plan.pilots);
  const dataCount = 2 * (used[1] - used[0] + 1 - plan.pilots.length);
  const megasamples = (fftSize * subcarrierSpacingHz[0]) / subcarrierSpacingHz[1] / 1e6;
  return standardPreset({
    presetId: plan.presetId,
    title: plan.title,
    basedOn: plan.basedOn,
    holds: `16 data symbols of ${dataCount} data and ${2 * pilots.size} pilot subcarriers, ${subcarrierSpacingHz[0] / 1000} kHz apart, one spatial stream, with a prefix of ${prefix} of ${fftSize + prefix} samples at ${megasamples} MS/s.`,
    leftOut: [
      plan.head,
      'scrambling, coding, parsing and interleaving: the payload bits go to the cells as they come',
      ...(plan.turned === null ? [] : [plan.turned]),
      'more than one spatial stream; the window of the symbol borders',
    ],
    fromMemory: plan.remembered,
    numbers: { fftSize, subcarrierSpacingHz, symbolCount },
    content: () => ({
      prefixSamples: [prefix],
      tray: [
        nullInk,
        dataInk(1, `Data, ${plan.constellationName}`, plan.constellation, 'ieee80211'),
        pilotInk(2, 'Pilots', [turningPilots(plan.base), pilotPolarity(plan.before)]),
      ],
      grid: paintedGrid(
        fftSize,
        symbolCount,
        (subcarrier) => {
          const distance = Math.abs(subcarrier);
          if (distance < used[0] || distance > used[1]) return 0;
          return pilots.has(distance) ? 2 : 1;
        },
        () => 0,
      ),
      streams: runningPayload(),
    }),
  });
}

const eightPilots = [1, 1, 1, -1, -1, 1, 1, 1];

export const ieee80211At40MHz = widePreset({
  presetId: 'ieee80211-40mhz',
  title: 'High throughput PHY at 40 MHz',
  basedOn:
    'IEEE Std 802.11-2020, clause 19 (HT PHY): 19.3.6 timing, 19.3.11.10 pilots, mixed format, long guard interval',
  fftSize: 128,
  subcarrierSpacingHz: [312500, 1],
  prefix: 32,
  used: [2, 58],
  pilots: [11, 25, 53],
  base: [1, 1, 1, -1, -1, 1],
  before: 3,
  constellation: '64qam',
  constellationName: '64-QAM',
  turned: 'the quarter turn of the upper 20 MHz, which data cells cannot take',
  head: 'the training and the SIGNAL fields of both formats',
  remembered: 'all numbers but the polarity p_n and the map',
});

export const ieee80211At80MHz = widePreset({
  presetId: 'ieee80211-80mhz',
  title: 'Very high throughput PHY at 80 MHz',
  basedOn: 'IEEE Std 802.11-2020, clause 21 (VHT PHY): 21.3.6 timing, 21.3.10.10 pilots, long guard interval',
  fftSize: 256,
  subcarrierSpacingHz: [312500, 1],
  prefix: 64,
  used: [2, 122],
  pilots: [11, 39, 75, 103],
  base: eightPilots,
  before: 4,
  constellation: '256qam',
  constellationName: '256-QAM',
  turned: 'the change of sign of three of the four 20 MHz parts, which data cells cannot take',
  head: 'the training and the SIGNAL fields',
  remembered: 'all numbers but the polarity p_n',
});

export const ieee80211HighEfficiency = widePreset({
  presetId: 'ieee80211-78khz',
  title: 'High efficiency PHY, 242 subcarriers',
  basedOn:
    'IEEE Std 802.11ax-2021, clause 27 (HE PHY): 27.3.9 timing, 27.3.12.13 pilots, single user at 20 MHz, 0.8 µs guard interval',
  fftSize: 256,
  subcarrierSpacingHz: [78125, 1],
  prefix: 16,
  used: [2, 122],
  pilots: [22, 48, 90, 116],
  base: eightPilots,
  before: 4,
  constellation: '1024qam',
  constellationName: '1024-QAM',
  turned: null,
  head: 'the training and the SIGNAL fields, which are 312.5 kHz apart in part',
  remembered: 'all numbers but the polarity p_n',
});
