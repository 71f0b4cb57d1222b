import { gainPhase } from '@/lib/document/presets/es201980';
import { contentOf, frameSamples, powerOf, presetCells, type PresetCell } from '@/tests/helpers/presetCells';

// ETSI ES 201 980, robustness mode B, from memory: compared with no text, so held by what must follow from the numbers.
const cells = presetCells(contentOf('es201980-mode-b'));
const { content } = cells;

const turns1024 = ({ re, im }: PresetCell) => (Math.round((Math.atan2(im, re) / (2 * Math.PI)) * 1024) + 1024) % 1024;

test('mode B: T_u = 21 1/3 ms, T_g a quarter of it, 15 symbols in 400 ms, 10 kHz', () => {
  const [numerator, denominator] = content.subcarrierSpacingHz;
  expect(numerator * 64).toBe(denominator * 3000); // 1/T_u, T_u = 64/3 ms
  expect(content.fftSize * numerator).toBe(12000 * denominator);
  expect(content.prefixSamples).toEqual([content.fftSize / 4]);
  expect(frameSamples(content)).toBe(12000 * 0.4);
  for (let symbol = 0; symbol < 15; symbol += 1) {
    const used = cells.subcarriersOf(symbol);
    expect([used.length, used[0], used.at(-1), used.includes(0)]).toEqual([206, -103, 103, false]);
  }
});

test('frequency references run on as tones of 750, 2250 and 3000 Hz with amplitude √2', () => {
  for (let symbol = 0; symbol < 15; symbol += 1) {
    const found = cells.cellsOf(symbol, 'Frequency');
    expect(found.map(({ subcarrier }) => (subcarrier * 375) / 8)).toEqual([750, 2250, 3000]);
    expect(found.map(turns1024)).toEqual([331, 651, 555]);
    expect(powerOf(found)).toBeCloseTo(2, 12);
    // a whole number of periods in a symbol of 320 samples: the same phase goes on
    for (const { subcarrier } of found) expect((subcarrier * 320) % 256).toBe(0);
  }
});

test('gain references: every sixth carrier, moved on by two in each symbol, √2 and 2 at the edges', () => {
  const edges: number[] = [];
  for (let symbol = 0; symbol < 15; symbol += 1) {
    const found = cells.cellsOf(symbol, 'Gain');
    const carriers = found.map(({ subcarrier }) => subcarrier);
    const expected = Array.from({ length: 207 }, (_, i) => i - 103).filter(
      (k) => (k - 1 - 2 * (symbol % 3) + 600) % 6 === 0,
    );
    expect(carriers).toEqual(expected);
    expect(found.map(turns1024)).toEqual(carriers.map((carrier) => gainPhase(carrier, symbol)));
    for (const { subcarrier, re, im } of found) {
      const isEdge = Math.abs(subcarrier) >= 101;
      if (isEdge && symbol < 3) edges.push(subcarrier);
      expect(Math.hypot(re, im)).toBeCloseTo(isEdge ? 2 : Math.SQRT2, 12);
    }
  }
  expect(edges.sort((a, b) => a - b)).toEqual([-103, -101, 101, 103]);
  // 4Z + pW + p²(1 + s)Q with p = 0 and p = ±1 by hand: Z 168, W 0, Q 12 in symbol 1
  expect(gainPhase(1, 0)).toBe(0);
  expect(gainPhase(3, 1)).toBe(4 * 168);
  expect(gainPhase(9, 1)).toBe(4 * 168 + 2 * 12);
  expect(gainPhase(-5, 0)).toBe((1024 - 512 + 12) % 1024);
});
