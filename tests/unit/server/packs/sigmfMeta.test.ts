import Ajv from 'ajv';
import type { BenchContent } from '@/lib/synth';
import { sigmfDatatype, sigmfMeta, type SigmfInput } from '@/server/packs/sigmfMeta';
import schema from '@/tests/fixtures/sigmfCore.schema.json';

const bench: BenchContent = {
  sampleClockHz: { least: 1, most: 1e9, step: null },
  word: 'int16',
  bits: 16,
  align: 'right',
  numberFormat: 'twosComplement',
  byteOrder: 'little',
  layout: 'interleaved',
  container: 'raw',
  swapIq: false,
  negateQ: false,
  granularitySamples: 1,
  leastSamples: 1,
  mostSamples: 1e9,
  leastHeadroomDb: 0,
  levelMeans: 'fileRms',
  markers: { count: 0, packing: 'none', leastSamples: 1, stepSamples: 1 },
  modes: ['loop', 'burst'],
  fileName: { most: 31, extension: 'sigmf-data' },
};

const input: SigmfInput = {
  bench,
  sampleClockHz: 30.72e6,
  sha512Hex: 'ab'.repeat(64),
  headBytes: 0,
  datasetName: 'x-e1-6ecf12ab.sigmf-data',
  baseName: 'x-e1-6ecf12ab',
  title: 'X',
  packNote: 'Released, edition 1.',
  symbols: [
    { startSample: 0, samples: 2208 },
    { startSample: 2208, samples: 2192 },
  ],
};

// Check sigmf.core (from memory of the SigMF specification, core namespace).
test.each([
  [{ ...bench }, 'ci16_le'],
  [{ ...bench, byteOrder: 'big' }, 'ci16_be'],
  [{ ...bench, word: 'float32' }, 'cf32_le'],
  [{ ...bench, word: 'float32', byteOrder: 'big' }, 'cf32_be'],
  [{ ...bench, word: 'int8' }, 'ci8'],
  [{ ...bench, bits: 12, align: 'left' }, 'ci16_le'],
  [{ ...bench, numberFormat: 'offsetBinary' }, 'cu16_le'],
  [{ ...bench, numberFormat: 'offsetBinary', bits: 12, align: 'left', byteOrder: 'big' }, 'cu16_be'],
  [{ ...bench, word: 'int8', bits: 8, numberFormat: 'offsetBinary' }, 'cu8'],
  [{ ...bench, container: 'wav' }, 'ci16_le'],
  [{ ...bench, container: 'npy', word: 'float32' }, 'cf32_le'],
] as [BenchContent, string][])('the type of the words, %#', (profile, datatype) => {
  expect(sigmfDatatype(profile)).toEqual({ datatype });
});

test.each([
  [{ ...bench, swapIq: true }, 'Q before I'],
  [{ ...bench, negateQ: true }, 'a negated Q'],
  [{ ...bench, layout: 'split' }, 'two files'],
  [{ ...bench, container: 'csv', word: 'float32' }, 'text'],
  [{ ...bench, bits: 12, numberFormat: 'offsetBinary' }, '12-bit offset binary aligned to the right'],
  [{ ...bench, bits: 12, align: 'left', markers: { ...bench.markers, count: 1, packing: 'lowBits' } }, 'markers'],
] as [BenchContent, string][])('there is none, in words, %#', (profile, words) => {
  expect(sigmfDatatype(profile)).toEqual({ missing: expect.stringContaining(words) });
});

test('the meta file follows the schema of the core namespace and names nobody', () => {
  const validate = new Ajv({ allErrors: true }).compile(schema);
  const meta = sigmfMeta(input);
  expect(validate(meta)).toBe(true);
  expect(meta).toMatchObject({ annotations: [{}, { 'core:sample_start': 2208, 'core:sample_count': 2192 }] });
  const text = JSON.stringify(meta);
  expect(text).not.toContain('core:frequency');
  expect(text).not.toContain('core:author');
  expect(text).not.toContain('core:dataset');
  const other = sigmfMeta({ ...input, datasetName: 'x-e1-6ecf12ab.bin' });
  expect(validate(other)).toBe(true);
  expect(other).toMatchObject({ global: { 'core:dataset': 'x-e1-6ecf12ab.bin' } });
  expect(sigmfMeta({ ...input, bench: { ...bench, swapIq: true } })).toBeNull();
  const headed = sigmfMeta({ ...input, headBytes: 44, bench: { ...bench, container: 'wav' } });
  expect(validate(headed)).toBe(true);
  expect(headed).toMatchObject({ captures: [{ 'core:header_bytes': 44 }] });
});

test('the schema refuses what the specification refuses', () => {
  const validate = new Ajv().compile(schema);
  const meta = sigmfMeta(input) as { global: Record<string, unknown>; captures: unknown[]; annotations: unknown[] };
  expect(validate({ ...meta, captures: [] })).toBe(false);
  expect(validate({ ...meta, global: { ...meta.global, 'core:datatype': 'int16' } })).toBe(false);
  expect(validate({ ...meta, global: { ...meta.global, 'core:sha512': 'ab'.repeat(32) } })).toBe(false);
  expect(validate({ global: meta.global, captures: meta.captures })).toBe(false);
});
