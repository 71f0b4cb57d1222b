import type { Constellation, Factor, Fraction } from '@/lib/synth/index';
import { countsOf, dataSymbols, mirroredBand, pilotPolarity, type HalfBand } from './ieee80211';
import { standardPreset, type Preset } from './preset';
import { dataInk, listed, nullInk, pilotInk, runningPayload } from './presetParts';

/** Values that take one step to the left from symbol to symbol: each rotation once, counted by the ink's cells. */
const rotating = (values: readonly number[]): Factor => ({
  sequence: listed(values.flatMap((_, turn) => [...values.slice(turn), ...values.slice(0, turn)])),
  counter: 'cell',
  start: 0,
});

const sixPilots = [1, 1, 1, -1, -1, 1];
const eightPilots = [1, 1, 1, -1, -1, 1, 1, 1];

interface Phy {
  presetId: string;
  title: string;
  basedOn: string;
  fftSize: number;
  subcarrierSpacingHz: Fraction;
  /** The guard interval is 0.8 µs in all three. */
  guardSamples: number;
  band: HalfBand;
  pilotValues: readonly number[];
  /** OFDM symbols before the data that have pilots: each takes a polarity. */
  symbolsBefore: number;
  data: [Constellation, string];
  before: string;
  /** What the clause does to parts of the band and data cells have no way to say. */
  turns?: string;
  notCompared: string;
}

function phy(of: Phy): Preset {
  const { fftSize, guardSamples, subcarrierSpacingHz, band } = of;
  const [constellation, constellationName] = of.data;
  const counts = countsOf(band);
  const spacingHz = subcarrierSpacingHz[0] / subcarrierSpacingHz[1];
  return standardPreset({
    presetId: of.presetId,
    title: of.title,
    basedOn: of.basedOn,
    holds: `16 data symbols of one spatial stream at ${(fftSize * spacingHz) / 1e6} MS/s, ${counts.data} data and ${counts.pilots} pilot subcarriers in each, ${spacingHz / 1e3} kHz apart; ${guardSamples} of a symbol’s ${fftSize + guardSamples} samples are its prefix.`,
    leftOut: [
      of.before,
      'scrambler, code, parser and interleaver: the payload bits are mapped as they come',
      ...(of.turns === undefined ? [] : [of.turns]),
      'further spatial streams; windowed borders: the overlap is 0',
    ],
    fromMemory: of.notCompared,
    numbers: { fftSize, subcarrierSpacingHz, symbolCount: dataSymbols },
    content: () => ({
      prefixSamples: [guardSamples],
      tray: [
        nullInk,
        dataInk(1, `Data, ${constellationName}`, constellation, 'ieee80211'),
        pilotInk(2, 'Pilots', [rotating(of.pilotValues), pilotPolarity(of.symbolsBefore)]),
      ],
      grid: mirroredBand(fftSize, band),
      streams: runningPayload(),
    }),
  });
}

/** Clause 19: k = 2…10, pilot 11, 12…24, pilot 25, 26…52, pilot 53, 54…58; SIGNAL and two HT-SIG symbols come before. */
export const ieee80211At40MHz = phy({
  presetId: 'ieee80211-40mhz',
  title: 'High throughput PHY at 40 MHz',
  basedOn:
    'IEEE Std 802.11-2020, clause 19 (HT PHY): 19.3.6 timing, 19.3.11.10 pilots, mixed format, long guard interval',
  fftSize: 128,
  subcarrierSpacingHz: [312500, 1],
  guardSamples: 32,
  band: { bare: 2, data: [9, 13, 27, 5] },
  pilotValues: sixPilots,
  symbolsBefore: 3,
  data: ['64qam', '64-QAM'],
  before: 'what comes before the data: training and SIGNAL fields of both formats',
  turns: 'the quarter turn of the upper 20 MHz: data cells have no turn of their own',
  notCompared: 'all numbers but the polarity p_n and the map',
});

/** Clause 21: k = 2…10, pilot 11, 12…38, pilot 39, 40…74, pilot 75, 76…102, pilot 103, 104…122; four SIG symbols come before. */
export const ieee80211At80MHz = phy({
  presetId: 'ieee80211-80mhz',
  title: 'Very high throughput PHY at 80 MHz',
  basedOn: 'IEEE Std 802.11-2020, clause 21 (VHT PHY): 21.3.6 timing, 21.3.10.10 pilots, long guard interval',
  fftSize: 256,
  subcarrierSpacingHz: [312500, 1],
  guardSamples: 64,
  band: { bare: 2, data: [9, 27, 35, 27, 19] },
  pilotValues: eightPilots,
  symbolsBefore: 4,
  data: ['256qam', '256-QAM'],
  before: 'what comes before the data: training and SIGNAL fields',
  turns: 'the opposite sign of the three upper 20 MHz parts: data cells have no sign of their own',
  notCompared: 'all numbers but the polarity p_n',
});

/** Clause 27, resource unit of 242: k = 2…21, pilot 22, 23…47, pilot 48, 49…89, pilot 90, 91…115, pilot 116, 117…122. */
export const ieee80211HighEfficiency = phy({
  presetId: 'ieee80211-78khz',
  title: 'High efficiency PHY, 242 subcarriers',
  basedOn:
    'IEEE Std 802.11ax-2021, clause 27 (HE PHY): 27.3.9 timing, 27.3.12.13 pilots, single user at 20 MHz, 0.8 µs guard interval',
  fftSize: 256,
  subcarrierSpacingHz: [78125, 1],
  guardSamples: 16,
  band: { bare: 2, data: [20, 25, 41, 25, 6] },
  pilotValues: eightPilots,
  symbolsBefore: 4,
  data: ['1024qam', '1024-QAM'],
  before: 'what comes before the data: training and SIGNAL fields, part of them 312.5 kHz apart',
  notCompared: 'all numbers but the polarity p_n',
});
