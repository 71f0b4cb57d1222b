import { exampleBenches } from '@/lib/document/examples/exampleBenches';
import { layoutIssues } from '@/lib/document/layoutIssues';
import { parseBenchProfile } from '@/lib/document/parse';
import type { BenchContent } from '@/lib/synth/index';
import { openBench, smallDocument } from '@/tests/helpers/documents';

const int8 = { word: 'int8', bits: 8, align: 'right' } as const;
const lowBits = { count: 2, packing: 'lowBits', leastSamples: 1, stepSamples: 1 } as const;

function issuesOf(overrides: Partial<BenchContent>) {
  const result = parseBenchProfile(JSON.stringify(openBench(overrides)));
  return result.ok ? [] : result.issues;
}

test.each<[string, Partial<BenchContent>]>([
  ['12 bits left-aligned', { bits: 12, align: 'left', byteOrder: 'big' }],
  ['int8', int8],
  ['int8, offset binary', { ...int8, numberFormat: 'offsetBinary' }],
  ['float32', { word: 'float32' }],
  ['a clock step', { sampleClockHz: { least: 1e6, most: 1e13, step: 0.5 } }],
  ['markers in low bits', { bits: 14, align: 'left', markers: lowBits }],
  ['WAV of bytes', { ...int8, container: 'wav', numberFormat: 'offsetBinary' }],
  ['WAV of floats', { container: 'wav', word: 'float32' }],
  ['npy in two files', { container: 'npy', layout: 'split', byteOrder: 'big', swapIq: true, negateQ: true }],
  ['CSV in two files', { container: 'csv', layout: 'split', word: 'float32' }],
  ['loops alone', { modes: ['loop'] }],
  ['bursts alone', { modes: ['burst'] }],
  [
    'the most of everything',
    {
      granularitySamples: 2 ** 20,
      leastSamples: 2 ** 40,
      mostSamples: 2 ** 40,
      leastHeadroomDb: 60,
      fileName: { most: 64, extension: '0123456789abcd-z' },
    },
  ],
])('accepts %s', (_name, overrides) => {
  expect(issuesOf(overrides)).toEqual([]);
});

test.each<[string, string, object]>([
  ['a clock of 0', '/content/sampleClockHz/least', { sampleClockHz: { least: 0, most: 1, step: null } }],
  ['a clock range upside down', '/content/sampleClockHz/least', { sampleClockHz: { least: 2, most: 1, step: null } }],
  ['a clock over 1e13', '/content/sampleClockHz/most', { sampleClockHz: { least: 2, most: 1.1e13, step: null } }],
  ['a step of 0', '/content/sampleClockHz/step', { sampleClockHz: { least: 2, most: 3, step: 0 } }],
  ['int8 of 12 bits', '/content/bits', { ...int8, bits: 12 }],
  ['int8 left-aligned', '/content/align', { ...int8, align: 'left' }],
  ['float32 of 12 bits', '/content/bits', { word: 'float32', bits: 12 }],
  ['float32 left-aligned', '/content/align', { word: 'float32', align: 'left' }],
  ['float32 in offset binary', '/content/numberFormat', { word: 'float32', numberFormat: 'offsetBinary' }],
  ['7 bits', '/content/bits', { bits: 7 }],
  ['markers without packing', '/content/markers/packing', { markers: { ...lowBits, packing: 'none' } }],
  ['packing without markers', '/content/markers/packing', { markers: { ...lowBits, count: 0 } }],
  ['low bits that are not free', '/content/markers/packing', { bits: 16, align: 'left', markers: lowBits }],
  ['low bits of right-aligned words', '/content/markers/packing', { bits: 12, markers: lowBits }],
  ['nine markers', '/content/markers/count', { markers: { ...lowBits, count: 9, packing: 'bytes' } }],
  ['WAV in two files', '/content/layout', { container: 'wav', layout: 'split' }],
  ['WAV with the high byte first', '/content/byteOrder', { container: 'wav', byteOrder: 'big' }],
  ['WAV of signed bytes', '/content/numberFormat', { container: 'wav', ...int8 }],
  ['WAV of unsigned 16-bit words', '/content/numberFormat', { container: 'wav', numberFormat: 'offsetBinary' }],
  ['CSV of integers', '/content/word', { container: 'csv' }],
  ['the extension of the metadata', '/content/fileName/extension', { fileName: { most: 20, extension: 'sigmf-meta' } }],
  ['no modes', '/content/modes', { modes: [] }],
  ['modes out of order', '/content/modes', { modes: ['burst', 'loop'] }],
  ['a mode twice', '/content/modes', { modes: ['loop', 'loop'] }],
  ['granularity 0', '/content/granularitySamples', { granularitySamples: 0 }],
  ['more samples than fit', '/content/mostSamples', { mostSamples: 2 ** 40 + 1 }],
  ['least over most', '/content/leastSamples', { leastSamples: 10, mostSamples: 9 }],
  ['a file name of 19', '/content/fileName/most', { fileName: { most: 19, extension: 'bin' } }],
  ['an extension with a dot', '/content/fileName/extension', { fileName: { most: 20, extension: '.bin' } }],
  ['an unknown key', '/content/vendor', { vendor: 'x' }],
])('refuses %s', (_name, pointer, overrides) => {
  expect(issuesOf(overrides as Partial<BenchContent>)).toContainEqual(
    expect.objectContaining({ pointer, code: 'invalid' }),
  );
});

describe('why no file can be written', () => {
  test('of the profile, in whole sentences at its fields', () => {
    for (const { build } of exampleBenches) expect(layoutIssues(build().content)).toEqual([]);
    expect(layoutIssues(openBench({ layout: 'split', container: 'wav' }).content)).toEqual([
      {
        code: 'invalid',
        pointer: '/content/layout',
        message: 'The profile\'s layout must be "interleaved" in WAV: I and Q are the two channels of one WAV file.',
      },
    ]);
  });

  test('of a document: nothing of 4 GiB in WAV, and markers only where bits are free', () => {
    // 2^20 samples a repeat, 4 bytes each: 1023 of them stay below 4 GiB, 1024 do not
    const long = (repeats: number) =>
      smallDocument({
        subcarrierSpacingHz: [15000, 1],
        fftSize: 16384,
        symbolCount: 64,
        prefixSamples: [0],
        overlapSamples: 0,
        timing: { mode: 'loop', repeats, gapSamples: 0, padSamples: 0 },
      }).content;
    const wav = openBench({ container: 'wav' }).content;
    expect(layoutIssues(wav, { ...long(1023), oversampling: 1 })).toEqual([]);
    expect(layoutIssues(wav, { ...long(1024), oversampling: 1 })).toMatchObject([
      { pointer: '/content/container', message: expect.stringContaining('choose raw or npy') },
    ]);
    for (const container of ['raw', 'npy'] as const)
      expect(layoutIssues(openBench({ container }).content, { ...long(60000), oversampling: 1 })).toEqual([]);
    const mark = { name: 'M', at: 'file', symbol: null, offsetSamples: 0, lengthSamples: 1 } as const;
    const low = openBench({ bits: 15, align: 'left', markers: { ...lowBits, count: 4 } }).content;
    expect(layoutIssues(low, smallDocument({ markers: [mark, mark] }).content)).toEqual([]);
    expect(layoutIssues(low, smallDocument({ markers: [mark, mark, mark] }).content)).toMatchObject([
      { pointer: '/content/markers/packing' },
    ]);
  });
});
