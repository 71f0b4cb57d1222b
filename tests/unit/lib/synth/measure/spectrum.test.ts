import {
  createCellPower,
  createDemodulator,
  createWelch,
  createWindow,
  decimateEnvelope,
  decimateMinMax,
  deriveFigures,
  expandGrid,
  frequencyOfBin,
  occupiedBandwidth,
  spectralNotch,
  welchSegment,
  welchSpectrum,
  worstUnpaintedLine,
  type Spectrum,
  type WaveformContent,
  type WindowKind,
} from '@/lib/synth';
import { describeCheck, testCheck } from '@/tests/helpers/checks';
import { dataInk, NULL_INK, pnStream, rowOf, smallContent } from '@/tests/helpers/content';
import { render, roundTo } from '@/tests/helpers/measures';

const KINDS: Record<string, WindowKind> = {
  boxcar: 'rectangular',
  hann: 'hann',
  hamming: 'hamming',
  blackman: 'blackman',
  blackmanharris: 'blackmanHarris',
  nuttall: 'nuttall',
  flattop: 'flatTop',
};

testCheck<Record<string, { enbw_bins: number; coherent_gain: number; scallop_db: number }>>('th.windows', (windows) => {
  for (const [name, expected] of Object.entries(windows.expected)) {
    const table = createWindow(KINDS[name]!, 4096);
    expect(table.enbwBins).toBeCloseTo(expected.enbw_bins, 9);
    expect(table.coherentGain).toBeCloseTo(expected.coherent_gain, 9);
    let re = 0;
    let im = 0;
    table.weights.forEach((weight, i) => {
      re += weight * Math.cos((Math.PI * i) / 4096);
      im += weight * Math.sin((Math.PI * i) / 4096);
    });
    const scallop = -20 * Math.log10(Math.hypot(re, im) / (table.coherentGain * 4096));
    expect(scallop).toBeCloseTo(expected.scallop_db, 6);
  }
});

describeCheck<Record<string, number>, { nperseg: number; overlap: number }>('th.welch', (welch) => {
  const { nperseg, overlap } = welch.input;
  const options = { segmentLength: nperseg, clockHz: 1, window: 'hann', overlapSamples: overlap } as const;

  test('a tone at a bin’s centre reads A²/(ENBW·df)', () => {
    const samples = new Float64Array(2 * 8192);
    for (let n = 0; n < 8192; n++) {
      samples[2 * n] = Math.cos((2 * Math.PI * 100 * n) / 1024);
      samples[2 * n + 1] = Math.sin((2 * Math.PI * 100 * n) / 1024);
    }
    const spectrum = welchSpectrum(samples, options);
    const peak = spectrum.density.indexOf(spectrum.density.reduce((a, b) => Math.max(a, b)));
    expect(frequencyOfBin(spectrum, peak)).toBeCloseTo(100 / 1024, 12);
    expect(spectrum.density[peak]).toBeCloseTo(welch.expected.tone_A1_fs1_peak_density!, 6);
    expect(spectrum.rbwHz).toBeCloseTo(1.5 / 1024, 9);
    expect(spectrum.segments).toBe(15);
  });

  test('white noise of unit power has density 1, and the sum over all bins is the mean power', () => {
    const content = smallContent({
      fftSize: 1024,
      symbolCount: 100,
      tray: [NULL_INK, dataInk(1, { constellation: '64qam', bitMap: 'ts38211', streamId: 's0' })],
      streams: [pnStream(0, { source: { kind: 'gold', cInit: 5 } })],
      grid: { rows: [[1024, 1]], rowOfSymbol: new Array<number>(100).fill(0) },
    });
    const samples = render(content);
    const estimate = createWelch(options);
    for (let at = 0; at < samples.length; at += 6000) estimate.push(samples.subarray(at, at + 6000));
    const spectrum = estimate.result();
    const power = spectrum.density.reduce((a, b) => a + b) * spectrum.binHz;
    const mean = samples.reduce((sum, value) => sum + value * value, 0) / (samples.length / 2);
    expect(Math.abs(power / mean - welch.expected.parseval_ratio_measured!)).toBeLessThan(0.02);
    expect(
      Math.abs(spectrum.density.reduce((a, b) => a + b) / 1024 - welch.expected.white_unit_power_fs1_density!),
    ).toBeLessThan(0.02);
    expect(welchSpectrum(samples, options).density).toEqual(spectrum.density);
  });
});

/** 120 subcarriers ±1…60 of N 256, prefix 32, as the check describes. */
function shoulderContent(overlapSamples: number, symbolCount: number): WaveformContent {
  return smallContent({
    fftSize: 256,
    symbolCount,
    prefixSamples: [32],
    overlapSamples,
    subcarrierSpacingHz: [1, 1],
    tray: [NULL_INK, dataInk(1, { constellation: 'qpsk', bitMap: 'ts38211', streamId: 's0' })],
    streams: [pnStream(0, { source: { kind: 'gold', cInit: 11 } })],
    grid: {
      rows: [rowOf(256, (k) => (k !== 0 && Math.abs(k) <= 60 ? 1 : 0))],
      rowOfSymbol: new Array<number>(symbolCount).fill(0),
    },
  });
}

describeCheck<Record<string, number[]>, { offsets: number[] }>('th.oob', (shoulders) => {
  test.each([0, 16])('overlap %i', (overlapSamples) => {
    const spectrum = welchSpectrum(render(shoulderContent(overlapSamples, 2000)), {
      segmentLength: 2048,
      clockHz: 256,
    });
    const density = (from: number, to: number): number => {
      let sum = 0;
      let count = 0;
      spectrum.density.forEach((value, i) => {
        const hz = frequencyOfBin(spectrum, i);
        if (hz < from || hz > to) return;
        sum += value;
        count++;
      });
      return sum / count;
    };
    const inBand = density(10, 50);
    shoulders.input.offsets.forEach((offset, i) => {
      // two estimates either side, each over half a subcarrier
      const found = (density(59.75 + offset, 60.25 + offset) + density(-60.25 - offset, -59.75 - offset)) / 2;
      const db = 10 * Math.log10(found / inBand);
      expect(Math.abs(db - shoulders.expected[`W${overlapSamples}`]![i]!)).toBeLessThan(1);
    });
  });
});

describe('occupied bandwidth (ITU-R SM.328: 99 %, 0.5 % each side)', () => {
  const shape = (of: (hz: number) => number): Spectrum => {
    const density = Float64Array.from({ length: 1000 }, (_, i) => of(i - 500));
    return { density, binHz: 1, window: 'rectangular', rbwHz: 1, segments: 1 };
  };

  test('a flat band of B holds 99 % in 0.99 B', () => {
    // 400 bins −200…199 cover −200.5…199.5
    const band = occupiedBandwidth(shape((hz) => (hz >= -200 && hz < 200 ? 3 : 0)))!;
    expect(band.widthHz).toBeCloseTo(396, 9);
    expect(band.lowHz).toBeCloseTo(-198.5, 9);
    expect(band.highHz).toBeCloseTo(197.5, 9);
  });

  test('a triangle of half width B: 0.5 % beyond B(1 − √0.01) on each side', () => {
    const band = occupiedBandwidth(shape((hz) => Math.max(0, 400 - Math.abs(hz))))!;
    expect(Math.abs(band.widthHz - 2 * 400 * 0.9)).toBeLessThan(0.02);
  });

  test('a painted band lies a little inside its span; nothing has no band', () => {
    const content = shoulderContent(16, 200);
    const band = occupiedBandwidth(welchSpectrum(render(content), { segmentLength: 2048, clockHz: 256 }))!;
    expect(band.widthHz).toBeGreaterThan(0.98 * 121 * 0.99);
    expect(band.widthHz).toBeLessThan(deriveFigures(content).paintedSpanHz + 1);
    expect(occupiedBandwidth(shape(() => 0))).toBeNull();
  });
});

describe('notches: one hole, two figures', () => {
  const content = smallContent({
    fftSize: 512,
    symbolCount: 60,
    prefixSamples: [36],
    overlapSamples: 8,
    oversampling: 2,
    tray: [NULL_INK, dataInk(1, { constellation: '64qam', bitMap: 'ts38211', streamId: 's0' })],
    streams: [pnStream(0)],
    grid: {
      rows: [rowOf(512, (k) => (Math.abs(k) > 150 || (k >= 40 && k < 60) ? 0 : 1))],
      rowOfSymbol: new Array<number>(60).fill(0),
    },
  });

  test('cell notch of 16-bit words stands at the quantizing noise, the spectral one at the side lobes', () => {
    const words = roundTo(render(content), 16);
    const cells = expandGrid(content.grid, 512);
    const power = createCellPower(content, cells);
    const demodulator = createDemodulator(content, (_repeat, symbol, found) => power.add(symbol, found));
    demodulator.push(words);
    const notch = power.notch();
    expect(notch.nullCells).toBe(60 * 20);
    expect(notch.allDb!).toBeLessThan(-85);
    expect(notch.allDb!).toBeGreaterThan(-100);
    expect(notch.bySymbolDb.every((db) => Math.abs(db - notch.allDb!) < 6)).toBe(true);
    const clockHz = deriveFigures(content).sampleClockHz;
    const spectrum = welchSpectrum(words, { segmentLength: 4096, clockHz });
    const hole = spectralNotch(
      spectrum,
      { lowHz: 40 * 15e3, highHz: 59 * 15e3 },
      { lowHz: -150 * 15e3, highHz: 150 * 15e3 },
    );
    expect(hole.meanDb!).toBeLessThan(-15);
    expect(hole.meanDb!).toBeGreaterThan(-45);
    expect(hole.worstDb!).toBeGreaterThanOrEqual(hole.meanDb!);
    expect(hole).toMatchObject({ window: 'blackmanHarris', rbwHz: spectrum.rbwHz });
  });

  test('a line put into an unpainted subcarrier is the worst one, in dBc to the strongest painted', () => {
    const lines = new Float64Array(8).fill(1e-9);
    const painted = new Uint8Array(8);
    lines[5] = 2;
    lines[6] = 4;
    painted[5] = painted[6] = 1;
    lines[2] = 4e-6;
    expect(worstUnpaintedLine(lines, painted)).toEqual({ subcarrier: -2, dbc: expect.closeTo(-60, 9) as number });
    expect(worstUnpaintedLine(lines, new Uint8Array(8).fill(1))).toBeNull();
    expect(worstUnpaintedLine(new Float64Array(8), painted)).toBeNull();
  });

  test('the demodulated file shows an added line where it was added', () => {
    const samples = render(content);
    const rate = 1024;
    for (let n = 0; n < samples.length / 2; n++) {
      const symbol = Math.floor(n / (1024 + 72));
      const inside = n - symbol * (1024 + 72) - 72;
      samples[2 * n]! += 1e-3 * Math.cos((2 * Math.PI * 200 * inside) / rate);
      samples[2 * n + 1]! += 1e-3 * Math.sin((2 * Math.PI * 200 * inside) / rate);
    }
    const power = createCellPower(content, expandGrid(content.grid, 512));
    createDemodulator(content, (_r, symbol, found) => power.add(symbol, found)).push(samples);
    const line = power.worstUnpainted()!;
    expect(line.subcarrier).toBe(200);
    const carrier = power.linePower().reduce((a, b) => Math.max(a, b));
    expect(line.dbc).toBeCloseTo(10 * Math.log10((1e-6 * 512) / carrier), 6);
  });
});

describe('decimation', () => {
  test('no peak is skipped, whatever the columns', () => {
    const values = Float64Array.from({ length: 1000 }, (_, i) => Math.sin(i * 0.37) + (i === 617 ? 9 : 0));
    for (const columns of [1, 7, 390, 999, 1000]) {
      const out = new Float64Array(2 * columns);
      decimateMinMax(values, 0, 1000, columns, out);
      expect(out.reduce((a, b) => Math.max(a, b))).toBe(values[617]);
      expect(out.reduce((a, b) => Math.min(a, b))).toBe(values.reduce((a, b) => Math.min(a, b)));
    }
  });

  test('more columns than values repeat them; I and Q by stride; the envelope', () => {
    const out = new Float64Array(8);
    decimateMinMax(Float64Array.of(1, -1, 3, -3), 0, 2, 4, out, 2);
    expect([...out]).toEqual([1, 1, 1, 1, 3, 3, 3, 3]);
    decimateMinMax(Float64Array.of(1, -1, 3, -3), 1, 2, 1, out, 2);
    expect([...out.subarray(0, 2)]).toEqual([-3, -1]);
    decimateEnvelope(Float64Array.of(3, 4, 0, 0, 1, 0), 0, 3, 1, out);
    expect([...out.subarray(0, 2)]).toEqual([0, 5]);
    expect(() => decimateMinMax(out, 0, 0, 4, out)).toThrow('column');
  });
});

test('the Welch segment is 5-smooth and fits', () => {
  expect(welchSegment(30720)).toBe(4096);
  expect(welchSegment(881)).toBe(864);
  expect(welchSegment(1)).toBe(1);
});
