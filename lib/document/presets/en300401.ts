import { paintedGrid } from '../paintedGrid';
import { standardPreset } from './preset';
import { dataInk, nullInk, pilotInk, runningPayload } from './presetParts';

const fftSize = 2048;
const guard = 504;
const nullSamples = 2656;
const half = 768;
const blockLength = 32;

/** h_(0,j) (14.3.2, table of h): the other rows are h_(i,j) = h_(0,j) + i·j, all modulo 4, and 32 values are 16 twice. */
const firstRow = [0, 2, 0, 0, 0, 0, 1, 1, 2, 0, 0, 0, 2, 2, 1, 1];

/** n of each block of 32 carriers of mode I, from −768 and from 1 upwards (14.3.2, table of k′, i and n). */
const turnsBelow = [1, 2, 0, 1, 3, 2, 2, 3, 2, 1, 2, 3, 1, 2, 3, 3, 2, 2, 2, 1, 1, 3, 1, 2];
const turnsAbove = [3, 1, 1, 1, 2, 2, 1, 0, 2, 2, 3, 3, 0, 2, 1, 3, 3, 3, 3, 0, 3, 0, 1, 1];

const quarterTurns: [number, number][] = [
  [1, 0],
  [0, 1],
  [-1, 0],
  [0, -1],
];

/** The phase reference symbol's 1536 values, carriers upwards: quarter turns h_(i, k − k′) + n. */
export function phaseReference(): [number, number][] {
  const values: [number, number][] = [];
  const addBlock = (row: number, turns: number) => {
    for (let j = 0; j < blockLength; j += 1)
      values.push([...quarterTurns[(firstRow[j % firstRow.length]! + row * j + turns) % 4]!]);
  };
  turnsBelow.forEach((turns, block) => addBlock(block % 4, turns));
  turnsAbove.forEach((turns, block) => addBlock((4 - (block % 4)) % 4, turns));
  return values;
}

export const en300401ModeI = standardPreset({
  presetId: 'en300401-mode-i',
  title: 'Digital audio, mode I',
  basedOn: 'ETSI EN 300 401, 14.2 transmission frame, 14.3.1 null symbol, 14.3.2 phase reference symbol, mode I',
  holds:
    'One frame of 96 ms: the null symbol of 2656 samples, then 76 symbols of 1536 carriers, 1 kHz apart, with a prefix of 504 of 2552 samples at 2.048 MS/s.',
  remark:
    'The null symbol is symbol 0 with the first prefix, 608, and nothing painted; the phase reference is symbol 1.',
  leftOut: [
    'differential modulation: a data cell takes a QPSK point of its own, not a turn from the symbol before',
    'energy dispersal, coding, time and frequency interleaving and what the first three data symbols signal',
    "the transmitter's mark that a null symbol may carry",
  ],
  fromMemory: 'all numbers; they add up to 196 608 samples, and the rows of h follow from the first by one rule',
  numbers: { fftSize, subcarrierSpacingHz: [1000, 1], symbolCount: 77 },
  content: () => ({
    prefixSamples: Array.from({ length: 77 }, (_, symbol) => (symbol === 0 ? nullSamples - fftSize : guard)),
    tray: [
      nullInk,
      dataInk(1, 'Data, QPSK', 'qpsk', 'ts38211'),
      pilotInk(2, 'Phase reference', [
        { sequence: { kind: 'listed', points: phaseReference() }, counter: 'symbolCell', start: 0 },
      ]),
    ],
    grid: paintedGrid(
      fftSize,
      77,
      (subcarrier, symbol) => {
        if (symbol === 0 || subcarrier === 0 || Math.abs(subcarrier) > half) return 0;
        return symbol === 1 ? 2 : 1;
      },
      (symbol) => Math.min(symbol, 2),
    ),
    streams: runningPayload(),
  }),
});
