import type { BitMap, Constellation, DataInk, Sequence, WaveformDocument } from '@/lib/synth/index';
import { bitMapsOf, constellations } from '../inkSchema';
import { emptyDocument, newIntent } from '../newDocument';
import { paintedGrid } from '../paintedGrid';
import { data, factor, pilot, pn23, pn9, streams, tray } from './parts';

/** A data frame with a shifted pilot comb and a boosted continual pilot; anchored payload, so an edit stays local. */
export function pilotComb(): WaveformDocument {
  const inkOf = (subcarrier: number, symbol: number): number => {
    if (subcarrier === 0 || Math.abs(subcarrier) > 600) return 0;
    if (subcarrier === -600 || subcarrier === 600) return 3;
    const position = subcarrier + 600;
    if (position % 12 === 3 * (symbol % 4)) return 2;
    return 1;
  };
  return emptyDocument({
    title: 'Example: data frame with a shifted pilot comb',
    notes: 'Invented. Every twelfth subcarrier is a pilot, shifted by three from symbol to symbol.',
    content: {
      fftSize: 2048,
      subcarrierSpacingHz: [15000, 1],
      symbolCount: 7,
      prefixSamples: [160, 144, 144, 144, 144, 144, 144],
      overlapSamples: 16,
      tray: tray(
        data('Data', { constellation: '64qam', bitMap: 'ts38211', streamId: 's0' }),
        pilot('Comb', [factor({ kind: 'gold', cInit: 77, points: 'qpsk' }, 'subcarrier')]),
        pilot('Edge, boosted 4/3', [
          factor({ kind: 'listed', points: [[1.3333333333333333, 0]] }, 'cell'),
          factor({ kind: 'alternating' }, 'symbol'),
        ]),
      ),
      grid: paintedGrid(2048, 7, inkOf),
    },
  });
}

/** A burst: preamble, payload, gap and pad, repeats, and the three kinds of marker; what it means at the device is given. */
export function burstWithMarkers(): WaveformDocument {
  const document = emptyDocument({
    title: 'Example: burst with markers',
    notes:
      'Invented. Symbol 0 is a preamble on every fourth subcarrier; markers gate the amplifier and trigger the receiver.',
    content: {
      fftSize: 256,
      subcarrierSpacingHz: [78125, 1],
      symbolCount: 5,
      prefixSamples: [64, 32],
      overlapSamples: 8,
      oversampling: 2,
      timing: { mode: 'burst', repeats: 3, gapSamples: 200, padSamples: 64 },
      tray: tray(
        pilot('Preamble', [factor({ kind: 'zadoffChu', length: 61, root: 25, shift: 0 })], 6),
        data('Data', { constellation: '16qam', bitMap: 'ts38211', streamId: 's0' }),
      ),
      grid: paintedGrid(256, 5, (subcarrier, symbol) => {
        if (subcarrier === 0 || Math.abs(subcarrier) > 122) return 0;
        if (symbol > 0) return 2;
        return subcarrier % 4 === 0 ? 1 : 0;
      }),
      streams: streams({ name: 'Payload', source: pn23, fill: 'running', acrossRepeats: 'continue' }),
      markers: [
        { name: 'Trigger', at: 'file', symbol: null, offsetSamples: 0, lengthSamples: 16 },
        { name: 'Amplifier on', at: 'repeat', symbol: null, offsetSamples: 0, lengthSamples: 3072 },
        { name: 'Symbol', at: 'symbol', symbol: null, offsetSamples: 0, lengthSamples: 8 },
        { name: 'First payload symbol', at: 'symbol', symbol: 1, offsetSamples: -8, lengthSamples: 16 },
      ],
      level: { reference: 'samplePeak', headroomDb: 2 },
    },
  });
  return {
    ...document,
    intent: { ...newIntent(), outputRmsDbm: -20, lossDb: 10, devicePeakLimitDbm: 5, deviceMeanLimitDbm: -5 },
  };
}

const sequences: readonly Sequence[] = [
  { kind: 'constant' },
  { kind: 'alternating' },
  { kind: 'pn', stages: 11, taps: [9, 11], seed: 2047, inverted: true },
  { kind: 'gold', cInit: 12345, points: 'bpsk' },
  { kind: 'gold', cInit: 12345, points: 'qpsk' },
  { kind: 'zadoffChu', length: 139, root: 1, shift: 7 },
  { kind: 'newman', count: 64 },
  { kind: 'schroeder', count: 64 },
  {
    kind: 'listed',
    points: [
      [1, 0],
      [0, 1],
      [-0.6, 0.8],
    ],
  },
];

/** Every constellation with every map, then every sequence, each ink on a subcarrier band or a symbol of its own. */
export function mapsAndSequences(): WaveformDocument {
  const maps = constellations.flatMap((constellation: Constellation) =>
    bitMapsOf(constellation).map((bitMap: BitMap): DataInk['value'] => ({ constellation, bitMap, streamId: 's0' })),
  );
  const inks = [
    ...maps.map((value) => data(`${value.constellation}, ${value.bitMap}`, value)),
    ...sequences.map((sequence, at) =>
      pilot(`Sequence ${at}, ${sequence.kind}`, [factor(sequence, at % 2 === 0 ? 'cell' : 'subcarrier')]),
    ),
  ];
  const inkOf = (subcarrier: number, symbol: number): number => {
    if (subcarrier === 0 || Math.abs(subcarrier) > 200) return 0;
    const group = 1 + Math.floor((subcarrier + 200) / 101) + 4 * symbol;
    return group <= inks.length ? group : 0;
  };
  const symbolCount = Math.ceil(inks.length / 4);
  return emptyDocument({
    title: 'Example: every constellation, map and sequence',
    notes: 'Invented. Each ink has a quarter of one symbol.',
    content: {
      fftSize: 512,
      subcarrierSpacingHz: [30000, 1],
      symbolCount,
      prefixSamples: [36],
      oversampling: 2,
      tray: tray(...inks),
      grid: paintedGrid(512, symbolCount, inkOf),
      streams: streams({ name: 'Payload', source: pn9, fill: 'running', acrossRepeats: 'restart' }),
      level: { reference: 'rms', headroomDb: 14 },
    },
  });
}
