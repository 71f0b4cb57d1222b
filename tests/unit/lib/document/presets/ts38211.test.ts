import { dataReferenceInit } from '@/lib/document/presets/ts38211';
import { createBitSource } from '@/lib/synth/index';
import { readCheck, titleOf } from '@/tests/helpers/checks';
import { contentOf, frameSamples, powerOf, presetCells } from '@/tests/helpers/presetCells';

interface Numerology {
  scs_khz: number;
  fs_mhz: number;
  cp_normal: number;
  cp_first: number;
  symbols_per_subframe: number;
  samples_per_subframe: number;
}
const prefixes = readCheck<Record<string, Numerology>>('ts38211.cp');

/** Blocks by bandwidth: TS 38.101-1, table 5.3.2-1, from memory; the positions 2, 11 and 2, 7, 11 of 14 symbols are tables 7.4.1.1.2-3 and 6.4.1.1.3-3. */
const slots = [
  // id, µ, blocks, N, DM-RS symbols, DM-RS over data in dB, data cells in a DM-RS symbol
  ['ts38211-15khz', 0, 106, 2048, [2, 11], 0, 636],
  ['ts38211-30khz', 1, 273, 4096, [2, 7, 11], 0, 1638],
  ['ts38211-60khz', 2, 51, 1024, [2, 11], 3, 0],
] as const;

test.each(slots)(`%s: ${titleOf(prefixes)}`, (id, numerology, blocks, fftSize) => {
  const { content, subcarriersOf } = presetCells(contentOf(id));
  const expected = prefixes.expected[`N2048.mu${numerology}`]!;
  const scale = 2048 / fftSize;
  const first = expected.cp_first / scale;
  const usual = expected.cp_normal / scale;
  const written = Array.from({ length: 14 }, (_, l) => content.prefixSamples[l % content.prefixSamples.length]);
  expect(written).toEqual(written.map((_w, l) => (l === 0 || (numerology === 0 && l === 7) ? first : usual)));
  expect(content.subcarrierSpacingHz).toEqual([expected.scs_khz * 1000, 1]);
  expect(fftSize * expected.scs_khz * scale).toBe(expected.fs_mhz * 1000);
  // a half subframe has 7·2^µ symbols and one long prefix
  const halfSubframe = expected.samples_per_subframe / scale / 2;
  const slotsPerHalf = 2 ** numerology / 2;
  const slotSamples = numerology === 0 ? 2 * halfSubframe : halfSubframe - (slotsPerHalf - 1) * 14 * (fftSize + usual);
  expect(frameSamples(content)).toBe(slotSamples);
  // k = −6·N_RB … 6·N_RB − 1 (5.3.1): DC carries a cell
  const used = subcarriersOf(0);
  expect([used.length, used[0], used.at(-1)]).toEqual([12 * blocks, -6 * blocks, 6 * blocks - 1]);
  expect(used).toContain(0);
});

test.each(slots)(
  '%s: DM-RS type 1 of TS 38.211 7.4.1.1: places, power and values',
  (id, _mu, blocks, _n, at, boostDb, beside) => {
    const cells = presetCells(contentOf(id));
    for (let symbol = 0; symbol < 14; symbol += 1) {
      const found = cells.cellsOf(symbol, 'DM-RS');
      if (!(at as readonly number[]).includes(symbol)) {
        expect(found).toEqual([]);
        expect(cells.subcarriersOf(symbol, 'Data')).toHaveLength(12 * blocks);
        continue;
      }
      expect(found.map(({ subcarrier }) => subcarrier)).toEqual(
        Array.from({ length: 6 * blocks }, (_, m) => 2 * m - 6 * blocks),
      );
      expect(cells.subcarriersOf(symbol, 'Data')).toHaveLength(beside);
      expect(10 * Math.log10(powerOf(found))).toBeCloseTo(boostDb, 9);
      // r(m) of c(2m), c(2m + 1), the recursion that the ts38211.gold checks hold, with the c_init written out
      const cInit = (131072 * (symbol + 1) * 155 + 154) % 2147483648;
      expect(dataReferenceInit(77, 0, symbol)).toBe(cInit);
      const bits = createBitSource({ kind: 'gold', cInit });
      const amplitude = 10 ** (boostDb / 20) / Math.SQRT2;
      found.slice(0, 400).forEach(({ re, im }, m) => {
        expect(re).toBeCloseTo(amplitude * (1 - 2 * bits.bit(2 * m)), 12);
        expect(im).toBeCloseTo(amplitude * (1 - 2 * bits.bit(2 * m + 1)), 12);
      });
    }
  },
);
