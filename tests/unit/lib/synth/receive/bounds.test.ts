import type { WaveformContent } from '@/lib/synth';
import { dataInk } from '@/tests/helpers/content';
import { captureOf, clockOf, frameSamplesOf, measuredOf, ofdmContent } from '@/tests/helpers/captures';

// Bounds that theory sets, with seeds: what a capture says is right to within them.

/**
 * Cramér–Rao bounds for a known signal of T samples in white noise, its gain and phase unknown: σ(f) = fs/2π·√(6/(SNR·T³)),
 * σ(τ) = 1/√(2·SNR·T·β²) samples, β² the mean square bandwidth in rad²/sample². Source: Kay, "Fundamentals of statistical signal
 * processing: estimation theory", 1993, examples 3.13 and 3.14 (from memory).
 */
describe('timing and offset stand within twice the Cramér–Rao bound', () => {
  const content = ofdmContent(64, 26, 14, 16, { oversampling: 2 });
  const samples = frameSamplesOf(content);
  const trials = 8;
  const squares = [...Array(27).keys()].slice(1).map((k) => ((2 * Math.PI) / 128) ** 2 * k * k);
  const bandwidth = squares.reduce((sum, value) => sum + value, 0) / squares.length;

  test.each([10, 20, 30])('at %i dB', (snrDb) => {
    let offsetSquares = 0;
    let delaySquares = 0;
    for (let trial = 0; trial < trials; trial++) {
      const delaySamples = 3 + 0.137 * trial;
      const frequencyOffsetHz = 137.3 + 911 * trial;
      const data = captureOf(
        content,
        { snrDb, delaySamples, frequencyOffsetHz, phaseDeg: 9 * trial, seed: 100 + trial },
        samples,
      );
      const capture = measuredOf(content, data);
      offsetSquares += (capture.offsetHz - frequencyOffsetHz) ** 2;
      delaySquares += (capture.delaySamples - delaySamples) ** 2;
    }
    const snr = 10 ** (snrDb / 10);
    const offsetBound = (clockOf(content) / (2 * Math.PI)) * Math.sqrt(6 / (snr * samples ** 3));
    const delayBound = 1 / Math.sqrt(2 * snr * samples * bandwidth);
    expect(Math.sqrt(offsetSquares / trials)).toBeLessThan(2 * offsetBound);
    expect(Math.sqrt(delaySquares / trials)).toBeLessThan(2 * delayBound);
    // and not below it by more than chance: the noise is what it says
    expect(Math.sqrt(offsetSquares / trials)).toBeGreaterThan(0.4 * offsetBound);
    expect(Math.sqrt(delaySquares / trials)).toBeGreaterThan(0.4 * delayBound);
  });
});

/** Offset 137.3 Hz, delay 1234.4 samples, gain −17.2 dB, phase 71°. */
const PLACED = { frequencyOffsetHz: 137.3, delaySamples: 1234.4, gainDb: -17.2, phaseDeg: 71 };

/** Every cell of the same power, so that theory needs no mean over a constellation. */
function evenContent(fftSize: number, reach: number, symbolCount: number, prefix: number): WaveformContent {
  const content = ofdmContent(fftSize, reach, symbolCount, prefix, { oversampling: 2 });
  const qpsk = dataInk(1, { constellation: 'qpsk', bitMap: 'ts38211', streamId: 's0' });
  return { ...content, tray: content.tray.map((ink, place) => (place === 1 ? qpsk : ink)) };
}

describe('EVM within 0.2 dB of theory', () => {
  const content = evenContent(256, 120, 14, 32);
  const samples = 2 * frameSamplesOf(content);
  /** Noise is spread over N·M bins, the signal stands in 240 of them: the SNR of a used cell is higher by that. */
  const inCellsDb = 10 * Math.log10((2 * 256) / 240);

  test.each([10, 20, 30, 40])('one path, %i dB', (snrDb) => {
    const capture = measuredOf(content, captureOf(content, { ...PLACED, snrDb, seed: snrDb }, samples));
    expect(Math.abs(capture.evm.all.db! + snrDb + inCellsDb)).toBeLessThan(0.2);
    expect(Math.abs(capture.snrDb! - snrDb - inCellsDb)).toBeLessThan(0.2);
    expect(capture.gainDb).toBeCloseTo(-17.2, 1);
    // the first frame that begins in the capture
    expect(capture.delaySamples).toBeCloseTo(1234.4, 1);
    expect(capture.isClockShared).toBe(true);
    expect(capture.channel.paths).toHaveLength(1);
  });

  test.each([10, 20, 30])('two paths inside the prefix, %i dB: −SNR + 10 lg((1 + a²)/(1 − a²))', (snrDb) => {
    const a = 0.5;
    const taps = [
      { delaySamples: 0, gainDb: 0, phaseDeg: 0 },
      { delaySamples: 32, gainDb: 20 * Math.log10(a), phaseDeg: 40 },
    ];
    const capture = measuredOf(content, captureOf(content, { ...PLACED, taps, snrDb, seed: 7 + snrDb }, samples));
    const penaltyDb = 10 * Math.log10((1 + a * a) / (1 - a * a));
    expect(Math.abs(capture.evm.all.db! + snrDb + inCellsDb - penaltyDb)).toBeLessThan(0.2);
    // the SNR itself is told apart from the fading
    expect(Math.abs(capture.snrDb! - snrDb - inCellsDb)).toBeLessThan(0.2);
    expect(capture.channel.paths.map(({ delaySamples }) => delaySamples)).toEqual([0, 16]);
    expect(capture.channel.paths[1]!.powerDb).toBeCloseTo(20 * Math.log10(a), 0);
  });

  test('the bias of the fit is said and taken out: √(1 − 1/S) but for the phases', () => {
    const short = evenContent(64, 26, 4, 16);
    let corrected = 0;
    let before = 0;
    const trials = 10;
    for (let seed = 0; seed < trials; seed++) {
      const data = captureOf(short, { snrDb: 20, seed: 40 + seed }, frameSamplesOf(short));
      const capture = measuredOf(short, data);
      expect(capture.evm.recipe).toMatchObject({ estimate: 'tapPerSubcarrier', symbolsPerTap: 4, frames: 1 });
      corrected += capture.evm.all.ratio! ** 2 / trials;
      before += 10 ** (capture.evm.all.uncorrectedDb! / 10) / trials;
    }
    const theoryDb = -20 - 10 * Math.log10(128 / 52);
    expect(Math.abs(10 * Math.log10(corrected) - theoryDb)).toBeLessThan(0.2);
    // four symbols behind a tap: 1 − 1/4, and three phases among 208 cells
    expect(10 * Math.log10(before / corrected)).toBeCloseTo(10 * Math.log10(1 - 1 / 4 - 1.5 / 208), 5);
  });

  test('from pilots the noise of the taps stays in, and is not called bias', () => {
    const data = captureOf(content, { ...PLACED, snrDb: 20, seed: 3 }, samples);
    const capture = measuredOf(content, data, { channel: 'pilots' });
    expect(capture.channel.source).toBe('pilots');
    expect(capture.evm.recipe).toMatchObject({ estimate: 'tapFromPilots', symbolsPerTap: null });
    expect(capture.evm.all.db).toBe(capture.evm.all.uncorrectedDb);
    const excessDb = capture.evm.all.db! + 20 + inCellsDb;
    expect(excessDb).toBeGreaterThan(0);
    expect(excessDb).toBeLessThan(0.4);
  });
});

test('I/Q imbalance, its image and DC are found', () => {
  const content = ofdmContent(256, 100, 14, 32);
  const data = captureOf(
    content,
    {
      ...PLACED,
      frequencyOffsetHz: 3 * 15000 + 137.3,
      snrDb: 40,
      imbalanceDb: 0.5,
      imbalanceDeg: 2,
      dcI: 0.01,
      dcQ: -0.02,
      seed: 9,
    },
    3 * frameSamplesOf(content),
  );
  const { imbalance } = measuredOf(content, data);
  expect(imbalance.gainDb).toBeCloseTo(0.5, 1);
  expect(imbalance.angleDeg!).toBeCloseTo(2, 0);
  // κ = (g + j·sin φ − cos φ)/(g + j·sin φ + cos φ)
  expect(imbalance.image).toMatchObject({ isBound: false });
  expect(imbalance.image!.db).toBeCloseTo(10 * Math.log10((0.0576 ** 2 + 0.0349 ** 2) / 4), 0);
  // the generator had none: only a bound is given
  expect(imbalance.generatorImage).toMatchObject({ isBound: true });
  expect(imbalance.dcDbfs!).toBeCloseTo(10 * Math.log10(0.0005), 0);
});
