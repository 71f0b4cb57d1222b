import { broadcastReferenceInit, primarySignal, secondarySignal } from '@/lib/document/presets/ts38211Sync';
import { createBitSource, createSequence, sequenceValue, type Factor } from '@/lib/synth/index';
import { readCheck, titleOf } from '@/tests/helpers/checks';
import { contentOf, frameSamples, powerOf, presetCells } from '@/tests/helpers/presetCells';

const prefixes = readCheck<Record<string, Record<string, number>>>('ts38211.cp');
const signsOf = (bits: string) => [...bits].map((bit) => (bit === '1' ? -1 : 1));
const product = (factors: Factor[]) =>
  Array.from({ length: 127 }, (_, n) =>
    factors.reduce((sign, { sequence, start }) => sign * sequenceValue(createSequence(sequence), n + start)[0], 1),
  );

test.each([0, 1, 2].map((id) => readCheck<{ bits_1_is_minus: string }>(`ts38211.pss.${id}`)))(
  '$id: $source',
  ({ id, expected }) => {
    expect(product(primarySignal(Number(id.split('.')[2])))).toEqual(signsOf(expected.bits_1_is_minus));
  },
);

test.each([0, 17, 500, 1007].map((id) => readCheck<{ bits_1_is_minus: string }>(`ts38211.sss.${id}`)))(
  '$id: $source',
  ({ id, expected }) => {
    expect(product(secondarySignal(Number(id.split('.')[2])))).toEqual(signsOf(expected.bits_1_is_minus));
  },
);

describe('the slot of sync blocks', () => {
  const cells = presetCells(contentOf('ts38211-sync-block'));
  const { content } = cells;
  /** Subcarriers of a block count from its lowest, −120 here. */
  const inBlock = (symbol: number, name?: string) => cells.subcarriersOf(symbol, name).map((k) => k + 120);
  const range = (from: number, to: number) => Array.from({ length: to - from + 1 }, (_, i) => from + i);
  const values = (symbol: number, name: string) => cells.cellsOf(symbol, name).map(({ re }) => re);

  test(`first slot at 30 kHz, ${titleOf(prefixes)}`, () => {
    const { cp_first: first, cp_normal: usual } = prefixes.expected['N2048.mu1']!;
    expect(content.prefixSamples).toEqual([first! / 8, ...new Array<number>(13).fill(usual! / 8)]);
    expect(frameSamples(content)).toBe(7.68e6 * 0.5e-3); // half a subframe is one slot
  });

  test.each([2, 8])('block from symbol %i: cells of table 7.4.3.1-1 (from memory) and values', (start) => {
    const secondary = readCheck<{ bits_1_is_minus: string }>('ts38211.sss.500').expected.bits_1_is_minus;
    const primary = readCheck<{ bits_1_is_minus: string }>('ts38211.pss.2').expected.bits_1_is_minus; // 500 mod 3 is 2
    expect(inBlock(start)).toEqual(range(56, 182));
    expect(values(start, 'Primary')).toEqual(signsOf(primary));
    expect(values(start + 2, 'Secondary')).toEqual(signsOf(secondary));
    expect(inBlock(start + 2, 'Secondary')).toEqual(range(56, 182));
    expect(inBlock(start + 2)).toEqual([...range(0, 47), ...range(56, 182), ...range(192, 239)]);
    expect(inBlock(start + 1)).toEqual(range(0, 239));
    expect(inBlock(start + 3)).toEqual(range(0, 239));
    // v = 500 mod 4 = 0
    const fourth = (symbol: number) => inBlock(symbol, 'DM-RS');
    expect(fourth(start + 1)).toEqual(range(0, 59).map((m) => 4 * m));
    expect(fourth(start + 2)).toEqual([...range(0, 11), ...range(48, 59)].map((m) => 4 * m));
    // 432 broadcast and 144 reference cells in a block
    const broadcast = [1, 2, 3].flatMap((l) => inBlock(start + l, 'Broadcast'));
    expect(broadcast).toHaveLength(432);
    const references = [1, 2, 3].flatMap((l) => cells.cellsOf(start + l, 'DM-RS'));
    expect(references).toHaveLength(144);
    expect(powerOf(references)).toBeCloseTo(1, 12);
    // one Gold sequence through the three symbols (7.4.1.4.1)
    const block = start === 2 ? 0 : 1;
    const cInit = 2048 * (block + 1) * 126 + 64 * (block + 1);
    expect(broadcastReferenceInit(500, block)).toBe(cInit);
    const bits = createBitSource({ kind: 'gold', cInit });
    references.forEach(({ re, im }, m) => {
      expect(re * Math.SQRT2).toBeCloseTo(1 - 2 * bits.bit(2 * m), 12);
      expect(im * Math.SQRT2).toBeCloseTo(1 - 2 * bits.bit(2 * m + 1), 12);
    });
  });

  test('the rest of the slot is silent', () => {
    for (const symbol of [0, 1, 6, 7, 12, 13]) expect(cells.subcarriersOf(symbol)).toEqual([]);
  });
});
