import {
  createCellValues,
  createDemodulator,
  createEvmMeter,
  createTapEstimate,
  deriveFigures,
  expandGrid,
  type EvmOptions,
  type EvmReport,
  type WaveformContent,
} from '@/lib/synth';
import { quantize } from '@/lib/synth/quantize/quantize';
import { describeCheck, readCheck, testCheck } from '@/tests/helpers/checks';
import { dataInk, factor, NULL_INK, pilotInk, pnStream, rowOf, smallContent } from '@/tests/helpers/content';
import { noise, normalPair, render, roundTo } from '@/tests/helpers/measures';

const CHANNEL = readCheck<Record<string, number>, { channels: Record<string, Record<string, [number, number]>> }>(
  'th.cp.channel',
);
const EVM_SNR = readCheck<{ evm_pct: number[] }, { snr_db: number[] }>('th.evm.snr');
const SQNR = readCheck<Record<string, { cf_component_db: number }>>('th.sqnr.ofdm');
const LOADING =
  readCheck<Record<string, { best_sqnr_db: number; 'at_component_backoff_db(A/sigma)': number }>>('th.loading');

const QAM64 = dataInk(1, { constellation: '64qam', bitMap: 'ts38211', streamId: 's0' });

function ofdm(
  fftSize: number,
  reach: number,
  symbolCount: number,
  prefix: number,
  changes: Partial<WaveformContent> = {},
): WaveformContent {
  return smallContent({
    fftSize,
    symbolCount,
    prefixSamples: [prefix],
    tray: [NULL_INK, QAM64],
    streams: [pnStream(0, { source: { kind: 'gold', cInit: 99 } })],
    grid: {
      rows: [rowOf(fftSize, (k) => (k !== 0 && Math.abs(k) <= reach ? 1 : 0))],
      rowOfSymbol: new Array<number>(symbolCount).fill(0),
    },
    ...changes,
  });
}

/** Demodulates and compares with the document's own values; symbols below `firstSymbol` are left out. */
function evmOf(
  content: WaveformContent,
  samples: Float64Array,
  estimate: EvmOptions['estimate'] = 'none',
  firstSymbol = 0,
): EvmReport {
  const values = createCellValues(content);
  const meant = new Float64Array(2 * content.fftSize);
  const cells = expandGrid(content.grid, content.fftSize);
  const meter = createEvmMeter({
    fftSize: content.fftSize,
    symbolCount: content.symbolCount,
    inkCount: content.tray.length,
    estimate,
  });
  const demodulator = createDemodulator(content, (repeat, symbol, found) => {
    if (symbol < firstSymbol) return;
    values.write(repeat, symbol, meant);
    meter.add(symbol, cells.subarray(symbol * content.fftSize, (symbol + 1) * content.fftSize), found, meant);
    if (symbol === content.symbolCount - 1) meter.endFrame();
  });
  for (let at = 0; at < samples.length; at += 2 * 777) demodulator.push(samples.subarray(at, at + 2 * 777));
  expect(demodulator.symbolsFound).toBe(content.symbolCount * content.timing.repeats);
  return meter.report();
}

describe('known timing', () => {
  const everything = ofdm(60, 25, 5, 9, {
    prefixSamples: [9, 7],
    overlapSamples: 5,
    oversampling: 3,
    frequencyOffsetHz: 12345.6,
    timing: { mode: 'burst', repeats: 3, gapSamples: 17, padSamples: 11 },
    streams: [pnStream(0, { acrossRepeats: 'continue' })],
    tray: [
      NULL_INK,
      QAM64,
      pilotInk(2, [factor({ kind: 'zadoffChu', length: 63, root: 25, shift: 0 })], 3),
      { inkId: 'k3', name: 'CW', role: 'tone', powerDb: -6, value: { factors: [], phaseDeg: 30, continuous: true } },
    ],
    grid: {
      rows: [
        rowOf(60, (k) => (k === 11 ? 3 : k % 5 === 0 ? 2 : Math.abs(k) < 25 ? 1 : 0)),
        rowOf(60, (k) => (k === 11 ? 3 : Math.abs(k) < 20 ? 1 : 0)),
      ],
      rowOfSymbol: [0, 1, 0, 1, 0],
    },
  });

  test('cells come back: prefix list, overlap, oversampling, offset, gaps, continuous tone', () => {
    const report = evmOf(everything, render(everything));
    expect(report.all.db!).toBeLessThan(-280);
    expect(report.byInk.map((figure) => figure.cells)).toEqual([0, expect.any(Number), expect.any(Number), 15]);
    expect(report.byInk.slice(1).every((figure) => figure.db! < -270)).toBe(true);
    expect(report.bySymbol).toHaveLength(5);
    expect(report.bySubcarrier[11 + 30]!.cells).toBe(15);
    expect(report.recipe).toMatchObject({ estimate: 'none', frames: 3, phaseTracking: 'none' });
    expect(report.correlation).toBeCloseTo(1, 12);
  });

  test('a loop whose last suffix wraps comes back too', () => {
    const loop = { ...everything, timing: { mode: 'loop' as const, repeats: 2, gapSamples: 0, padSamples: 0 } };
    expect(evmOf(loop, render(loop)).all.db!).toBeLessThan(-280);
  });
});

describeCheck('th.cp.channel', () => {
  // the check's own payload: PN15 as a plain register, drawn cell after cell
  const content = ofdm(256, 100, 12, 32, {
    streams: [pnStream(0, { source: { kind: 'pn', stages: 15, taps: [14, 15], seed: 32767, inverted: false } })],
  });
  const clean = render(content);

  test.each(Object.entries(CHANNEL.input.channels))('%s', (name, taps) => {
    const samples = new Float64Array(clean.length);
    const response = new Float64Array(512);
    for (const [delay, [re, im]] of Object.entries(taps)) {
      for (let n = Number(delay); n < clean.length / 2; n++) {
        const from = n - Number(delay);
        samples[2 * n]! += re * clean[2 * from]! - im * clean[2 * from + 1]!;
        samples[2 * n + 1]! += re * clean[2 * from + 1]! + im * clean[2 * from]!;
      }
      for (let p = 0; p < 256; p++) {
        const angle = (-2 * Math.PI * (p - 128) * Number(delay)) / 256;
        response[2 * p]! += re * Math.cos(angle) - im * Math.sin(angle);
        response[2 * p + 1]! += re * Math.sin(angle) + im * Math.cos(angle);
      }
    }
    const exact = { taps: response, from: 'tapPerSubcarrier', symbolsPerTap: null } as const;
    const db = evmOf(content, samples, exact, 1).all.db!;
    const expected = CHANNEL.expected[name]!;
    if (expected < -280) expect(db).toBeLessThan(-280);
    else expect(Math.abs(db - expected)).toBeLessThan(0.1);
  });

  test('overlap takes its samples out of the guard: N_cp − W is what is left', () => {
    const windowed = ofdm(256, 100, 12, 32, { overlapSamples: 8 });
    const samples = render(windowed);
    const through = (delay: number): number => {
      const delayed = samples.slice();
      for (let n = delay; n < samples.length / 2; n++) {
        delayed[2 * n]! += 0.25 * samples[2 * (n - delay)]!;
        delayed[2 * n + 1]! += 0.25 * samples[2 * (n - delay) + 1]!;
      }
      const response = new Float64Array(512);
      for (let p = 0; p < 256; p++) {
        const angle = (-2 * Math.PI * (p - 128) * delay) / 256;
        response[2 * p] = 1 + 0.25 * Math.cos(angle);
        response[2 * p + 1] = 0.25 * Math.sin(angle);
      }
      return evmOf(windowed, delayed, { taps: response, from: 'tapPerSubcarrier', symbolsPerTap: null }, 1).all.db!;
    };
    expect(through(24)).toBeLessThan(-280);
    expect(through(26)).toBeGreaterThan(-120);
  });
});

describeCheck('th.evm.snr', () => {
  // a symbol's worth of white noise of power σ² over the samples is σ² on each of the N cells
  const content = ofdm(256, 120, 60, 0);
  const clean = render(content);
  const withNoise = (snrDb: number, seed: number): Float64Array => {
    const random = noise(seed);
    const deviation = Math.sqrt(10 ** (-snrDb / 10) / 2);
    const samples = clean.slice();
    for (let n = 0; n < samples.length; n += 2) {
      const [re, im] = normalPair(random);
      samples[n]! += deviation * re;
      samples[n + 1]! += deviation * im;
    }
    return samples;
  };

  test.each(EVM_SNR.input.snr_db.map((snr, i) => [snr, EVM_SNR.expected.evm_pct[i]!]))(
    '%i dB reads %f %%',
    (snr, percent) => {
      const report = evmOf(content, withNoise(snr, snr));
      // 14 400 cells: the ratio spreads by 0.4 %
      expect(Math.abs((100 * report.all.ratio!) / percent - 1)).toBeLessThan(0.02);
    },
  );

  test('a fitted gain takes level and phase out, however small the error', () => {
    const samples = withNoise(40, 1);
    const turned = samples.map((_, i) =>
      i % 2 === 0 ? 0.3 * samples[i]! - 0.4 * samples[i + 1]! : 0.3 * samples[i]! + 0.4 * samples[i - 1]!,
    );
    expect(evmOf(content, turned).all.db!).toBeGreaterThan(-5);
    expect(Math.abs(evmOf(content, turned, 'oneGain').all.db! + 40)).toBeLessThan(0.2);
    const exact = clean.map((_, i) =>
      i % 2 === 0 ? 0.3 * clean[i]! - 0.4 * clean[i + 1]! : 0.3 * clean[i]! + 0.4 * clean[i - 1]!,
    );
    expect(evmOf(content, exact, 'oneGain').all.db!).toBeLessThan(-140);
    const nearly = clean.map((value) => value * (1 + 1e-9));
    expect(evmOf(content, nearly, 'oneGain').all.db!).toBeLessThan(-280);
  });

  test('taps by least squares over S symbols read 10 lg(1 − 1/S) low, which is corrected and shown', () => {
    const few = { ...content, symbolCount: 4, grid: { ...content.grid, rowOfSymbol: [0, 0, 0, 0] } };
    const samples = withNoise(20, 9).subarray(0, 2 * 256 * 4);
    const estimate = createTapEstimate(256);
    const values = createCellValues(few);
    const meant = new Float64Array(512);
    const known = new Uint8Array(256).map((_, p) => (p === 128 || Math.abs(p - 128) > 120 ? 0 : 1));
    createDemodulator(few, (repeat, symbol, found) => {
      values.write(repeat, symbol, meant);
      estimate.add(known, found, meant);
    }).push(samples);
    const report = evmOf(few, samples, { taps: estimate.taps(), from: 'tapPerSubcarrier', symbolsPerTap: 4 });
    expect(Math.abs(report.all.uncorrectedDb! - (-20 + 10 * Math.log10(1 - 1 / 4)))).toBeLessThan(0.3);
    expect(report.all.db! - report.all.uncorrectedDb!).toBeCloseTo(-10 * Math.log10(1 - 1 / 4), 9);
  });

  test('what does not look like the edition has no EVM, only its correlation', () => {
    const other = ofdm(256, 120, 60, 0, { streams: [pnStream(0, { source: { kind: 'gold', cInit: 12 } })] });
    const report = evmOf(content, render(other), 'oneGain');
    expect(report.correlation).toBeLessThan(0.05);
    expect(report.all).toMatchObject({ ratio: null, db: null });
    expect(report.byInk[1]!.db).toBeNull();
  });

  test('a fitted EVM is √(1/ρ² − 1)', () => {
    const report = evmOf(content, withNoise(10, 3), 'oneGain');
    expect(Math.abs(10 ** (report.all.uncorrectedDb! / 20) - Math.sqrt(1 / report.correlation ** 2 - 1))).toBeLessThan(
      1e-6,
    );
  });

  test('frames are pooled by power: a bad symbol weighs with its error, not with its dB', () => {
    const meter = createEvmMeter({ fftSize: 2, symbolCount: 2, inkCount: 2, estimate: 'none' });
    const row = Uint8Array.of(1, 0);
    meter.add(0, row, Float64Array.of(1.1, 0, 5, 5), Float64Array.of(1, 0, 0, 0));
    meter.add(1, row, Float64Array.of(1, 0.01, 5, 5), Float64Array.of(1, 0, 0, 0));
    const report = meter.report();
    expect(report.all.ratio).toBeCloseTo(Math.sqrt((0.01 + 0.0001) / 2), 12);
    expect(report.bySymbol[0]!.ratio).toBeCloseTo(0.1, 12);
    expect(report.bySymbol[1]!.ratio).toBeCloseTo(0.01, 12);
    expect(report.byInk[0]!.cells).toBe(0);
    expect(report.bySubcarrier[1]!.db).toBeNull();
  });
});

describe('quantizing noise', () => {
  describeCheck('th.sqnr.ofdm', () => {
    test.each([
      [256, 60, 8],
      [256, 60, 12],
      [256, 60, 16],
      [1024, 300, 12],
      [2048, 600, 16],
    ])('N %i, ±%i, %i bits', (fftSize, reach, bits) => {
      const content = ofdm(fftSize, reach, 20, Math.floor(fftSize / 8));
      expect(Object.keys(SQNR.expected)).toContain(`N${fftSize}.K${2 * reach}.b${bits}`);
      const samples = render(content);
      const words = roundTo(samples, bits);
      let signal = 0;
      let error = 0;
      samples.forEach((value, i) => {
        signal += value * value;
        error += (words[i]! - value) ** 2;
      });
      const sqnr = 10 * Math.log10(signal / error);
      const predicted = -(
        sqnr +
        10 * Math.log10(deriveFigures(content).sampleClockHz / deriveFigures(content).loadedHz)
      );
      expect(Math.abs(evmOf(content, words).all.db! - predicted)).toBeLessThan(0.3);
    });
  });

  testCheck('th.loading', () => {
    const random = noise(17);
    const samples = new Float64Array(200000);
    for (let n = 0; n < samples.length; n += 2) samples.set(normalPair(random), n);
    const signal = samples.reduce((sum, value) => sum + value * value, 0);
    const words = new Int16Array(samples.length);
    for (const [bits, expected] of Object.entries(LOADING.expected).filter(([b]) => Number(b) <= 12)) {
      const fullScale = 2 ** (Number(bits) - 1) - 1;
      const sqnr = (backoffDb: number): number => {
        const scale = fullScale / 10 ** (backoffDb / 20);
        quantize(samples, samples.length / 2, scale, fullScale, words, { components: 0, samples: 0 });
        let error = 0;
        samples.forEach((value, i) => (error += (words[i]! / scale - value) ** 2));
        return 10 * Math.log10(signal / error);
      };
      const at = expected['at_component_backoff_db(A/sigma)'];
      const best = sqnr(at);
      expect(Math.abs(best - expected.best_sqnr_db)).toBeLessThan(0.35);
      // the optimum is flat at its top and falls off to both sides
      expect(best).toBeGreaterThan(sqnr(at - 1.5));
      expect(best).toBeGreaterThan(sqnr(at + 1.5));
    }
  });
});
