import {
  ccdfThresholds,
  createFrameMeasure,
  createFrameTally,
  createRamp,
  createSymbolSynthesis,
  createSymbolTally,
  createSynthesis,
  dbAtProbability,
  expandGrid,
  frameLayout,
  gaussianCcdf,
  gaussianSymbolCcdf,
  outstandingSymbols,
  sampleCcdf,
  symbolCcdf,
  tallySymbol,
  tallyTail,
  type FrameMeasure,
  type WaveformContent,
} from '@/lib/synth';
import { readCheck, testCheck } from '@/tests/helpers/checks';
import { dataInk, NULL_INK, pilotInk, factor, pnStream, rowOf, smallContent } from '@/tests/helpers/content';

const QPSK = dataInk(1, { constellation: 'qpsk', bitMap: 'ts38211', streamId: 's0' });

function measure(content: WaveformContent, cells?: Uint8Array): FrameMeasure {
  const measuring = createFrameMeasure(content, cells ? { cells } : {});
  while (measuring.step());
  return measuring.result();
}

/** QPSK on every subcarrier of `symbols` symbols. */
function fullQpsk(fftSize: number, symbols: number, changes: Partial<WaveformContent> = {}): WaveformContent {
  return smallContent({
    fftSize,
    symbolCount: symbols,
    tray: [NULL_INK, QPSK],
    streams: [pnStream(0)],
    grid: { rows: [[fftSize, 1]], rowOfSymbol: new Array<number>(symbols).fill(0) },
    ...changes,
  });
}

/** Every sample of the interpolated file, with its power, by plain loops: what the fast measures are held against. */
function plainPowers(content: WaveformContent): Float64Array {
  const synthesis = createSynthesis(content, {
    oversampling: content.oversampling * Math.ceil(4 / content.oversampling),
  });
  const samples = new Float64Array(2 * synthesis.samples);
  expect(synthesis.read(samples)).toBe(synthesis.samples);
  return Float64Array.from({ length: synthesis.samples }, (_, n) => samples[2 * n]! ** 2 + samples[2 * n + 1]! ** 2);
}

const instantaneous = readCheck<{ ccdf: number[]; db_at_prob: Record<string, number> }, { db_above_mean: number[] }>(
  'th.ccdf.inst',
);
const perSymbol = readCheck<Record<string, { nyquist: number[]; 'alpha2.8': number[] }>, { papr0_db: number[] }>(
  'th.ccdf.symbol',
);
const monteCarlo = readCheck<Record<string, Record<'L1' | 'L4', Record<string, number>>>>('th.ccdf.mc');
const phases = readCheck<Record<string, { newman: number; schroeder: number; equal: number }>>('th.phases');
const tones = readCheck<Record<string, number>>('th.tones');

describe('references', () => {
  testCheck('th.ccdf.inst', () => {
    const thresholds = Float64Array.from(instantaneous.input.db_above_mean);
    const curve = gaussianCcdf(thresholds);
    instantaneous.expected.ccdf.forEach((value, i) => expect(curve.probability[i]).toBeCloseTo(value, 12));
    const fine = gaussianCcdf(ccdfThresholds());
    for (const [probability, db] of Object.entries(instantaneous.expected.db_at_prob)) {
      expect(Math.abs(dbAtProbability(fine, Number(probability))! - db)).toBeLessThan(0.005);
    }
    expect(dbAtProbability(fine, 1e-60)).toBeNull();
  });

  testCheck('th.ccdf.symbol', () => {
    const thresholds = Float64Array.from(perSymbol.input.papr0_db);
    for (const [size, expected] of Object.entries(perSymbol.expected)) {
      const nyquist = gaussianSymbolCcdf(Number(size), thresholds, 1);
      const interpolated = gaussianSymbolCcdf(Number(size), thresholds);
      expected.nyquist.forEach((value, i) => expect(Math.abs(nyquist.probability[i]! - value)).toBeLessThan(1e-12));
      expected['alpha2.8'].forEach((value, i) =>
        expect(Math.abs(interpolated.probability[i]! - value)).toBeLessThan(1e-12),
      );
    }
  });

  testCheck('th.ccdf.mc', () => {
    // as many symbols as the check's own run, the payload continued over the repeats
    const timing = { mode: 'loop', repeats: 5, gapSamples: 0, padSamples: 0 } as const;
    // a Gold sequence: the three-term relation of a two-tap register raises the peaks of 128-bit symbols by 0.2 dB
    const streams = [pnStream(0, { source: { kind: 'gold', cInit: 7 }, acrossRepeats: 'continue' })];
    const result = measure(fullQpsk(64, 8000, { timing, streams }));
    const expected = monteCarlo.expected['64']!.L4;
    expect(Math.abs(dbAtProbability(result.symbolCcdf, 0.01)! - expected['db_at_1e-2']!)).toBeLessThan(0.15);
    for (const db of [7, 8, 9]) {
      const at = result.symbolCcdf.thresholdsDb.findIndex((value) => Math.abs(value - db) < 1e-9);
      expect(Math.abs(result.symbolCcdf.probability[at]! / expected[`P(>${db}dB)`]! - 1)).toBeLessThan(0.1);
    }
    // the samples' own curve is another one: that of a complex Gaussian
    expect(
      Math.abs(dbAtProbability(result.sampleCcdf, 1e-3)! - instantaneous.expected.db_at_prob['0.001']!),
    ).toBeLessThan(0.1);
  });

  testCheck('th.phases', () => {
    for (const [size, expected] of Object.entries(phases.expected)) {
      const count = Number(size);
      for (const [kind, db] of Object.entries({
        newman: expected.newman,
        schroeder: expected.schroeder,
        constant: expected.equal,
      })) {
        const sequence = kind === 'constant' ? ({ kind } as const) : { kind: kind as 'newman' | 'schroeder', count };
        // N tones side by side, 16 points to the N tones' own clock
        const content = smallContent({
          fftSize: 2 * count,
          oversampling: 8,
          tray: [NULL_INK, pilotInk(1, [factor(sequence)])],
          grid: { rows: [[count, 0, count, 1]], rowOfSymbol: [0] },
        });
        expect(Math.abs(measure(content).power.paprDb! - db)).toBeLessThan(1e-9);
      }
    }
  });

  testCheck('th.tones', () => {
    const constant = pilotInk(1, [factor({ kind: 'constant' })]);
    const papr = (painted: (k: number) => boolean): number =>
      measure(
        smallContent({
          fftSize: 64,
          tray: [NULL_INK, constant],
          grid: { rows: [rowOf(64, (k) => (painted(k) ? 1 : 0))], rowOfSymbol: [0] },
        }),
      ).power.paprDb!;
    expect(papr((k) => k === 5)).toBeCloseTo(tones.expected.lone_complex!, 6);
    expect(papr((k) => k === 5 || k === 9)).toBeCloseTo(tones.expected.complex_two_tone!, 6);
    expect(papr((k) => Math.abs(k) === 1)).toBeCloseTo(tones.expected['bpsk_dc_plus_minus_1_pair(k=-1,+1)']!, 6);
    expect(papr((k) => k >= 0 && k < 16)).toBeCloseTo(tones.expected.N_equal_16!, 6);
  });
});

describe('frame measure', () => {
  const content = fullQpsk(64, 5, {
    prefixSamples: [16, 8],
    overlapSamples: 6,
    oversampling: 3,
    timing: { mode: 'burst', repeats: 2, gapSamples: 20, padSamples: 9 },
    grid: {
      rows: [
        [64, 1],
        [64, 0],
        [20, 1, 44, 0],
      ],
      rowOfSymbol: [0, 1, 0, 2, 0],
    },
  });

  test('mean, peak and PAPR are those of a plain loop over the active spans', () => {
    const powers = plainPowers(content);
    const result = measure(content);
    expect(result.interpolation).toBe(6);
    const layout = frameLayout(content, 6);
    let sum = 0;
    let count = 0;
    let peak = 0;
    powers.forEach((power, n) => {
      const repeat = Math.min(1, Math.floor(n / layout.repeatSamples));
      const inside = n - repeat * layout.repeatSamples;
      const isActive = inside < (repeat === 1 ? layout.lastActiveSamples : layout.activeSamples);
      if (isActive) {
        sum += power;
        count++;
        peak = Math.max(peak, power);
      } else expect(power).toBe(0);
    });
    expect(result.power.samples).toBe(count);
    expect(result.power.meanPower / (sum / count)).toBeCloseTo(1, 13);
    expect(result.power.peakPower).toBe(peak);
    expect(result.power.paprDb).toBeCloseTo(10 * Math.log10(peak / (sum / count)), 10);
    expect(result.fileMeanPower / (sum / powers.length)).toBeCloseTo(1, 13);
    expect(result.histogram.total).toBe(count);
    // the silent symbol counts in the frame's mean and not in the active one
    expect(result.power.activeMeanPower).toBeGreaterThan(result.power.meanPower * 1.15);
    expect(result.symbolPaprDb[1]).toBeNaN();
    expect(result.outstanding).not.toContain(1);
  });

  test('per-symbol PAPR is over the useful part and its own mean', () => {
    const synthesis = createSymbolSynthesis(content, { oversampling: 6 });
    const useful = new Float64Array(2 * 64 * 6);
    const result = measure({ ...content, overlapSamples: 0, timing: { ...content.timing, repeats: 1 } });
    for (const symbol of [0, 2, 3, 4]) {
      synthesis.useful(0, symbol, useful);
      let sum = 0;
      let peak = 0;
      for (let n = 0; n < 384; n++) {
        const power = useful[2 * n]! ** 2 + useful[2 * n + 1]! ** 2;
        sum += power;
        peak = Math.max(peak, power);
      }
      expect(result.symbolPaprDb[symbol]).toBeCloseTo(10 * Math.log10((peak * 384) / sum), 10);
    }
  });

  test('many equal repeats measure like each of them', () => {
    const few = measure({ ...content, timing: { ...content.timing, repeats: 4 } });
    const running = {
      ...content,
      streams: [pnStream(0, { acrossRepeats: 'restart' })],
      timing: { ...content.timing, repeats: 4 },
    };
    const powers = plainPowers(running);
    expect(few.power.peakPower).toBe(powers.reduce((a, b) => Math.max(a, b)));
    expect(few.fileMeanPower / (powers.reduce((a, b) => a + b) / powers.length)).toBeCloseTo(1, 12);
    const layout = frameLayout(running, 6);
    expect(few.histogram.total).toBe(3 * layout.activeSamples + layout.lastActiveSamples);
  });

  test('sample CCDF counts what a plain loop counts', () => {
    const loop = fullQpsk(256, 40, { prefixSamples: [32] });
    const powers = plainPowers(loop);
    const result = measure(loop);
    const mean = powers.reduce((a, b) => a + b) / powers.length;
    result.sampleCcdf.thresholdsDb.forEach((db, i) => {
      const counted = powers.filter((power) => power > mean * 10 ** (db / 10)).length / powers.length;
      // within the 0.13 dB of a bin: a few per cent of what is left
      expect(Math.abs(result.sampleCcdf.probability[i]! - counted)).toBeLessThan(0.04 * counted + 20 / powers.length);
    });
    expect(symbolCcdf(result.symbolPaprDb, result.symbolCcdf.thresholdsDb).probability).toEqual(
      result.symbolCcdf.probability,
    );
  });

  test('nothing painted has no PAPR', () => {
    const result = measure(smallContent({ symbolCount: 3, prefixSamples: [4] }));
    expect(result.power).toMatchObject({ meanPower: 0, peakPower: 0, paprDb: null, activePaprDb: null });
    expect(result.sampleCcdf.probability.every((value) => value === 0)).toBe(true);
  });
});

describe('tallies', () => {
  const content = fullQpsk(64, 6, {
    prefixSamples: [16, 12],
    overlapSamples: 5,
    grid: {
      rows: [
        [64, 1],
        [64, 0],
        [20, 1, 44, 0],
      ],
      rowOfSymbol: [0, 1, 0, 2, 0, 0],
    },
  });

  /** What the live view does: useful parts at M', then a tally each, in a loop where the last suffix falls on the first symbol. */
  function tallied(of: WaveformContent): ReturnType<typeof createFrameTally> {
    const synthesis = createSymbolSynthesis(of, { oversampling: 4 });
    const ramp = createRamp(of.overlapSamples * 4);
    const parts = Array.from({ length: of.symbolCount }, (_, l) => {
      const useful = new Float64Array(2 * of.fftSize * 4);
      synthesis.useful(0, l, useful);
      return useful;
    });
    const frame = createFrameTally(of.symbolCount);
    const tally = createSymbolTally();
    parts.forEach((useful, l) => {
      const previousUseful = parts[(l + of.symbolCount - 1) % of.symbolCount]!;
      tallySymbol(tally, useful, of.prefixSamples[l % of.prefixSamples.length]! * 4, { ramp, previousUseful });
      frame.replace(l, tally);
    });
    return frame;
  }

  test('together they give the frame measure', () => {
    const frame = tallied(content);
    const whole = measure(content);
    expect(frame.power().peakPower).toBe(whole.power.peakPower);
    expect(frame.power().meanPower / whole.power.meanPower).toBeCloseTo(1, 13);
    expect(frame.power().activeMeanPower / whole.power.activeMeanPower).toBeCloseTo(1, 13);
    expect([...frame.symbolPaprDb]).toEqual(
      [...whole.symbolPaprDb].map((value) => (Number.isNaN(value) ? NaN : (expect.closeTo(value, 10) as number))),
    );
    const thresholds = Float64Array.from([-3, 0, 3, 6, 8]);
    const live = sampleCcdf(frame.histogram(), frame.power().meanPower, thresholds).probability;
    const file = sampleCcdf(whole.histogram, whole.power.meanPower, thresholds).probability;
    live.forEach((value, i) => expect(value).toBeCloseTo(file[i]!, 12));
  });

  test('replacing a symbol and putting it back leaves no trace', () => {
    const frame = tallied(content);
    const before = { power: frame.power(), counts: frame.histogram().counts.slice(), total: frame.histogram().total };
    const other = tallied({ ...content, grid: { ...content.grid, rowOfSymbol: [2, 1, 0, 2, 0, 0] } });
    const tally = createSymbolTally();
    const useful = new Float64Array(2 * 256);
    createSymbolSynthesis(content, { oversampling: 4 }).useful(0, 3, useful);
    tallySymbol(tally, useful, 48);
    frame.replace(0, tally);
    expect(frame.histogram().counts).not.toEqual(before.counts);
    expect(other.power()).not.toEqual(before.power);
    const again = tallied(content);
    frame.clear(0);
    expect(frame.power().samples).toBe(before.power.samples - 4 * (64 + 16));
    const first = createSymbolTally();
    const last = new Float64Array(2 * 256);
    const synthesis = createSymbolSynthesis(content, { oversampling: 4 });
    synthesis.useful(0, 5, last);
    synthesis.useful(0, 0, useful);
    tallySymbol(first, useful, 64, { ramp: createRamp(20), previousUseful: last });
    frame.replace(0, first);
    expect(frame.power()).toEqual(again.power());
    expect(frame.histogram().counts).toEqual(before.counts);
    expect(frame.histogram().total).toBe(before.total);
  });

  test("a burst's tail is a slot of its own", () => {
    const burst = { ...content, timing: { ...content.timing, mode: 'burst' as const } };
    const synthesis = createSymbolSynthesis(burst, { oversampling: 4 });
    const ramp = createRamp(20);
    const frame = createFrameTally(7);
    const tally = createSymbolTally();
    let previous: Float64Array | null = null;
    for (let l = 0; l < 6; l++) {
      const useful = new Float64Array(2 * 256);
      synthesis.useful(0, l, useful);
      tallySymbol(tally, useful, burst.prefixSamples[l % 2]! * 4, { ramp, previousUseful: previous });
      frame.replace(l, tally);
      previous = useful;
    }
    tallyTail(tally, previous!, ramp);
    frame.replace(6, tally);
    const whole = measure(burst);
    expect(frame.power().samples).toBe(whole.power.samples);
    expect(frame.power().meanPower / whole.power.meanPower).toBeCloseTo(1, 13);
    expect(frame.power().peakPower).toBe(whole.power.peakPower);
  });

  test('a symbol 3 dB above the median peak is marked', () => {
    expect(outstandingSymbols(Float64Array.from([1, 1, 1, 1.99, 2.01, 0, 0, 0]))).toEqual([4]);
    expect(outstandingSymbols(new Float64Array(4))).toEqual([]);
  });

  test('the grid in the editor may replace the document’s', () => {
    const cells = expandGrid(content.grid, 64);
    cells.fill(0, 0, 64);
    expect(measure(content, cells).symbolPaprDb[0]).toBeNaN();
  });
});
