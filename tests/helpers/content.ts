import type { DataValue, Factor, Ink, Sequence, Stream, WaveformContent } from '@/lib/synth';

export const NULL_INK: Ink = { inkId: 'k0', name: 'null', role: 'null', powerDb: 0, value: null };

/** A data ink at place `place` of a tray. */
export function dataInk(place: number, value: DataValue, powerDb = 0): Ink {
  return { inkId: `k${place}`, name: `data ${place}`, role: 'data', powerDb, value };
}

export function pilotInk(place: number, factors: Factor[], powerDb = 0): Ink {
  return { inkId: `k${place}`, name: `pilot ${place}`, role: 'pilot', powerDb, value: { factors } };
}

export function factor(sequence: Sequence, counter: Factor['counter'] = 'symbolCell', start = 0): Factor {
  return { sequence, counter, start };
}

export function pnStream(place: number, changes: Partial<Stream> = {}): Stream {
  return {
    streamId: `s${place}`,
    name: `stream ${place}`,
    source: { kind: 'pn', stages: 23, taps: [18, 23], seed: 8388607, inverted: true },
    fill: 'running',
    acrossRepeats: 'restart',
    ...changes,
  };
}

/** A small valid content: N 64, one symbol, nothing painted; `changes` replace whole keys. */
export function smallContent(changes: Partial<WaveformContent> = {}): WaveformContent {
  const fftSize = changes.fftSize ?? 64;
  const symbolCount = changes.symbolCount ?? 1;
  return {
    fftSize,
    subcarrierSpacingHz: [15000, 1],
    symbolCount,
    prefixSamples: [0],
    overlapSamples: 0,
    oversampling: 1,
    frequencyOffsetHz: 0,
    timing: { mode: 'loop', repeats: 1, gapSamples: 0, padSamples: 0 },
    tray: [NULL_INK],
    grid: { rows: [[fftSize, 0]], rowOfSymbol: new Array<number>(symbolCount).fill(0) },
    streams: [],
    peakReduction: { kind: 'none' },
    level: { reference: 'samplePeak', headroomDb: 1 },
    markers: [],
    ...changes,
  };
}

/** A row with ink numbers at the subcarriers given as [k, ink] pairs or by a function of k. */
export function rowOf(fftSize: number, inkOf: (subcarrier: number) => number): number[] {
  const runs: number[] = [];
  for (let p = 0; p < fftSize; p++) {
    const ink = inkOf(p - Math.floor(fftSize / 2));
    if (runs.length > 0 && runs[runs.length - 1] === ink) runs[runs.length - 2]!++;
    else runs.push(1, ink);
  }
  return runs;
}
