import { createSynthesis, loopClosing, toneJumps, type WaveformContent } from '@/lib/synth/index';
import { readCheck, titleOf } from '@/tests/helpers/checks';
import { contentOf, presetCells } from '@/tests/helpers/presetCells';

const phases = readCheck<Record<string, { newman: number }>>('th.phases');
const tones = readCheck<Record<string, number>>('th.tones');

/** max|x|²/mean|x|² in dB of the file rendered at this oversampling. */
function paprDb(content: WaveformContent, oversampling: number): number {
  const synthesis = createSynthesis(content, { oversampling });
  const block = new Float64Array(2 * synthesis.samples);
  const read = synthesis.read(block);
  let peak = 0;
  let sum = 0;
  for (let at = 0; at < 2 * read; at += 2) {
    const power = block[at]! ** 2 + block[at + 1]! ** 2;
    if (power > peak) peak = power;
    sum += power;
  }
  return 10 * Math.log10((peak * read) / sum);
}

test(`64 tones on 1024 points, ${titleOf(phases)}`, () => {
  const content = contentOf('bench-64-tones');
  expect(content.fftSize * 4).toBe(64 * 16);
  expect(paprDb(content, 4)).toBeCloseTo(phases.expected['64']!.newman, 9);
  const { subcarrierSpacingHz, frequencyOffsetHz } = content;
  const places = presetCells(content)
    .subcarriersOf(0)
    .map((k) => (k * subcarrierSpacingHz[0] + frequencyOffsetHz) / 1000);
  expect([places.length, places[0], places.at(-1), places.includes(0)]).toEqual([64, -3150, 3150, false]);
});

test(`one and two tones, ${titleOf(tones)}`, () => {
  expect(paprDb(contentOf('bench-one-tone'), 4)).toBeCloseTo(tones.expected.lone_complex!, 9);
  expect(paprDb(contentOf('bench-two-tones'), 16)).toBeCloseTo(tones.expected.complex_two_tone!, 6);
  expect(presetCells(contentOf('bench-one-tone')).subcarriersOf(3)).toEqual([64 / 8]);
  expect(presetCells(contentOf('bench-two-tones')).subcarriersOf(3)).toEqual([-4, 4]);
});

test.each(['bench-one-tone', 'bench-two-tones', 'bench-64-tones', 'bench-notched-band'])(
  '%s: the loop has no seam and no tone jumps',
  (presetId) => {
    const content = contentOf(presetId);
    expect(loopClosing(content)).toMatchObject({ applies: true, closes: true });
    expect(toneJumps(content).count).toBe(0);
  },
);

test('notched band: 12 MHz but for DC and 240 tones, all of one amplitude', () => {
  const cells = presetCells(contentOf('bench-notched-band')).cellsOf(0);
  const used = new Set(cells.map(({ subcarrier }) => subcarrier));
  expect(cells).toHaveLength(2400 - 240);
  expect([Math.min(...used), Math.max(...used), used.has(0)]).toEqual([-1200, 1200, false]);
  for (let k = 301; k <= 540; k += 1) expect(used.has(k)).toBe(false);
  for (const { re, im } of cells) expect(Math.hypot(re, im)).toBeCloseTo(1, 12);
});

test('flat band and comb', () => {
  const flat = presetCells(contentOf('bench-flat-64qam'));
  expect([flat.subcarriersOf(7).length, flat.subcarriersOf(7).includes(0)]).toEqual([600, false]);
  const comb = presetCells(contentOf('bench-comb-4'));
  expect(comb.subcarriersOf(0)).toEqual(Array.from({ length: 100 }, (_, tooth) => 4 * tooth - 198));
  expect(comb.cellsOf(13)).toEqual(comb.cellsOf(0));
});
