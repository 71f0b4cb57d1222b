import fc from 'fast-check';
import {
  createCellPower,
  createCellValues,
  createDemodulator,
  createEvmMeter,
  createFrameMeasure,
  createFrameStretches,
  createFrameSum,
  createSynthesis,
  frameLayout,
  stretchEnd,
  type WaveformContent,
} from '@/lib/synth';
import { arbitraryContent } from '../../../../helpers/arbitraryContent';
import { smallDocument } from '../../../../helpers/documents';
import { openTestEngine } from '../../../../helpers/sampleEngine';

const engine = openTestEngine();

const cutsOf = (content: WaveformContent, most: number, oversampling?: number): [number, number][] => {
  const layout = frameLayout(content, oversampling);
  const cuts: [number, number][] = [];
  for (let at = 0; at < layout.samples;) {
    const end = stretchEnd(layout, at, most);
    cuts.push([at, end]);
    at = end;
  }
  return cuts;
};

test('stretches end behind symbols or in silence, and are no longer than asked where a symbol fits', () => {
  fc.assert(
    fc.property(arbitraryContent(), fc.integer({ min: 1, max: 20000 }), (content, most) => {
      const layout = frameLayout(content);
      const longest = Math.max(...layout.prefixes) + layout.usefulSamples + layout.overlapSamples;
      for (const [at, end] of cutsOf(content, most)) {
        expect(end).toBeGreaterThan(at);
        expect(end - at).toBeLessThanOrEqual(Math.max(most, longest));
        if (end === layout.samples) continue;
        const repeat = Math.min(layout.repeats - 1, Math.floor(end / layout.repeatSamples));
        const inRepeat = end - repeat * layout.repeatSamples;
        const active = repeat === layout.repeats - 1 ? layout.lastActiveSamples : layout.activeSamples;
        expect(inRepeat >= active || layout.symbolStarts.includes(inRepeat)).toBe(true);
      }
    }),
    { numRuns: 60, seed: 3 },
  );
});

test("a frame's figures do not depend on the cuts, nor on who measures which stretch first", () => {
  fc.assert(
    fc.property(arbitraryContent(), fc.integer({ min: 1, max: 60000 }), (content, most) => {
      const whole = createFrameMeasure(content, { engine });
      while (whole.step());
      const stretches = createFrameStretches(content, { engine, keepBytes: 0 });
      const cuts: [number, number][] = [];
      for (let at = 0; at < stretches.samples;) {
        const end = stretches.endOf(at, most);
        cuts.push([at, end]);
        at = end;
      }
      const found = cuts.reverse().map(([at, end]) => stretches.measure(at, end));
      const sum = createFrameSum(content);
      for (const one of found.reverse()) sum.add(one);
      expect(sum.result()).toEqual(whole.result());

      const plain = createFrameStretches(content, { engine, counts: false });
      const bare = createFrameSum(content);
      for (const [at, end] of cuts.reverse()) bare.add(plain.measure(at, end));
      const { histogram, sampleCcdf, ...rest } = bare.result();
      expect(whole.result()).toMatchObject(rest);
      expect(sampleCcdf.probability.length + histogram.counts.length).toBeGreaterThan(0);
    }),
    { numRuns: 30, seed: 4 },
  );
});

test('what is found in stretches is what is found in one go, and as often as it is said to be there', () => {
  const { content } = smallDocument({
    frequencyOffsetHz: 1234.5,
    overlapSamples: 4,
    timing: { mode: 'burst', repeats: 3, gapSamples: 7, padSamples: 30 },
  });
  const values = createCellValues(content);
  const synthesis = createSynthesis(content);
  const samples = new Float64Array(2 * synthesis.samples);
  synthesis.read(samples);
  const open = () => ({
    meter: createEvmMeter({ fftSize: 64, symbolCount: 4, inkCount: 3, estimate: 'none' }),
    lines: createCellPower(content, values.cells),
    found: [] as string[],
  });
  type Found = ReturnType<typeof open>;
  const demodulate = (into: Found) => {
    const meant = new Float64Array(128);
    return createDemodulator(content, (repeat, symbol, cells) => {
      values.write(repeat, symbol, meant);
      const noisy = cells.map((value, i) => value + 0.01 * ((i * 37) % 11)); // so that there is an error to sum up
      into.meter.add(symbol, values.cells.subarray(64 * symbol, 64 * (symbol + 1)), noisy, meant);
      into.lines.add(symbol, noisy);
      if (symbol === 3) into.meter.endFrame();
      into.found.push(`${repeat}:${symbol}:${cells.slice(0, 20).join()}`);
    });
  };
  const whole = open();
  demodulate(whole).push(samples);
  const all = open();
  for (const [at, end] of cutsOf(content, 200)) {
    const part = open();
    const demodulator = demodulate(part);
    demodulator.seek(at);
    demodulator.push(samples.subarray(2 * at, 2 * end));
    all.meter.take(part.meter.sums);
    all.lines.take(part.lines.sums);
    all.found.push(...part.found);
  }
  expect(all.found).toEqual(whole.found);
  expect(all.meter.report().all.db).toBeCloseTo(whole.meter.report().all.db!, 10);
  expect(all.meter.report().recipe).toEqual(whole.meter.report().recipe);
  expect(all.meter.report().bySubcarrier.map(({ cells }) => cells)).toEqual(
    whole.meter.report().bySubcarrier.map(({ cells }) => cells),
  );
  expect(all.lines.notch().allDb).toBeCloseTo(whole.lines.notch().allDb!, 10);
  expect(all.lines.worstUnpainted()!.dbc).toBeCloseTo(whole.lines.worstUnpainted()!.dbc, 10);

  const thrice = open();
  thrice.meter.take(whole.meter.sums, 3);
  thrice.lines.take(whole.lines.sums, 3);
  expect(thrice.meter.report().all.cells).toBe(3 * whole.meter.report().all.cells);
  expect(thrice.meter.report().recipe.frames).toBe(9);
  expect(thrice.lines.linePower()[20]).toBeCloseTo(whole.lines.linePower()[20]!, 12);
});
