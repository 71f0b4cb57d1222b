import type { BitMap, Constellation, DataInk, Factor, NullInk, PilotInk, Stream } from '@/lib/synth/index';

export const nullInk: NullInk = { inkId: 'k0', name: 'Null', role: 'null', powerDb: 0, value: null };

export const dataInk = (place: number, name: string, constellation: Constellation, bitMap: BitMap): DataInk => ({
  inkId: `k${place}`,
  name,
  role: 'data',
  powerDb: 0,
  value: { constellation, bitMap, streamId: 's0' },
});

export const pilotInk = (place: number, name: string, factors: Factor[], powerDb = 0): PilotInk => ({
  inkId: `k${place}`,
  name,
  role: 'pilot',
  powerDb,
  value: { factors },
});

/** Real values, one after another and round again. */
export const listed = (values: readonly number[]): Factor['sequence'] => ({
  kind: 'listed',
  points: values.map((value) => [value, 0]),
});

const pn15: Stream['source'] = { kind: 'pn', stages: 15, taps: [14, 15], seed: 32767, inverted: true };

/** What a transmitter does: the cells take the next bits of one source, symbol by symbol. */
export const runningPayload = (source: Stream['source'] = pn15): Stream[] => [
  { streamId: 's0', name: 'Payload', source, fill: 'running', acrossRepeats: 'restart' },
];
