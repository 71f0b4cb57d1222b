import type { Ink, WaveformContent } from '@/lib/synth';

/** The three measured jobs: bits, map, inverse transform, prefix, peak and power, int16 words. */
export type WorkloadName = 'W1' | 'W2' | 'W3';

const NULL_INK: Ink = { inkId: 'k0', name: 'null', role: 'null', powerDb: 0, value: null };

function dataInk(inkId: string, constellation: 'qpsk' | '64qam'): Ink {
  const value = { constellation, bitMap: 'ts38211', streamId: 's0' } as const;
  return { inkId, name: constellation, role: 'data', powerDb: 0, value };
}

/** N 2048, 1200 subcarriers beside DC: the lower 600 QPSK, the upper 600 64-QAM; 140 symbols, prefix 160 then 6 × 144. */
function smallTransforms(repeats: number): WaveformContent {
  return {
    fftSize: 2048,
    subcarrierSpacingHz: [15000, 1],
    symbolCount: 140,
    prefixSamples: [160, 144, 144, 144, 144, 144, 144],
    overlapSamples: 0,
    oversampling: 1,
    frequencyOffsetHz: 0,
    timing: { mode: 'loop', repeats, gapSamples: 0, padSamples: 0 },
    tray: [NULL_INK, dataInk('k1', 'qpsk'), dataInk('k2', '64qam')],
    grid: {
      rows: [[424, 0, 600, 1, 1, 0, 600, 2, 423, 0]],
      rowOfSymbol: new Array<number>(140).fill(0),
    },
    streams: [
      {
        streamId: 's0',
        name: 'PN15',
        source: { kind: 'pn', stages: 15, taps: [14, 15], seed: 32767, inverted: true },
        fill: 'running',
        acrossRepeats: 'continue',
      },
    ],
    peakReduction: { kind: 'none' },
    level: { reference: 'samplePeak', headroomDb: 1 },
    markers: [],
  };
}

/** N 4096 rendered fourfold, 3276 subcarriers 64-QAM (1638 either side of nothing: DC is painted), 14 symbols, prefix 288. */
function largeTransforms(): WaveformContent {
  return {
    ...smallTransforms(1),
    fftSize: 4096,
    subcarrierSpacingHz: [30000, 1],
    symbolCount: 14,
    prefixSamples: [288],
    oversampling: 4,
    tray: [NULL_INK, dataInk('k1', '64qam')],
    grid: { rows: [[410, 0, 3276, 1, 410, 0]], rowOfSymbol: new Array<number>(14).fill(0) },
  };
}

export function workload(name: WorkloadName): WaveformContent {
  if (name === 'W2') return largeTransforms();
  return smallTransforms(name === 'W3' ? 72 : 1);
}
