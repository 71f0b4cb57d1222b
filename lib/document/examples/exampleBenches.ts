import type { BenchProfile } from '@/lib/synth/index';

export interface ExampleBench {
  exampleId: string;
  build: () => BenchProfile;
}

const notes = 'Invented: no real generator has these limits. Copy it and enter those of yours from its manual.';

const twelveBits = (): BenchProfile => ({
  format: 'combwright.bench',
  version: 1,
  about: { name: 'Bench A, 12 bit, left-aligned', notes },
  content: {
    sampleClockHz: { least: 1e6, most: 250e6, step: null },
    word: 'int16',
    bits: 12,
    align: 'left',
    numberFormat: 'twosComplement',
    byteOrder: 'big',
    layout: 'interleaved',
    container: 'raw',
    swapIq: false,
    negateQ: false,
    granularitySamples: 16,
    leastSamples: 256,
    mostSamples: 2 ** 26,
    leastHeadroomDb: 1,
    levelMeans: 'fileRms',
    markers: { count: 0, packing: 'none', leastSamples: 1, stepSamples: 1 },
    modes: ['loop', 'burst'],
    fileName: { most: 31, extension: 'bin' },
  },
});

const sixteenBits = (): BenchProfile => ({
  format: 'combwright.bench',
  version: 1,
  about: { name: 'Bench B, 16 bit, four markers', notes },
  content: {
    sampleClockHz: { least: 1e5, most: 1.2e9, step: null },
    word: 'int16',
    bits: 16,
    align: 'right',
    numberFormat: 'twosComplement',
    byteOrder: 'little',
    layout: 'interleaved',
    container: 'raw',
    swapIq: false,
    negateQ: false,
    granularitySamples: 4,
    leastSamples: 128,
    mostSamples: 2 ** 30,
    leastHeadroomDb: 0.5,
    levelMeans: 'activeRms',
    markers: { count: 4, packing: 'bytes', leastSamples: 1, stepSamples: 1 },
    modes: ['loop', 'burst'],
    fileName: { most: 48, extension: 'sigmf-data' },
  },
});

/** Two invented bench profiles for the demo, the tests and a first pack. */
export const exampleBenches: readonly ExampleBench[] = [
  { exampleId: 'bench-a-12-bit', build: twelveBits },
  { exampleId: 'bench-b-16-bit', build: sixteenBits },
];
