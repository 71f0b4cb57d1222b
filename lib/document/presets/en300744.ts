import type { Factor, Fraction } from '@/lib/synth/index';
import { paintedGrid } from '../paintedGrid';
import { standardPreset, type Preset } from './preset';
import { dataInk, nullInk, pilotInk, runningPayload } from './presetParts';

/** One frame (4.4). */
const symbolCount = 68;
/** The lists of 2K repeat every 1704 carriers in 8K. */
const listPeriod = 1704;

/** Continual pilots of 2K (4.5.4, table 7). */
const continual2k = [
  0, 48, 54, 87, 141, 156, 192, 201, 255, 279, 282, 333, 432, 450, 483, 525, 531, 618, 636, 714, 759, 765, 780, 804,
  873, 888, 918, 939, 942, 969, 984, 1050, 1101, 1107, 1110, 1137, 1140, 1146, 1206, 1269, 1323, 1377, 1491, 1683, 1704,
];
/** Carriers of transmission parameter signalling of 2K (4.6, table 8). */
const parameters2k = [34, 50, 209, 346, 413, 569, 595, 688, 790, 901, 1073, 1219, 1262, 1286, 1469, 1594, 1687];

/** A list of 2K over all of the carriers 0…last. */
function everyPeriod(list: readonly number[], last: number): Set<number> {
  const all = new Set<number>();
  for (let from = 0; from < last; from += listPeriod) for (const carrier of list) all.add(from + carrier);
  return all;
}

const places = { data: 1, scattered: 2, continual: 3, parameters: 4 };

interface Mode {
  name: '2K' | '8K';
  fftSize: number;
  carriers: number;
  subcarrierSpacingHz: Fraction;
  guard: string;
  prefix: number;
}

function mode({ name, fftSize, carriers, subcarrierSpacingHz, guard, prefix }: Mode): Preset {
  const last = carriers - 1;
  // carrier 0 is the lowest: the standard's centre carrier, last/2, is our k = 0
  const middle = last / 2;
  // 1 − 2w of the register of 4.5.2, which begins with ones at carrier 0 of every symbol
  const reference: Factor = {
    sequence: { kind: 'pn', stages: 11, taps: [9, 11], seed: 2047, inverted: false },
    counter: 'subcarrier',
    start: middle - fftSize / 2,
  };
  const boost: Factor = { sequence: { kind: 'listed', points: [[4 / 3, 0]] }, counter: 'symbolCell', start: 0 };
  return standardPreset({
    presetId: `en300744-${name.toLowerCase()}`,
    title: `Terrestrial video ${name}, 8 MHz, guard ${guard}`,
    basedOn:
      'ETSI EN 300 744, 4.3.5 maps, 4.4 OFDM frame, 4.5 reference signals, 4.6 signalling carriers, 8 MHz channel',
    holds: `One frame of 68 symbols and ${carriers} carriers, ${subcarrierSpacingHz.join('/')} Hz apart, at 64/7 MS/s, with continual and scattered pilots at 4/3 of the data's amplitude.`,
    remark: 'The scattered pilots repeat after 4 symbols.',
    leftOut: [
      'the message of the signalling carriers: they keep their first value w_k and are never turned',
      'energy dispersal, coding and interleaving: the payload bits go to the cells as they come',
      'hierarchical maps; frames 2 to 4 of a super frame, which differ in the message alone',
    ],
    fromMemory: 'the map of 64-QAM and the sizes of tables 4 and 5 but 1705, 6817 and the spacing',
    numbers: { fftSize, subcarrierSpacingHz, symbolCount },
    content: () => {
      const continual = everyPeriod(continual2k, last);
      const parameters = everyPeriod(parameters2k, last);
      const inkOf = (subcarrier: number, symbol: number): number => {
        const carrier = subcarrier + middle;
        if (carrier < 0 || carrier > last) return 0;
        if (continual.has(carrier)) return places.continual;
        if (carrier % 12 === 3 * (symbol % 4)) return places.scattered;
        return parameters.has(carrier) ? places.parameters : places.data;
      };
      return {
        prefixSamples: [prefix],
        tray: [
          nullInk,
          dataInk(places.data, 'Data, 64-QAM', '64qam', 'en300744'),
          pilotInk(places.scattered, 'Scattered pilots', [reference, boost]),
          pilotInk(places.continual, 'Continual pilots', [reference, boost]),
          pilotInk(places.parameters, 'Signalling', [reference]),
        ],
        grid: paintedGrid(fftSize, symbolCount, inkOf, (symbol) => symbol % 4),
        streams: runningPayload(),
      };
    },
  });
}

export const en300744Presets: readonly Preset[] = [
  mode({ name: '2K', fftSize: 2048, carriers: 1705, subcarrierSpacingHz: [31250, 7], guard: '1/32', prefix: 64 }),
  mode({ name: '8K', fftSize: 8192, carriers: 6817, subcarrierSpacingHz: [15625, 14], guard: '1/4', prefix: 2048 }),
];
