import {
  createFrameMeasure,
  dbAtProbability,
  symbolCcdf,
  ccdfThresholds,
  createSymbolSynthesis,
  type WaveformContent,
} from '@/lib/synth';
import { describeCheck, testCheck } from '../../../helpers/checks';
import { NULL_INK, dataInk, factor, pilotInk, pnStream, rowOf, smallContent } from '../../../helpers/content';
import { renderSamples } from '../../../helpers/renderWords';

// What the tests beside this one leave of the checks' tables: every overlap, the real parts, the other sizes.

/** A symbol's own pulse with its ramps: one carrier at 0 Hz, one burst of N + N_cp + W samples. */
function pulseOf(overlapSamples: number): Float64Array {
  const content = smallContent({
    fftSize: 256,
    prefixSamples: [32],
    overlapSamples,
    timing: { mode: 'burst', repeats: 1, gapSamples: 0, padSamples: 0 },
    tray: [NULL_INK, pilotInk(1, [factor({ kind: 'constant' })])],
    grid: { rows: [rowOf(256, (k) => (k === 0 ? 1 : 0))], rowOfSymbol: [0] },
  });
  return renderSamples(content).filter((_, i) => i % 2 === 0);
}

describeCheck<Record<string, number[]>, { offsets: number[]; N: number }>('th.oob', (check) => {
  test.each([0, 4, 8, 16, 32])('overlap %i: Σ_k |P(f − k/N)|² of the rendered pulse', (overlap) => {
    const pulse = pulseOf(overlap);
    expect(pulse.length).toBe(256 + 32 + overlap);
    const known = new Map<number, number>();
    const powerAt = (subcarriers: number): number => {
      const before = known.get(subcarriers);
      if (before !== undefined) return before;
      let re = 0;
      let im = 0;
      pulse.forEach((value, n) => {
        const angle = (-2 * Math.PI * subcarriers * n) / 256;
        re += value * Math.cos(angle);
        im += value * Math.sin(angle);
      });
      known.set(subcarriers, re * re + im * im);
      return re * re + im * im;
    };
    const carriers = Array.from({ length: 120 }, (_, i) => (i < 60 ? i - 60 : i - 59));
    const density = (at: number): number => carriers.reduce((sum, k) => sum + powerAt(at - k), 0);
    let inBand = 0;
    for (let i = 0; i <= 320; i++) inBand += density(10 + i / 8) / 321; // the density ripples from carrier to carrier
    check.input.offsets.forEach((offset, i) => {
      const db = 10 * Math.log10(density(60 + offset) / inBand);
      expect(Math.abs(db - check.expected[`W${overlap}`]![i]!)).toBeLessThan(0.05);
    });
  });
});

describeCheck<Record<string, Record<string, number>>>('th.phases', (check) => {
  test.each(Object.keys(check.expected).map(Number))('%i carriers as a real multitone', (count) => {
    for (const kind of ['newman', 'schroeder'] as const) {
      // carriers 1…N, 64 samples a carrier; the real part is what one wire carries
      const content = smallContent({
        fftSize: 4 * count,
        oversampling: 16,
        tray: [NULL_INK, pilotInk(1, [factor({ kind, count })])],
        grid: { rows: [rowOf(4 * count, (k) => (k >= 1 && k <= count ? 1 : 0))], rowOfSymbol: [0] },
      });
      let peak = 0;
      let power = 0;
      const samples = renderSamples(content);
      for (let i = 0; i < samples.length; i += 2) {
        peak = Math.max(peak, samples[i]! ** 2);
        power += samples[i]! ** 2;
      }
      const db = 10 * Math.log10(peak / (power / (samples.length / 2)));
      expect(Math.abs(db - check.expected[count]![`${kind}_real_multitone`]!)).toBeLessThan(1e-9);
    }
  });
});

testCheck<Record<string, number>>('th.tones', ({ expected }) => {
  const realPapr = (subcarriers: number[]): number => {
    const content = smallContent({
      oversampling: 16,
      tray: [NULL_INK, pilotInk(1, [factor({ kind: 'constant' })])],
      grid: { rows: [rowOf(64, (k) => (subcarriers.includes(k) ? 1 : 0))], rowOfSymbol: [0] },
    });
    const real = renderSamples(content).filter((_, i) => i % 2 === 0);
    const power = real.reduce((sum, value) => sum + value * value, 0) / real.length;
    return 10 * Math.log10(Math.max(...real.map((value) => value * value)) / power);
  };
  expect(Math.abs(realPapr([4]) - expected.real_sine!)).toBeLessThan(1e-6);
  expect(Math.abs(realPapr([4, 8]) - expected.real_two_tone_equal!)).toBeLessThan(1e-6);
});

/** QPSK on all of N subcarriers, bits of a Gold sequence. */
function loaded(fftSize: number, symbolCount: number): WaveformContent {
  return smallContent({
    fftSize,
    symbolCount,
    tray: [NULL_INK, dataInk(1, { constellation: 'qpsk', bitMap: 'ts38211', streamId: 's0' })],
    streams: [pnStream(0, { source: { kind: 'gold', cInit: 31 } })],
    grid: { rows: [[fftSize, 1]], rowOfSymbol: new Array<number>(symbolCount).fill(0) },
  });
}

type Statistics = Record<'L1' | 'L4', Record<string, number>>;
describeCheck<Record<string, Statistics>>('th.ccdf.mc', (check) => {
  // The check ran 40 000 and 20 000 symbols; these are fewer, so that a probability near 10⁻² spreads by 14 %.
  test.each([
    [64, 8000],
    [256, 5000],
  ])('%i subcarriers, %i symbols, on the samples and between them', (fftSize, symbolCount) => {
    const content = loaded(fftSize, symbolCount);
    const synthesis = createSymbolSynthesis(content);
    const useful = new Float64Array(2 * fftSize);
    const nyquist = Float64Array.from({ length: symbolCount }, (_, symbol) => {
      synthesis.useful(0, symbol, useful);
      let peak = 0;
      let power = 0;
      for (let i = 0; i < useful.length; i += 2) {
        const now = useful[i]! ** 2 + useful[i + 1]! ** 2;
        peak = Math.max(peak, now);
        power += now / fftSize;
      }
      return 10 * Math.log10(peak / power);
    });
    const measuring = createFrameMeasure(content);
    while (measuring.step());
    const between = measuring.result().symbolPaprDb;
    for (const [name, papr] of [
      ['L1', nyquist],
      ['L4', between],
    ] as const) {
      const expected = check.expected[fftSize]![name];
      const at = dbAtProbability(symbolCcdf(papr, ccdfThresholds()), 0.01)!;
      expect(Math.abs(at - expected['db_at_1e-2']!)).toBeLessThan(0.15);
      expect(Math.abs(papr.reduce((sum, db) => sum + db, 0) / symbolCount - expected.mean_db!)).toBeLessThan(0.05);
    }
  });
});
