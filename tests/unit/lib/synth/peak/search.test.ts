import {
  createFrameMeasure,
  createPeakMeasure,
  createPhaseSearch,
  createSeedSearch,
  seedsOf,
  streamsWithSeed,
  trayWithPhases,
  type Ink,
  type PeakSearch,
  type WaveformContent,
} from '@/lib/synth';
import { describeCheck } from '../../../../helpers/checks';
import { NULL_INK, dataInk, factor, pilotInk, pnStream, rowOf, smallContent } from '../../../../helpers/content';

const tone: Ink = {
  inkId: 'k1',
  name: 'tones',
  role: 'tone',
  powerDb: 0,
  value: { factors: [], phaseDeg: 0, continuous: false },
};

function paprOf(content: WaveformContent): number {
  const measuring = createFrameMeasure(content);
  while (measuring.step());
  return measuring.result().power.paprDb!;
}

function finish<T>(search: PeakSearch<T>): PeakSearch<T> {
  while (search.step());
  return search;
}

/** `count` neighbouring tones of one size and phase. */
const tones = (count: number): WaveformContent =>
  smallContent({
    fftSize: 128,
    oversampling: 16,
    tray: [NULL_INK, tone],
    grid: { rows: [rowOf(128, (k) => (k >= 0 && k < count ? 1 : 0))], rowOfSymbol: [0] },
  });

describeCheck<Record<string, Record<'newman' | 'schroeder' | 'equal', number>>>('th.phases', (check) => {
  it.each([8, 16, 32, 64])('%i tones with the phases that a choice gives', (count) => {
    const content = tones(count);
    const { reach } = createPhaseSearch(content);
    expect(reach).toEqual({ ruled: [{ ink: 1, count }], single: [] });
    const expected = check.expected[count]!;
    expect(Math.abs(paprOf(content) - expected.equal)).toBeLessThan(0.01);
    for (const rule of ['newman', 'schroeder'] as const) {
      const tray = trayWithPhases(content.tray, reach, { rule, toneDeg: 0 });
      expect(Math.abs(paprOf({ ...content, tray }) - expected[rule])).toBeLessThan(0.01);
    }
  });
});

const payload = smallContent({
  symbolCount: 2,
  tray: [
    NULL_INK,
    dataInk(1, { constellation: '16qam', bitMap: 'ts38211', streamId: 's0' }),
    pilotInk(2, [factor({ kind: 'constant' })]),
    { ...tone, inkId: 'k3' },
  ],
  streams: [pnStream(0, { source: { kind: 'pn', stages: 9, taps: [5, 9], seed: 7, inverted: false } })],
  grid: { rows: [rowOf(64, (k) => (k === 20 ? 3 : Math.abs(k) > 20 ? 0 : k % 5 === 0 ? 2 : 1))], rowOfSymbol: [0, 0] },
});

describe('the search for phases', () => {
  it('finds the lowest of the rules and angles, as a tray', () => {
    const { reach } = createPhaseSearch(payload);
    const search = finish(createPhaseSearch(payload));
    expect(search).toMatchObject({ total: 48, done: 48, nowPaprDb: paprOf(payload) });
    const best = search.best!;
    const all = ['newman', 'schroeder'].flatMap((rule) =>
      Array.from({ length: 24 }, (_, i) => ({ rule: rule as 'newman', toneDeg: 15 * i })),
    );
    const paprs = all.map((choice) => paprOf({ ...payload, tray: trayWithPhases(payload.tray, reach, choice) }));
    expect(best.paprDb).toBe(Math.min(...paprs));
    expect(best.choice).toEqual(all[paprs.indexOf(best.paprDb)]);
    expect(best.content.tray[3]!.value).toMatchObject({ phaseDeg: best.choice.toneDeg });
  });

  it('has nothing to try without pilots and tones', () => {
    const bare = { ...payload, grid: { rows: [[64, 1]], rowOfSymbol: [0, 0] } };
    expect(finish(createPhaseSearch(bare))).toMatchObject({ total: 0, best: null });
  });
});

describe('the search for a seed', () => {
  const range = { streamId: 's0', first: 100, count: 12 };
  const withSeed = (seed: number) => ({ ...payload, streams: streamsWithSeed(payload.streams, 's0', seed) });

  it('finds the lowest of its range, in steps that may be left', () => {
    const search = createSeedSearch(payload, range);
    while (search.done < 3) search.step();
    expect(search.best === null || search.best.choice < 103).toBe(true);
    finish(search);
    const paprs = Array.from({ length: 12 }, (_, i) => paprOf(withSeed(100 + i)));
    expect(search.best).toMatchObject({ choice: 100 + paprs.indexOf(Math.min(...paprs)), paprDb: Math.min(...paprs) });
  });

  it('says that none is better', () => {
    const best = finish(createSeedSearch(payload, range)).best!;
    expect(finish(createSeedSearch(best.content, range))).toMatchObject({ done: 12, best: null });
  });

  it('knows which payloads have seeds, and refuses others', () => {
    expect(seedsOf(payload.streams[0]!.source)).toEqual({ least: 1, most: 511, now: 7 });
    expect(seedsOf({ kind: 'gold', cInit: 5 })).toEqual({ least: 0, most: 2147483647, now: 5 });
    expect(seedsOf({ kind: 'zeros' })).toBeNull();
    expect(() => createSeedSearch(payload, { ...range, first: 0 })).toThrow(
      expect.objectContaining({ code: 'bad_index' }),
    );
    expect(() => createSeedSearch(payload, { ...range, first: 505 })).toThrow(
      expect.objectContaining({ code: 'bad_index' }),
    );
    expect(() => createSeedSearch(payload, { ...range, streamId: 's3' })).toThrow(
      expect.objectContaining({ code: 'bad_content' }),
    );
  });
});

describe('the figures', () => {
  it('are all of one waveform, with the reduction’s report beside them', () => {
    const notched: WaveformContent = {
      ...payload,
      grid: { rows: [rowOf(64, (k) => (Math.abs(k) > 24 || (k >= 4 && k < 12) ? 0 : 1))], rowOfSymbol: [0, 0] },
      prefixSamples: [8],
    };
    const figuresOf = (content: WaveformContent) => {
      const measuring = createPeakMeasure(content);
      while (measuring.step());
      expect(measuring.doneSteps).toBe(measuring.totalSteps);
      return measuring.result();
    };
    const before = figuresOf(notched);
    expect(before.paprDb).toBe(paprOf(notched));
    expect(before.reduction).toBeNull();
    expect(before.notchDb!).toBeLessThan(-3);
    expect(before.occupiedHz!).toBeGreaterThan(30 * 15000);
    const clipped: WaveformContent = {
      ...notched,
      peakReduction: { kind: 'clipAndFilter', targetPaprDb: 5, iterations: 4 },
    };
    const after = figuresOf(clipped);
    expect(after.paprDb).toBe(paprOf(clipped));
    expect(after.paprDb!).toBeLessThan(before.paprDb!);
    expect(after.atOneInHundredDb!).toBeLessThan(before.atOneInHundredDb!);
    expect(after.reduction).toMatchObject({ kind: 'clipAndFilter', targetPaprDb: 5 });
    const silent = figuresOf({ ...notched, grid: { rows: [[64, 0]], rowOfSymbol: [0, 0] } });
    expect(silent).toMatchObject({ paprDb: null, worstSymbol: null, notchDb: null });
  });
});
