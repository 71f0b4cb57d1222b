import { readCheck, titleOf } from '@/tests/helpers/checks';
import { contentOf, frameSamples, powerOf, presetCells } from '@/tests/helpers/presetCells';

const timing = readCheck<Record<string, number>>('ieee80211.timing');
const pilots = readCheck<{ k: number[]; base: number[]; polarity: number[] }>('ieee80211.pilots');

describe('IEEE 802.11 clause 17 at 20 MHz', () => {
  const cells = presetCells(contentOf('ieee80211-20mhz'));
  const { content } = cells;

  test(titleOf(timing), () => {
    const { expected } = timing;
    expect(content.fftSize).toBe(expected.fft);
    expect(content.prefixSamples).toEqual([expected.cp]);
    expect(content.subcarrierSpacingHz).toEqual([expected.scs_hz, 1]);
    expect(frameSamples(content) / 16 / 20).toBe(expected.t_sym_us); // µs at 20 MS/s
    for (let symbol = 0; symbol < content.symbolCount; symbol += 1) {
      expect(cells.subcarriersOf(symbol, 'Data')).toHaveLength(expected.n_sd!);
      expect(cells.subcarriersOf(symbol, 'Pilots')).toHaveLength(expected.n_sp!);
      const used = cells.subcarriersOf(symbol);
      expect([used.length, used[0], used.at(-1), used.includes(0)]).toEqual([expected.n_st, -26, 26, false]);
    }
  });

  test(titleOf(pilots), () => {
    const { k, base, polarity } = pilots.expected;
    expect(cells.subcarriersOf(5, 'Pilots')).toEqual(k);
    // p_0 belongs to the SIGNAL symbol; the first data symbol has p_1
    for (let symbol = 0; symbol < content.symbolCount; symbol += 1) {
      const values = cells.cellsOf(symbol, 'Pilots').map(({ re, im }) => [re, im]);
      expect(values).toEqual(base.map((value) => [value * polarity[symbol + 1]!, 0]));
    }
    const ink = content.tray[2]!;
    expect(ink).toMatchObject({ value: { factors: [{}, { sequence: { kind: 'pn', taps: [4, 7] }, start: 8 }] } });
  });
});

/**
 * Clause, band's sizes, pilots and their base values: recalled from clauses 19, 21 and 27, not compared with the text;
 * the polarity they are multiplied by is the check's.
 */
const wide = [
  // id, N, prefix, spacing, data, highest, pilots, base values, p_n of the first data symbol, symbol time in µs
  ['ieee80211-40mhz', 128, 32, 312500, 108, 58, [11, 25, 53], '+++--+', 3, 4],
  ['ieee80211-80mhz', 256, 64, 312500, 234, 122, [11, 39, 75, 103], '+++--+++', 4, 4],
  ['ieee80211-78khz', 256, 16, 78125, 234, 122, [22, 48, 90, 116], '+++--+++', 4, 13.6],
] as const;

test.each(wide)(
  '%s: N %i, prefix %i, %i Hz (from memory), polarity after ieee80211.pilots',
  (id, fftSize, prefix, spacing, dataCount, highest, places, base, before, symbolMicroseconds) => {
    const cells = presetCells(contentOf(id));
    const { content } = cells;
    expect([content.fftSize, content.prefixSamples, content.subcarrierSpacingHz]).toEqual([
      fftSize,
      [prefix],
      [spacing, 1],
    ]);
    expect(((fftSize + prefix) / (fftSize * spacing)) * 1e6).toBeCloseTo(symbolMicroseconds, 9);
    const mirrored = [...places.map((k) => -k).reverse(), ...places];
    for (let symbol = 0; symbol < content.symbolCount; symbol += 1) {
      expect(cells.subcarriersOf(symbol, 'Data')).toHaveLength(dataCount);
      const used = cells.subcarriersOf(symbol);
      expect([used[0], used.at(-1)]).toEqual([-highest, highest]);
      expect(used.filter((k) => Math.abs(k) < 2)).toEqual([]);
      expect(cells.subcarriersOf(symbol, 'Pilots')).toEqual(mirrored);
      const polarity = pilots.expected.polarity[(symbol + before) % 127]!;
      const signs = mirrored.map((_k, m) => (base[(m + symbol) % base.length] === '+' ? polarity : -polarity));
      expect(cells.cellsOf(symbol, 'Pilots').map(({ re, im }) => [re, im])).toEqual(signs.map((sign) => [sign, 0]));
    }
    // a QAM's mean power is 1: 16 symbols of random points come near it
    const all = Array.from({ length: 16 }, (_, symbol) => cells.cellsOf(symbol, 'Data')).flat();
    expect(powerOf(all)).toBeGreaterThan(0.95);
    expect(powerOf(all)).toBeLessThan(1.05);
  },
);
