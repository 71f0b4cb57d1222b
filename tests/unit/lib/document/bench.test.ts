import { exampleBenches } from '@/lib/document/examples/exampleBenches';
import { benchNotSupportedYet, notSupportedYet } from '@/lib/document/notSupportedYet';
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

describe('what is not built yet', () => {
  test('of benches: every layout but int16 and float32, two’s complement, interleaved, raw', () => {
    const pointers = (overrides: Partial<BenchContent>) =>
      benchNotSupportedYet(openBench(overrides)).map((issue) => issue.pointer);
    expect(pointers({})).toEqual([]);
    expect(pointers({ bits: 8, align: 'left', byteOrder: 'big' })).toEqual([]);
    expect(pointers({ word: 'float32', byteOrder: 'big' })).toEqual([]);
    expect(pointers({ markers: { count: 8, packing: 'bytes', leastSamples: 1, stepSamples: 1 } })).toEqual([]);
    expect(
      pointers({
        ...int8,
        numberFormat: 'offsetBinary',
        layout: 'split',
        container: 'wav',
        swapIq: true,
        negateQ: true,
      }),
    ).toEqual(['word', 'numberFormat', 'layout', 'container', 'swapIq', 'negateQ'].map((key) => `/content/${key}`));
    expect(benchNotSupportedYet(openBench({ bits: 14, align: 'left', markers: lowBits }))).toEqual([
      { code: 'not_supported_yet', pointer: '/content/markers/packing', message: expect.any(String) },
    ]);
  });

  test('of documents: peak reduction', () => {
    expect(notSupportedYet(smallDocument())).toEqual([]);
    const reduced = smallDocument({ peakReduction: { kind: 'toneReservation', targetPaprDb: 8, iterations: 4 } });
    expect(notSupportedYet(reduced)).toEqual([
      { code: 'not_supported_yet', pointer: '/content/peakReduction/kind', message: expect.any(String) },
    ]);
  });

  test('the example benches are built', () => {
    for (const { build } of exampleBenches) expect(benchNotSupportedYet(build())).toEqual([]);
  });
});
