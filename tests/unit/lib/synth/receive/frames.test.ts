import { fileNullPower, type WaveformContent } from '@/lib/synth';
import { readCheck, titleOf } from '@/tests/helpers/checks';
import { captureOf, frameSamplesOf, measuredOf, ofdmContent } from '@/tests/helpers/captures';
import { dataInk, NULL_INK, pnStream, rowOf, smallContent } from '@/tests/helpers/content';

const content = ofdmContent(64, 26, 6, 16, { oversampling: 2 });
const changed = (changes: Partial<WaveformContent>): WaveformContent => ({ ...content, ...changes });
const frame = frameSamplesOf(content);
const measured = (of: WaveformContent, delaySamples: number, frames: number) =>
  measuredOf(of, captureOf(of, { snrDb: 35, delaySamples, seed: 21 }, Math.round(frames * frame)));
/** 35 dB in 128 bins, the signal in 52 of them. */
const EVM_DB = -35 - 10 * Math.log10(128 / 52);

describe('loops and bursts of every kind', () => {
  test('a gap after each repeat', () => {
    const gapped = changed({ timing: { mode: 'loop', repeats: 3, gapSamples: 200, padSamples: 0 } });
    const capture = measured(gapped, 150.5, 4);
    // noise is relative to the mean with its gaps: lower in the symbols by 960/(960 + 400)
    expect(capture.evm.all.db!).toBeCloseTo(EVM_DB + 10 * Math.log10(frame / (frame + 400)), 0);
    expect(capture.frames).toBe(3);
  });

  test.each([0, 1, 2])('a pad behind the third repeat, capture beginning in repeat %i', (repeat) => {
    const padded = changed({ timing: { mode: 'loop', repeats: 3, gapSamples: 0, padSamples: 57 } });
    const capture = measured(padded, -repeat * frame - 100, 6);
    expect(capture.evm.all.db!).toBeCloseTo(EVM_DB, 0);
    expect(capture.symbols).toBeGreaterThanOrEqual(33);
  });

  test('a payload that goes on through the repeats is found at its own repeat', () => {
    const running = changed({
      timing: { mode: 'loop', repeats: 4, gapSamples: 0, padSamples: 12 },
      streams: [pnStream(0, { acrossRepeats: 'continue' })],
    });
    const capture = measured(running, -2 * frame - 31, 1.5);
    expect(capture.startSamples).toBeCloseTo(2 * frame + 31, 0);
    expect(capture.evm.all.db!).toBeCloseTo(EVM_DB, 0);
  });

  test('a burst of two repeats, with silence round it', () => {
    const burst = changed({ timing: { mode: 'burst', repeats: 2, gapSamples: 0, padSamples: 0 }, overlapSamples: 4 });
    const capture = measured(burst, 700.25, 4.5);
    expect(capture.symbols).toBe(12);
    expect(capture.delaySamples).toBeCloseTo(700.25, 1);
    expect(capture.evm.all.db!).toBeLessThan(-37);
  });

  test("the document's own frequency offset, in a loop that it does not close", () => {
    const moved = changed({
      frequencyOffsetHz: 137300,
      timing: { mode: 'loop', repeats: 2, gapSamples: 0, padSamples: 0 },
    });
    const capture = measuredOf(
      moved,
      captureOf(moved, { snrDb: 35, delaySamples: 90, frequencyOffsetHz: -412.5, seed: 2 }, 5 * frame),
    );
    expect(capture.offsetHz).toBeCloseTo(-412.5, 0);
    expect(capture.evm.all.db!).toBeCloseTo(EVM_DB, 0);
  });
});

test('a lowered peak is compared with what was sent, reserved cells filled', () => {
  const reserved = { inkId: 'k9', name: 'reserved', role: 'reserved', powerDb: 0, value: null } as const;
  const tray = [...content.tray, { ...reserved, inkId: `k${content.tray.length}` }];
  const place = content.tray.length;
  const filled = changed({
    tray,
    grid: {
      rows: [rowOf(64, (k) => (k === 0 || Math.abs(k) > 26 ? 0 : k % 7 === 3 ? place : 1))],
      rowOfSymbol: new Array<number>(content.symbolCount).fill(0),
    },
    peakReduction: { kind: 'clipAndFilter', targetPaprDb: 4, iterations: 4 },
  });
  const capture = measured(filled, 40.25, 3);
  // the reduction itself costs −25 dB and more: none of it is the device's
  expect(capture.evm.all.db!).toBeLessThan(EVM_DB + 1);
});

test('a notched run: power in the null cells, the worst of them, and the clipped share', () => {
  const notched = ofdmContent(256, 100, 6, 32, {
    grid: {
      rows: [rowOf(256, (k) => (k === 0 || Math.abs(k) > 100 || (k >= 20 && k < 40) ? 0 : 1))],
      rowOfSymbol: [0, 0, 0, 0, 0, 0],
    },
  });
  const clean = measuredOf(notched, captureOf(notched, { delaySamples: 12, seed: 1 }, 2 * frameSamplesOf(notched)));
  expect(clean.nulls.notch).toMatchObject({ lowSubcarrier: 20, highSubcarrier: 39 });
  expect(clean.nulls.notch!.db).toBeLessThan(-200);
  expect(clean.statistics).toMatchObject({ clippedSamples: 0, clipLevel: null });
  const clipped = measuredOf(
    notched,
    captureOf(notched, { delaySamples: 12, clipDbfs: 0.5, seed: 1 }, 2 * frameSamplesOf(notched)),
  );
  // what clipping throws into the notch is as strong as what it does to the cells
  expect(clipped.nulls.notch!.db).toBeGreaterThan(-30);
  expect(Math.abs(clipped.nulls.notch!.db - clipped.evm.all.db!)).toBeLessThan(3);
  expect(clipped.nulls.inside!.cells).toBe(21 * clipped.symbols);
  expect(clipped.nulls.worst!.db).toBeGreaterThan(clipped.nulls.inside!.db);
  expect(clipped.statistics.clippedSamples).toBeGreaterThan(20);
  // words of 8 bits leave their own noise there: a twelfth of a squared step in I and in Q, over cells of unit power
  const scale = 20;
  const own = fileNullPower(notched, { scale, fullScale: 127 });
  expect(Math.abs(own!.notch!.db - 10 * Math.log10(2 / 12 / scale ** 2))).toBeLessThan(1.5);
  expect(clipped.statistics.clipLevel).toBeCloseTo(10 ** (0.5 / 20), 6);
});

const CHANNEL = readCheck<Record<string, number>, { channels: Record<string, Record<string, [number, number]>> }>(
  'th.cp.channel',
);

describe(titleOf(CHANNEL), () => {
  const waveform = smallContent({
    fftSize: 256,
    symbolCount: 12,
    prefixSamples: [32],
    tray: [NULL_INK, dataInk(1, { constellation: '64qam', bitMap: 'ts38211', streamId: 's0' })],
    streams: [pnStream(0, { source: { kind: 'pn', stages: 15, taps: [14, 15], seed: 32767, inverted: false } })],
    grid: {
      rows: [rowOf(256, (k) => (k !== 0 && Math.abs(k) <= 100 ? 1 : 0))],
      rowOfSymbol: new Array<number>(12).fill(0),
    },
  });

  test.each(Object.entries(CHANNEL.input.channels))('%s', (name, paths) => {
    const taps = Object.entries(paths).map(([delay, [re, im]]) => ({
      delaySamples: Number(delay),
      gainDb: 20 * Math.log10(Math.hypot(re, im)),
      phaseDeg: (180 / Math.PI) * Math.atan2(im, re),
    }));
    const capture = measuredOf(waveform, captureOf(waveform, { taps }, 4 * frameSamplesOf(waveform)));
    const expected = CHANNEL.expected[name]!;
    // inside the prefix nothing is left (timing, offset and channel are all estimated: their last digits are); beyond it the symbol before is
    if (expected < -280) expect(capture.evm.all.db!).toBeLessThan(-140);
    else {
      // the check knows the channel; an estimated tap takes up to a·(delay − prefix)/N, what each carrier loses of itself, for channel
      const loss = taps.reduce(
        (sum, tap) => sum + (Math.max(0, tap.delaySamples - 32) / 256) * 10 ** (tap.gainDb / 20),
        0,
      );
      expect(capture.evm.all.db!).toBeLessThan(expected + 0.1);
      expect(capture.evm.all.db!).toBeGreaterThan(10 * Math.log10(10 ** (expected / 10) - loss * loss) - 0.1);
    }
  });
});
