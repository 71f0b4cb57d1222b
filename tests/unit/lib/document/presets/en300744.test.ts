import { createHash } from 'node:crypto';
import { readCheck, titleOf } from '@/tests/helpers/checks';
import { contentOf, frameSamples, powerOf, presetCells } from '@/tests/helpers/presetCells';

interface ModeParameters {
  K: number;
  fft: number;
  Tu_us: number;
  scs_hz: number;
  cp: Record<string, number>;
}
interface Parameters {
  '2K': ModeParameters;
  '8K': ModeParameters;
  fs_mhz: number;
  data_carriers: Record<'2K' | '8K', number>;
  symbols_per_frame: number;
}
interface Pilots {
  continual: number[];
  tps: number[];
  'scattered_count_l0..3': number[];
  'pilots_union_count_l0..3': number[];
  'data_count_l0..3': number[];
  boosted_amplitude: number;
  boost_power: number;
}
const parameters = readCheck<Parameters>('en300744.params');
const pilots = readCheck<Pilots>('en300744.pilots2k');
const register = readCheck<{
  first64: string;
  sum_1705: number;
  sum_6817: number;
  sha256_first1705_packed_msb: string;
}>('en300744.prbs');
const modes = [
  ['2K', '1/32'],
  ['8K', '1/4'],
] as const;
const cellsOfMode = { '2K': presetCells(contentOf('en300744-2k')), '8K': presetCells(contentOf('en300744-8k')) };
const middleOf = { '2K': 852, '8K': 3408 };
const carriersOf = (mode: '2K' | '8K', symbol: number, name?: string) =>
  cellsOfMode[mode].subcarriersOf(symbol, name).map((k) => k + middleOf[mode]);

test.each(modes)(`%s: ${titleOf(parameters)}`, (mode, guard) => {
  const { content } = cellsOfMode[mode];
  const expected = parameters.expected[mode];
  expect([content.fftSize, content.prefixSamples]).toEqual([expected.fft, [expected.cp[guard]]]);
  const [numerator, denominator] = content.subcarrierSpacingHz;
  expect(numerator * expected.Tu_us).toBe(denominator * 1e6); // 1/T_U exactly
  expect(content.fftSize * numerator * 7).toBe(denominator * 64e6); // 64/7 MHz exactly
  expect(content.symbolCount).toBe(parameters.expected.symbols_per_frame);
  expect(frameSamples(content)).toBe(68 * (expected.fft + expected.cp[guard]!));
  for (const symbol of [0, 1, 2, 3, 67]) {
    const used = carriersOf(mode, symbol);
    expect([used.length, used[0], used.at(-1)]).toEqual([expected.K, 0, expected.K - 1]);
    expect(carriersOf(mode, symbol, 'Data')).toHaveLength(parameters.expected.data_carriers[mode]);
  }
});

test(titleOf(pilots), () => {
  const { continual, tps } = pilots.expected;
  for (let symbol = 0; symbol < 8; symbol += 1) {
    const l = symbol % 4;
    expect(carriersOf('2K', symbol, 'Continual')).toEqual(continual);
    expect(carriersOf('2K', symbol, 'Signalling')).toEqual(tps);
    const isRaster = (k: number) => k % 12 === 3 * l;
    const scattered = carriersOf('2K', symbol, 'Scattered');
    expect(scattered.every(isRaster)).toBe(true);
    // a cell of both rules is painted continual
    const both = continual.filter(isRaster).length;
    expect(scattered.length + both).toBe(pilots.expected['scattered_count_l0..3'][l]);
    expect(scattered.length + continual.length).toBe(pilots.expected['pilots_union_count_l0..3'][l]);
    expect(carriersOf('2K', symbol, 'Data')).toHaveLength(pilots.expected['data_count_l0..3'][l]!);
  }
});

test(`8K: the lists of 2K every 1704 carriers, ${titleOf(pilots)}`, () => {
  const repeated = (list: number[]) => [...new Set([0, 1, 2, 3].flatMap((part) => list.map((k) => k + 1704 * part)))];
  expect(carriersOf('8K', 1, 'Continual')).toEqual(repeated(pilots.expected.continual));
  expect(carriersOf('8K', 1, 'Continual')).toHaveLength(177);
  expect(carriersOf('8K', 1, 'Signalling')).toEqual(repeated(pilots.expected.tps));
  expect(carriersOf('8K', 1, 'Signalling')).toHaveLength(68);
});

describe(titleOf(register), () => {
  /** w_k as the pilots of the four symbols of the raster show it: every third carrier, and the listed ones. */
  const shown = (mode: '2K' | '8K') => {
    const bits = new Map<number, number>();
    for (let symbol = 0; symbol < 4; symbol += 1)
      for (const name of ['Scattered', 'Continual', 'Signalling'])
        for (const { subcarrier, re, im } of cellsOfMode[mode].cellsOf(symbol, name)) {
          const amplitude = name === 'Signalling' ? 1 : pilots.expected.boosted_amplitude;
          expect(Math.abs(re)).toBeCloseTo(amplitude, 12);
          expect(im).toBe(0);
          bits.set(subcarrier + middleOf[mode], re < 0 ? 1 : 0);
        }
    return bits;
  };
  /** The check's own recursion. */
  const registerBits = (count: number) => {
    const bits: number[] = [];
    for (let k = 0; k < count; k += 1) bits.push(k < 11 ? 1 : bits[k - 11]! ^ bits[k - 9]!);
    return bits;
  };

  test.each([
    ['2K', 1705, register.expected.sum_1705],
    ['8K', 6817, register.expected.sum_6817],
  ] as const)('%s: each pilot is ±4/3 by w_k, signalling ±1', (mode, count, sum) => {
    const expected = registerBits(count);
    expect(expected.reduce((total, bit) => total + bit, 0)).toBe(sum);
    expect(expected.slice(0, 64).join('')).toBe(register.expected.first64);
    const bits = shown(mode);
    expect(bits.size).toBeGreaterThan(count / 3);
    for (const [carrier, bit] of bits) expect([carrier, bit]).toEqual([carrier, expected[carrier]]);
  });

  test('the recursion gives the digest of 1705 bits', () => {
    const packed = Buffer.alloc(Math.ceil(1705 / 8));
    registerBits(1705).forEach((bit, k) => (packed[k >> 3]! |= bit << (7 - (k & 7))));
    expect(createHash('sha256').update(packed).digest('hex')).toBe(register.expected.sha256_first1705_packed_msb);
  });

  test('boosted power is 16/9 of a data cell', () => {
    const { cellsOf } = cellsOfMode['2K'];
    expect(powerOf(cellsOf(0, 'Scattered'))).toBeCloseTo(pilots.expected.boost_power, 12);
    expect(powerOf(cellsOf(0, 'Continual'))).toBeCloseTo(pilots.expected.boost_power, 12);
    expect(powerOf(cellsOf(0, 'Data'))).toBeCloseTo(1, 1);
  });
});
