import {
  clockBeyondWords,
  createLookAlikes,
  notFollowedWords,
  type Impairments,
  type WaveformContent,
} from '@/lib/synth';
import {
  captureOf,
  clockOf,
  frameSamplesOf,
  measuredOf,
  ofdmContent,
  receiveOf,
  sourceOf,
} from '@/tests/helpers/captures';
import { NULL_INK, pnStream, rowOf, smallContent } from '@/tests/helpers/content';
import { noise, normalPair } from '@/tests/helpers/measures';

const content = ofdmContent(64, 26, 14, 16);
const frame = frameSamplesOf(content);
const finer = ofdmContent(64, 26, 14, 16, { oversampling: 2 });

const swapIq = (data: Float64Array): Float64Array => data.map((_, i) => data[i ^ 1]!);
const negateQ = (data: Float64Array): Float64Array => data.map((value, i) => (i % 2 === 1 ? -value : value));

/** What would be found in noise alone. */
function noiseOf(samples: number, seed: number): Float64Array {
  const random = noise(seed);
  const data = new Float64Array(2 * samples);
  for (let i = 0; i < samples; i++) data.set(normalPair(random), 2 * i);
  return data;
}

test.each([1, 2, 3])('a frame of 14 symbols is found at −3 dB SNR, seed %i', (seed) => {
  const data = captureOf(content, { snrDb: -3, delaySamples: 300.3, frequencyOffsetHz: 4 * 15000 + 6000, seed }, frame);
  const capture = measuredOf(content, data);
  // ρ² = SNR/(1 + SNR)
  expect(capture.correlation.value).toBeCloseTo(Math.sqrt(0.5 / 1.5), 1);
  expect(Math.abs(capture.offsetHz - 66000)).toBeLessThan(60);
  expect(Math.abs(capture.delaySamples - 300.3)).toBeLessThan(0.3);
});

test.each([-8.4, -5, 7.5, 8])('a carrier offset of %d subcarriers', (subcarriers) => {
  const data = captureOf(
    finer,
    { snrDb: 25, frequencyOffsetHz: subcarriers * 15000, delaySamples: 77, seed: 5 },
    2 * frame,
  );
  const capture = measuredOf(finer, data);
  expect(capture.offsetSubcarriers).toBeCloseTo(subcarriers, 3);
  expect(capture.delaySamples).toBeCloseTo(77, 1);
});

test('a clock 20 ppm off is found and corrected', () => {
  const wide = ofdmContent(512, 200, 7, 40);
  for (const clockErrorPpm of [20, -20]) {
    const data = captureOf(wide, { clockErrorPpm, snrDb: 50, delaySamples: 200.25, seed: 6 }, 3 * frameSamplesOf(wide));
    const capture = measuredOf(wide, data);
    expect(capture.isClockShared).toBe(false);
    expect(capture.clockErrorPpm!).toBeCloseTo(clockErrorPpm, 1);
    // 50 dB and 1.07 dB for the part of the band: uncorrected, the clock alone would leave −34 dB
    expect(capture.evm.all.db!).toBeLessThan(-50.5);
    expect(capture.delaySamples).toBeCloseTo(200.25 * (1 + clockErrorPpm * 1e-6), 1);
  }
});

test.each([
  [3, 2],
  [2, 3],
  [25, 24],
  [64, 63],
  [1, 2],
  [7, 1],
] as [number, number][])('a capture at %i/%i of the clock, 12 ppm off', (p, q) => {
  const impairments: Partial<Impairments> = {
    clockRatio: [p, q],
    clockErrorPpm: 12,
    snrDb: 40,
    delaySamples: 123.4,
    frequencyOffsetHz: 137.3,
    seed: 8,
  };
  const data = captureOf(finer, impairments, Math.round((4 * frame * p) / q));
  const capture = measuredOf(finer, data, { clockHz: (clockOf(finer) * p) / q });
  expect(capture.clockRatio).toEqual([p, q]);
  expect(Math.abs(capture.clockErrorPpm! - 12)).toBeLessThan(1);
  expect(Math.abs(capture.offsetHz - 137.3)).toBeLessThan(0.5);
  expect(capture.delaySamples).toBeCloseTo(((123.4 * p) / q) * (1 + 12e-6), 1);
  // the noise stands in the capture's whole band, the signal in 52 of 128 · p/q bins
  expect(Math.abs(capture.evm.all.db! + 40 + 10 * Math.log10((128 * p) / q / 52))).toBeLessThan(0.6);
});

test('a clock that no fraction explains is refused with both numbers', () => {
  const result = receiveOf(content, captureOf(content, {}, frame), { clockHz: 1.0003 * clockOf(content) });
  expect(result).toMatchObject({ kind: 'refused', code: 'clock' });
  expect(result.kind === 'refused' && result.message).toMatch(/960288 Hz.*960000 Hz.*1\/1/);
});

describe('readings', () => {
  const data = captureOf(content, { snrDb: 30, delaySamples: 200.6, frequencyOffsetHz: 500, seed: 2 }, 2 * frame);

  test('the plain one', () => {
    expect(measuredOf(content, data).found).toEqual({ reading: 0, isMirrored: false });
  });

  test.each([
    ['I and Q swapped', swapIq],
    ['conjugated', negateQ],
  ])('%s: the mirror is found and said, the figures are the same', (_, wrong) => {
    const capture = measuredOf(content, wrong(data));
    expect(capture.found).toEqual({ reading: 0, isMirrored: true });
    expect(capture.evm.all.db!).toBeCloseTo(measuredOf(content, data).evm.all.db!, 1);
    expect(capture.offsetHz).toBeCloseTo(500, -1);
  });

  test('bytes swapped: the second reading is taken', () => {
    const swapped = data.map((value) => {
      const word = Math.round(value * 8000);
      return ((((word & 0xff) << 8) | ((word >> 8) & 0xff)) << 16) / 65536 / 32767;
    });
    const capture = measuredOf(content, data, { readings: [sourceOf(swapped), sourceOf(data)] });
    expect(capture.found).toEqual({ reading: 1, isMirrored: false });
  });

  test('a first reading that looks a little alike gives way to one that looks more so', () => {
    const buried = captureOf(content, { snrDb: -1, delaySamples: 200.6, frequencyOffsetHz: 500, seed: 2 }, 2 * frame);
    const readings = [sourceOf(buried), sourceOf(data)];
    expect(measuredOf(content, buried).correlation.value).toBeGreaterThan(0.4);
    expect(measuredOf(content, data, { readings }).found).toEqual({ reading: 1, isMirrored: false });
  });
});

describe('what is not the edition', () => {
  const other: WaveformContent = {
    ...content,
    tray: content.tray.map((ink) =>
      ink.role === 'pilot' ? { ...ink, value: { factors: [{ ...ink.value.factors[0]!, start: 5000 }] } } : ink,
    ),
    streams: [pnStream(0, { source: { kind: 'pn', stages: 23, taps: [18, 23], seed: 4711, inverted: true } })],
  };
  const third: WaveformContent = { ...other, streams: [pnStream(0, { source: { kind: 'gold', cInit: 5 } })] };
  const data = captureOf(other, { snrDb: 20, delaySamples: 41.3, frequencyOffsetHz: -188.4, seed: 12 }, 2 * frame);

  test('another edition: ρ and no EVM', () => {
    const result = receiveOf(content, data);
    expect(result).toMatchObject({ kind: 'unrecognised', correlation: { needed: 0.3 } });
    if (result.kind !== 'unrecognised') return;
    expect(result.correlation.value).toBeLessThan(0.3);
    expect(result.tried).toHaveLength(2);
    expect(result.curve).toHaveLength(512);
    expect(JSON.stringify(result)).not.toMatch(/evm/i);
  });

  test('which of several it looks like', () => {
    const looking = createLookAlikes(sourceOf(swapIq(data)), null, [content, third, other]);
    const alike = looking.result();
    expect(alike[0]).toMatchObject({ content: 2, isFound: true, isMirrored: true });
    expect(alike[0]!.correlation!).toBeGreaterThan(0.9);
    expect(alike[0]!.startSamples).toBeCloseTo(frame - 41.3, 0);
    // pilots alone are alike in the two: a sixth of the power
    expect(alike.slice(1).every(({ isFound }) => !isFound)).toBe(true);
  });

  test.each([1, 2, 3, 4])('noise alone is nothing, seed %i', (seed) => {
    expect(receiveOf(content, noiseOf(2 * frame, seed))).toMatchObject({ kind: 'unrecognised' });
    // one symbol of 64 samples reaches 0.3 by chance: more is asked of it
    const short = receiveOf(ofdmContent(64, 26, 1, 16), noiseOf(100, seed));
    expect(short).toMatchObject({ kind: 'unrecognised' });
    expect(short.kind === 'unrecognised' && short.correlation.needed).toBeGreaterThan(0.5);
  });

  test('zeros, nothing painted, no pilots, and less than a symbol are refused in words', () => {
    expect(receiveOf(content, new Float64Array(2 * frame))).toMatchObject({
      code: 'silent',
      message: 'All samples are zero.',
    });
    const bare = smallContent({ tray: [NULL_INK] });
    expect(receiveOf(bare, data)).toMatchObject({ kind: 'refused', code: 'nothingPainted' });
    const dataOnly = {
      ...content,
      grid: { ...content.grid, rows: [rowOf(64, (k) => (k !== 0 && Math.abs(k) < 20 ? 1 : 0))] },
    };
    expect(receiveOf(dataOnly, data, { channel: 'pilots' })).toMatchObject({ code: 'noPilots' });
    expect(receiveOf(content, data.subarray(0, 2 * 79))).toMatchObject({
      code: 'tooShort',
      message: "A symbol has 80 samples at the capture's clock; the capture has 79.",
    });
  });
});

test('values that are not numbers are refused with the first place, unless another reading is right', () => {
  const data = captureOf(content, { snrDb: 30, seed: 2 }, frame);
  const broken = data.map((value, i) => (i === 2 * 17 + 1 || i > 400 ? NaN : value));
  for (const holding of [broken, new Float64Array(2 * frame).fill(NaN)])
    expect(receiveOf(content, holding)).toMatchObject({
      kind: 'refused',
      code: 'notNumbers',
      message: `The capture holds values that are not numbers (NaN or infinite), the first in sample ${holding === broken ? 17 : 0}, counted from 0.`,
    });
  expect(measuredOf(content, broken, { readings: [sourceOf(broken), sourceOf(data)] }).found.reading).toBe(1);
});

test('ρ that is enough is not called too little', () => {
  expect(notFollowedWords({ value: 0.29, needed: 0.3 })).toBeNull();
  expect(notFollowedWords({ value: 0.41, needed: 0.3 })).toContain('at one place, but the symbols around it');
});

test.each([20, -20])('a clock error beyond %i ppm is said to be so', (ppm) => {
  expect(clockBeyondWords(ppm)).toBeNull();
  expect(clockBeyondWords(1.5 * ppm)).toContain('beyond the 20 ppm');
});

describe('captures shorter than the frame', () => {
  test('whole symbols are measured and said, the others have no figure', () => {
    const data = captureOf(content, { snrDb: 30, delaySamples: -300, seed: 3 }, 500);
    const capture = measuredOf(content, data);
    expect(capture.isPartFrame).toBe(true);
    expect(capture.startSamples).toBeCloseTo(300, 0);
    // 300 samples in: symbols 4 to 9 lie whole in the 500 that follow
    expect([...capture.symbolCounts]).toEqual([0, 0, 0, 0, 1, 1, 1, 1, 1, 1, 0, 0, 0, 0]);
    const { bySymbol } = capture.evm;
    expect(bySymbol.map(({ ratio }) => ratio !== null)).toEqual([...capture.symbolCounts].map((count) => count > 0));
  });

  test('a single symbol gets one gain and one delay, and no clock error', () => {
    const capture = measuredOf(content, captureOf(content, { snrDb: 40, seed: 4 }, 85));
    expect(capture).toMatchObject({
      symbols: 1,
      clockErrorPpm: null,
      offsetSigmaHz: null,
      channel: { source: 'oneGain', impulseDb: null },
    });
    expect(capture.evm.all.db!).toBeCloseTo(-40.9, -1);
  });
});
