import { sineCosineOfFraction } from '@/lib/synth/index';
import { paintedGrid } from '../paintedGrid';
import { standardPreset } from './preset';
import { dataInk, nullInk, pilotInk, runningPayload } from './presetParts';

const fftSize = 256;
const symbolCount = 15;
const highest = 103;

/** Frequency references of mode B: carrier and phase in 1024ths of a turn, alike in every symbol. */
const frequencyPhases = new Map([
  [16, 331],
  [48, 651],
  [64, 555],
]);

/** W, Z and Q of the gain references' phases in mode B, by n = s mod 3 and m = ⌊s/3⌋. */
const turnsW = [
  [512, 0, 512, 0, 512],
  [0, 512, 0, 512, 0],
  [512, 0, 512, 0, 512],
];
const turnsZ = [
  [0, 57, 164, 64, 12],
  [168, 255, 161, 106, 118],
  [25, 232, 132, 233, 38],
];
const turnsQ = 12;

/** Gain references stand at k = 1 + 2·(s mod 3) + 6p. */
const isGainReference = (carrier: number, symbol: number): boolean => (carrier - 1 - 2 * (symbol % 3)) % 6 === 0;

/** The phase of a gain reference in 1024ths of a turn: 4Z + pW + p²(1 + s)Q. */
export function gainPhase(carrier: number, symbol: number): number {
  const n = symbol % 3;
  const m = Math.floor(symbol / 3);
  const p = (carrier - 1 - 2 * n) / 6;
  const turns = 4 * turnsZ[n]![m]! + p * turnsW[n]![m]! + p * p * (1 + symbol) * turnsQ;
  return ((turns % 1024) + 1024) % 1024;
}

function point(amplitude: number, phase: number): [number, number] {
  const { cosine, sine } = sineCosineOfFraction(phase, 1024);
  return [amplitude * cosine, amplitude * sine];
}

/** Amplitude √2; 2 at the four that stand outermost. */
const gainAmplitude = (carrier: number): number => (Math.abs(carrier) >= highest - 2 ? 2 : Math.SQRT2);

const places = { data: 1, gain: 2, frequency: 3 };

function inkOf(carrier: number, symbol: number): number {
  if (carrier === 0 || Math.abs(carrier) > highest) return 0;
  if (frequencyPhases.has(carrier)) return places.frequency;
  return isGainReference(carrier, symbol) ? places.gain : places.data;
}

function gainReferences(): [number, number][] {
  const values: [number, number][] = [];
  for (let symbol = 0; symbol < symbolCount; symbol += 1)
    for (let carrier = -highest; carrier <= highest; carrier += 1)
      if (inkOf(carrier, symbol) === places.gain)
        values.push(point(gainAmplitude(carrier), gainPhase(carrier, symbol)));
  return values;
}

export const es201980ModeB = standardPreset({
  presetId: 'es201980-mode-b',
  title: 'Digital shortwave, mode B, 10 kHz',
  basedOn: 'ETSI ES 201 980, 8.2 OFDM parameters, 8.4 pilot cells, robustness mode B, spectrum occupancy 3',
  holds:
    'One frame of 400 ms: 15 symbols of 206 carriers, 375/8 Hz apart, DC bare, with a prefix of 64 of 320 samples at 12 kS/s, gain references at √2 (2 at the edges) and three frequency references at √2.',
  leftOut: [
    'the time references of the first symbol: their cells carry data',
    'the fast access and the service description channel: their cells carry data',
    "energy dispersal, coding, interleaving and the standard's own bit map of 64-QAM",
    'frames 2 and 3 of a super frame, which have the same references',
  ],
  fromMemory: 'all numbers; the frequency references come out as tones of 750, 2250 and 3000 Hz that run on',
  numbers: { fftSize, subcarrierSpacingHz: [375, 8], symbolCount },
  content: () => ({
    prefixSamples: [64],
    tray: [
      nullInk,
      dataInk(places.data, 'Data, 64-QAM', '64qam', 'ts38211'),
      pilotInk(places.gain, 'Gain references', [
        { sequence: { kind: 'listed', points: gainReferences() }, counter: 'cell', start: 0 },
      ]),
      pilotInk(places.frequency, 'Frequency references', [
        {
          sequence: { kind: 'listed', points: [...frequencyPhases.values()].map((phase) => point(Math.SQRT2, phase)) },
          counter: 'symbolCell',
          start: 0,
        },
      ]),
    ],
    grid: paintedGrid(fftSize, symbolCount, inkOf, (symbol) => symbol % 3),
    streams: runningPayload(),
  }),
});
