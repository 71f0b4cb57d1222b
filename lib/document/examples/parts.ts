import type { DataInk, Factor, Ink, PilotInk, Sequence, Stream } from '@/lib/synth/index';

/** Short spellings for the examples: an ink's or stream's id is its place, given by the list functions below. */
type Unplaced<T> = T extends unknown ? Omit<T, 'inkId'> : never;

export function tray(...inks: Unplaced<Ink>[]): Ink[] {
  const bare: Unplaced<Ink> = { name: 'Null', role: 'null', powerDb: 0, value: null };
  return [bare, ...inks].map((ink, at) => ({ inkId: `k${at}`, ...ink }));
}

export function data(name: string, value: DataInk['value'], powerDb = 0): Unplaced<DataInk> {
  return { name, role: 'data', powerDb, value };
}

export function pilot(name: string, factors: Factor[], powerDb = 0): Unplaced<PilotInk> {
  return { name, role: 'pilot', powerDb, value: { factors } };
}

export const factor = (sequence: Sequence, counter: Factor['counter'] = 'symbolCell', start = 0): Factor => ({
  sequence,
  counter,
  start,
});

export function streams(...list: Omit<Stream, 'streamId'>[]): Stream[] {
  return list.map((stream, at) => ({ streamId: `s${at}`, ...stream }));
}

export const pn9 = { kind: 'pn' as const, stages: 9, taps: [5, 9], seed: 511, inverted: false } satisfies Sequence;
export const pn23 = {
  kind: 'pn' as const,
  stages: 23,
  taps: [18, 23],
  seed: 8388607,
  inverted: true,
} satisfies Sequence;
