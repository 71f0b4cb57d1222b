import fc from 'fast-check';
import { readCsvNumber, writeCsvNumber } from '@/lib/synth/files/csvNumbers';

function written(value: number): string {
  const bytes = new Uint8Array(17).fill(0x5f);
  writeCsvNumber(value, bytes, 1);
  return Buffer.from(bytes).toString('latin1');
}
const read = (text: string) => readCsvNumber(Buffer.from(text, 'latin1'), 0);

test.each([
  [0.5, '+5.00000000e-01'],
  [-1, '-1.00000000e+00'],
  [0, '+0.00000000e+00'],
  [-0, '-0.00000000e+00'],
  [Math.fround(0.1), '+1.00000001e-01'],
  [Math.fround(3.4028234663852886e38), '+3.40282347e+38'],
  [2 ** -149, '+1.40129846e-45'],
])('%p has 15 characters', (value, text) => {
  expect(written(value)).toBe(`_${text}_`);
  expect(read(text)).toBe(value);
});

test('every single precision number comes back, and the language reads the same', () => {
  fc.assert(
    fc.property(fc.float({ noNaN: true, noDefaultInfinity: true }), (value) => {
      const text = written(value).slice(1, 16);
      expect(text).toHaveLength(15);
      expect(Object.is(read(text), value)).toBe(true);
      expect(Object.is(Math.fround(Number(text)), value)).toBe(true);
    }),
    { numRuns: 3000, seed: 7 },
  );
});

test.each([
  '',
  ' 5.00000000e-01',
  '+5,00000000e-01',
  '+5.0000000ae-01',
  '+5.00000000E-01',
  '+5.00000000e 01',
  '+5.00000000e-0x',
])('refuses %p', (text) => expect(read(text)).toBeNaN());
