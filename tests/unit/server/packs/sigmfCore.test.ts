import { readFileSync } from 'node:fs';
import { join } from 'node:path';
import type { BenchContent, BenchProfile } from '@/lib/synth';
import { sigmfDatatype } from '@/server/packs/sigmfMeta';
import { testCheck } from '@/tests/helpers/checks';
import schema from '@/tests/fixtures/sigmfCore.schema.json';

const examples = join(__dirname, '../../../golden/fixtures/examples/int16.bench.json');
const int16 = (JSON.parse(readFileSync(examples, 'utf8')) as BenchProfile).content;

interface Core {
  int16_iq_le: string;
  float32_iq_le: string;
  int8_iq: string;
  required_global: string[];
}

testCheck<Core>('sigmf.core', ({ expected }) => {
  const typeOf = (changes: Partial<BenchContent>) =>
    sigmfDatatype({ ...int16, byteOrder: 'little', bits: 16, align: 'right', ...changes });
  expect(typeOf({})).toEqual({ datatype: expected.int16_iq_le });
  expect(typeOf({ word: 'float32' })).toEqual({ datatype: expected.float32_iq_le });
  expect(typeOf({ word: 'int8', bits: 8 })).toEqual({ datatype: expected.int8_iq });
  // the schema that the packs' metadata is held against asks for the same fields
  expect(schema.properties.global.required).toEqual(expect.arrayContaining(expected.required_global));
  expect(Object.keys(schema.properties.global.properties)).toContain('core:sha512');
  expect(Object.keys(schema.properties.captures.items.properties)).toContain('core:sample_start');
});
