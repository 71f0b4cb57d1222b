import { referenceSignalInit, referenceSignalShift, referenceSignalStart } from '@/lib/document/presets/ts36211';
import { createSequence, sequenceValue, type WaveformContent } from '@/lib/synth/index';
import { readCheck, titleOf } from '@/tests/helpers/checks';
import { contentOf, frameSamples, powerOf, presetCells } from '@/tests/helpers/presetCells';

interface ReferenceSignals {
  c_init: number;
  k: number[];
  a_times_sqrt2: [number, number][];
}
const prefixes = readCheck<{ normal: number[]; extended: number[]; slot_samples: number }>('ts36211.cp');
const slot0symbol0 = readCheck<ReferenceSignals>('ts36211.crs.150.0.0.0');
const slot0symbol4 = readCheck<ReferenceSignals>('ts36211.crs.150.0.4.0');
const slot1symbol0 = readCheck<ReferenceSignals>('ts36211.crs.150.1.0.1');

/** Blocks by bandwidth: TS 36.104, table 5.6-1, from memory. */
const carriers = [
  ['ts36211-1-4mhz', 6, 128, 'normal'],
  ['ts36211-5mhz', 25, 512, 'normal'],
  ['ts36211-10mhz', 50, 1024, 'normal'],
  ['ts36211-20mhz', 100, 2048, 'normal'],
  ['ts36211-5mhz-extended', 25, 512, 'extended'],
] as const;

/** Round to where 1/√2 · √2 is 1. */
const whole = (value: number) => Math.round(value * 1e12) / 1e12;
const timesRoot2 = ({ re, im }: { re: number; im: number }) => [whole(re * Math.SQRT2), whole(im * Math.SQRT2)];

/** Resource elements count from the lowest used subcarrier and leave out DC. */
const fromLowest = (subcarrier: number, half: number) => (subcarrier < 0 ? subcarrier + half : subcarrier + half - 1);

test.each(carriers)(`%s: ${titleOf(prefixes)}`, (id, blocks, fftSize, prefix) => {
  const cells = presetCells(contentOf(id));
  const { content } = cells;
  const perSlot = prefix === 'normal' ? 7 : 6;
  const scale = 2048 / fftSize;
  const expected = prefixes.expected[prefix].map((samples) => samples / scale);
  const written = Array.from({ length: perSlot }, (_, l) => content.prefixSamples[l % content.prefixSamples.length]);
  expect(written).toEqual(expected);
  expect(content.symbolCount).toBe(2 * perSlot);
  expect(frameSamples(content)).toBe((2 * prefixes.expected.slot_samples) / scale); // 1 ms
  expect(content.fftSize * 15000 * scale).toBe(30.72e6);
  for (let symbol = 0; symbol < content.symbolCount; symbol += 1) {
    const used = cells.subcarriersOf(symbol);
    expect([used.length, used[0], used.at(-1), used.includes(0)]).toEqual([
      12 * blocks,
      -6 * blocks,
      6 * blocks,
      false,
    ]);
  }
});

test.each([
  [slot0symbol0, 0, 0],
  [slot0symbol4, 0, 4],
])('$id at 1.4 MHz: every value of port 0', (check, slot, symbol) => {
  const cells = presetCells(contentOf('ts36211-1-4mhz'));
  const found = cells.cellsOf(symbol, `Reference, slot ${slot}, symbol ${symbol}`);
  expect(found.map(({ subcarrier }) => fromLowest(subcarrier, 36))).toEqual(check.expected.k);
  expect(found.map(timesRoot2)).toEqual(check.expected.a_times_sqrt2);
  expect(referenceSignalInit(150, slot, symbol)).toBe(check.expected.c_init);
});

test(`${slot1symbol0.id}: values of port 1, whose c_init is port 0's (${slot1symbol0.source})`, () => {
  const cInit = referenceSignalInit(150, 1, 0);
  expect(cInit).toBe(slot1symbol0.expected.c_init);
  const sequence = createSequence({ kind: 'gold', cInit, points: 'qpsk' });
  const start = referenceSignalStart(6);
  const values = slot1symbol0.expected.k.map((_k, m) => sequenceValue(sequence, start + m));
  expect(values.map(([re, im]) => timesRoot2({ re, im }))).toEqual(slot1symbol0.expected.a_times_sqrt2);
  // the preset's port 0 has these values on its own subcarriers
  const found = presetCells(contentOf('ts36211-1-4mhz')).cellsOf(7, 'Reference, slot 1, symbol 0');
  expect(found.map(timesRoot2)).toEqual(slot1symbol0.expected.a_times_sqrt2);
});

test.each(carriers)(
  '%s: the middle twelve reference signals are those of the narrowest carrier',
  (id, blocks, _n, prefix) => {
    if (prefix === 'extended') {
      expect(referenceSignalInit(150, 0, 3, 'extended')).toBe(1024 * (7 + 3 + 1) * 301 + 300); // N_CP = 0
      return;
    }
    const cells = presetCells(contentOf(id));
    const first = blocks - 6; // m′ = 110 − 6 is m = N − 6
    const middle = cells.cellsOf(0, 'Reference').slice(first, first + 12);
    expect(middle.map(timesRoot2)).toEqual(slot0symbol0.expected.a_times_sqrt2);
    expect(cells.cellsOf(0, 'Reference')).toHaveLength(2 * blocks);
  },
);

test.each(carriers)(
  '%s: reference signals stand in two symbols of a slot, at the power of the data',
  (id, blocks, _n, prefix) => {
    const cells = presetCells(contentOf(id));
    const perSlot = prefix === 'normal' ? 7 : 6;
    const half = 6 * blocks;
    for (let symbol = 0; symbol < 2 * perSlot; symbol += 1) {
      const found = cells.cellsOf(symbol, 'Reference');
      const inSlot = symbol % perSlot;
      if (inSlot !== 0 && inSlot !== perSlot - 3) {
        expect(found).toEqual([]);
        continue;
      }
      const shift = referenceSignalShift(150, inSlot);
      expect(found.map(({ subcarrier }) => fromLowest(subcarrier, half))).toEqual(
        Array.from({ length: 2 * blocks }, (_, m) => 6 * m + shift),
      );
      expect(powerOf(found)).toBeCloseTo(1, 12);
    }
    const content: WaveformContent = cells.content;
    expect(content.tray.every(({ powerDb }) => powerDb === 0)).toBe(true);
  },
);
