import { createCellCensus, deriveFigures, expandGrid, pilotReach, type WaveformContent } from '@/lib/synth';
import { fractionToNumber } from '@/lib/synth/numerology';
import { dataInk, factor, NULL_INK, pilotInk, pnStream, rowOf, smallContent } from '@/tests/helpers/content';

const CONSTANT = [factor({ kind: 'constant' })];

/** TS 36.211 clause 6.12, normal prefix at 5 MHz: 512 points, 300 subcarriers around an empty DC, 14 symbols of 1 ms. */
function fiveMegahertz(changes: Partial<WaveformContent> = {}): WaveformContent {
  const used = (k: number): boolean => k !== 0 && Math.abs(k) <= 150;
  const plain = rowOf(512, (k) => (used(k) ? 1 : 0));
  const comb = (shift: number): number[] =>
    rowOf(512, (k) => (!used(k) ? 0 : ((k < 0 ? k + 150 : k + 149) + 600) % 6 === shift ? 2 : 1));
  return smallContent({
    fftSize: 512,
    symbolCount: 14,
    prefixSamples: [40, 36, 36, 36, 36, 36, 36],
    oversampling: 1,
    tray: [NULL_INK, dataInk(1, { constellation: '64qam', bitMap: 'ts38211', streamId: 's0' }), pilotInk(2, CONSTANT)],
    streams: [pnStream(0)],
    grid: { rows: [comb(0), plain, comb(3)], rowOfSymbol: [0, 1, 1, 1, 2, 1, 1, 0, 1, 1, 1, 2, 1, 1] },
    ...changes,
  });
}

describe('derived figures', () => {
  test('a 5 MHz frame, worked by hand', () => {
    const figures = deriveFigures(fiveMegahertz());
    expect(figures.sampleClock).toEqual({ numerator: 7680000n, denominator: 1n });
    expect(figures.usedSubcarriers).toBe(300);
    expect([figures.lowestSubcarrier, figures.highestSubcarrier]).toEqual([-150, 150]);
    expect(figures.loadedHz).toBe(4.5e6);
    expect(figures.paintedSpanHz).toBe(301 * 15000);
    expect(figures.usefulTimeSec).toBeCloseTo(1 / 15000, 15);
    expect(figures.frameTimeSec).toBeCloseTo(1e-3, 15);
    expect(figures.symbolTimeSec).toBeCloseTo(1e-3 / 14, 15);
    // four pilot symbols of 50 pilots each
    expect(figures.pilotCells).toBe(200);
    expect(figures.bitsPerFrame).toBe((14 * 300 - 200) * 6);
    expect(figures.bitRatePerSec).toBeCloseTo(24e6, 3);
    expect(figures.efficiency).toBeCloseTo(24e6 / 4.515e6, 9);
    expect(figures.prefixOverhead).toBeCloseTo(512 / 7680, 15);
    expect(figures.pilotOverhead).toBeCloseTo(200 / 4200, 15);
    expect(figures.usableGuardSamples).toBe(36);
    expect(figures.usableGuardSec).toBeCloseTo(36 / 7.68e6, 18);
    expect(figures.fileSamples).toBe(7680);
  });

  test('clock of an exact fraction: 64/7 µs elements of an 8 MHz channel', () => {
    const figures = deriveFigures(smallContent({ fftSize: 2048, subcarrierSpacingHz: [31250, 7], oversampling: 2 }));
    expect(figures.sampleClock).toEqual({ numerator: 128000000n, denominator: 7n });
    expect(figures.sampleClockHz).toBe(128e6 / 7);
  });

  test('gap and pad lengthen file and repeat, not the frame; a burst keeps its last suffix', () => {
    const timing = { mode: 'burst', repeats: 3, gapSamples: 100, padSamples: 7 } as const;
    const figures = deriveFigures(fiveMegahertz({ timing, overlapSamples: 8, oversampling: 4 }));
    expect(figures.fileSamples).toBe(3 * (7680 + 100) * 4 + 7 + 32);
    expect(figures.frameTimeSec).toBeCloseTo(1e-3, 15);
    expect(figures.repeatTimeSec).toBeCloseTo(7780 / 7.68e6, 15);
    expect(figures.usableGuardSamples).toBe(28);
  });

  test('nothing painted has no span, efficiency or pilot share', () => {
    const figures = deriveFigures(smallContent());
    expect(figures).toMatchObject({ lowestSubcarrier: null, paintedSpanHz: 0, efficiency: null, pilotOverhead: null });
  });

  test('a kept census equals a new one after edits', () => {
    const content = fiveMegahertz();
    const cells = expandGrid(content.grid, 512);
    const census = createCellCensus(content, cells);
    const before = cells.slice(512 * 3, 512 * 4);
    for (let p = 20; p < 60; p++) cells[512 * 3 + p] = 2;
    census.replaceSymbol(before, cells.subarray(512 * 3, 512 * 4));
    expect(deriveFigures(content, census)).toEqual(deriveFigures(content, cells));
    expect(deriveFigures(content)).toEqual(deriveFigures(content, expandGrid(content.grid, 512)));
  });

  test('fractions become the nearest double', () => {
    expect(fractionToNumber({ numerator: 1n, denominator: 3n })).toBe(1 / 3);
    expect(fractionToNumber({ numerator: 2n ** 80n + 1n, denominator: 2n ** 27n })).toBe(2 ** 53);
    expect(fractionToNumber({ numerator: -7n, denominator: 10n })).toBe(-0.7);
    expect(fractionToNumber({ numerator: (2n ** 54n + 2n) * 7n, denominator: 7n })).toBe(2 ** 54);
  });
});

describe('pilot reach', () => {
  const symbolTime = 1e-3 / 14;

  test('a shifted comb shows both pairs; the largest hole decides', () => {
    const reach = pilotReach(fiveMegahertz());
    expect(reach.pairs.map((pair) => [pair.kind, pair.subcarrierHole, pair.symbolHole])).toEqual([
      ['eachSymbol', 7, 4], // one hole of six cells spans the empty DC
      ['acrossSymbols', 4, 7],
    ]);
    const [first] = reach.pairs;
    expect(first!.delayWindowSec).toBeCloseTo(1 / (7 * 15000), 15);
    expect(first!.halfDelayWindowSec).toBeCloseTo(1 / (14 * 15000), 15);
    expect(first!.dopplerHz).toBeCloseTo(1 / (2 * 4 * symbolTime), 6);
    expect(pilotReach(fiveMegahertz(), expandGrid(fiveMegahertz().grid, 512))).toEqual(reach);
  });

  test('a plain comb has one pair, a lone pilot symbol is followed from repeat to repeat', () => {
    const comb = rowOf(64, (k) => (k % 4 === 0 ? 1 : 0));
    const content = smallContent({
      symbolCount: 4,
      prefixSamples: [16],
      tray: [NULL_INK, pilotInk(1, CONSTANT)],
      grid: { rows: [comb, [64, 0]], rowOfSymbol: [0, 1, 0, 1] },
    });
    expect(pilotReach(content).pairs).toHaveLength(1);
    expect(pilotReach(content).pairs[0]).toMatchObject({ subcarrierHole: 4, symbolHole: 2 });
    const lone = { ...content, grid: { rows: [comb, [64, 0]], rowOfSymbol: [0, 1, 1, 1] } };
    expect(pilotReach(lone).pairs[0]).toMatchObject({ symbolHole: 4 });
    const burst = { ...lone, timing: { ...lone.timing, mode: 'burst' as const } };
    expect(pilotReach(burst).pairs[0]).toMatchObject({ symbolHole: null, dopplerHz: null });
  });

  test('80 % of either reach is a caution', () => {
    const content = fiveMegahertz();
    expect(pilotReach(content).caution).toBe(false);
    const window = 1 / (7 * 15000);
    const other = 1 / (4 * 15000);
    expect(pilotReach(content, undefined, { delaySpreadSec: 0.8 * window }).pairs.map((pair) => pair.caution)).toEqual([
      true,
      false,
    ]);
    expect(pilotReach(content, undefined, { delaySpreadSec: 0.8 * other }).caution).toBe(true);
    expect(pilotReach(content, undefined, { dopplerHz: 0.81 / (2 * 4 * symbolTime) }).pairs[0]!.caution).toBe(true);
  });
});
