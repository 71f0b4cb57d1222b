import {
  applyChanges,
  checkFit,
  createSynthesis,
  deriveFigures,
  loopClosing,
  payloadClosing,
  toneJumps,
  type BenchContent,
  type FitCheck,
  type FitFinding,
  type Ink,
  type MeasuredLevels,
  type WaveformContent,
} from '@/lib/synth';
import { periodOf } from '@/lib/synth/fit/period';
import { documentOf, measuredLevels, wideBench } from '@/tests/helpers/bench';
import { dataInk, NULL_INK, pnStream, rowOf, smallContent } from '@/tests/helpers/content';

const QPSK = dataInk(1, { constellation: 'qpsk', bitMap: 'ts38211', streamId: 's0' });

/** A ladder of 30 720 samples at 30.72 MHz: 14 symbols of 2048 points. */
function ladder(changes: Partial<WaveformContent> = {}): WaveformContent {
  return smallContent({
    fftSize: 2048,
    symbolCount: 14,
    prefixSamples: [160, 144, 144, 144, 144, 144, 144],
    level: { reference: 'interpolatedPeak', headroomDb: 1 },
    ...changes,
  });
}

function find(
  check: FitCheck,
  content: WaveformContent,
  bench: Partial<BenchContent> = {},
  levels: MeasuredLevels | null = measuredLevels(),
): FitFinding {
  return checkFit(documentOf(content), wideBench(bench), levels).find((one) => one.check === check)!;
}

describe('findings', () => {
  test('all limits in their order; a wide bench meets them', () => {
    const findings = checkFit(documentOf(ladder()), wideBench(), measuredLevels());
    expect(findings.map((one) => one.check)).toEqual([
      'clock',
      'granularity',
      'leastLength',
      'memory',
      'mode',
      'word',
      'markers',
      'seam',
      'toneJump',
      'payloadWrap',
      'symbolPeak',
      'headroom',
      'level',
    ]);
    expect(findings.filter((one) => one.verdict === 'misses')).toEqual([]);
    expect(findings.filter((one) => one.hard).map((one) => one.check)).toEqual([
      'clock',
      'granularity',
      'leastLength',
      'memory',
      'mode',
      'word',
      'markers',
    ]);
    // no limits given: never called good
    expect(findings.at(-1)!.verdict).toBe('cannotJudge');
  });

  test('length: 7.5 × 4096 is 2048 samples short; repeating twice mends it', () => {
    const found = find('granularity', ladder(), { granularitySamples: 4096 });
    expect(found).toMatchObject({
      verdict: 'misses',
      hard: true,
      measured: 30720,
      limit: 4096,
      distance: 2048,
      byHowMuch: '2048 samples short',
    });
    expect(found.words).toBe('30 720 samples are 7.5 × the granularity of 4096. Only whole multiples load.');
    expect(found.remedies.map((remedy) => remedy.label)).toEqual([
      'Repeat the frame 2 times: 61 440',
      'Oversample 2 times: 61 440',
      'Pad with 2048 silent samples: 32 768',
    ]);
    expect(found.remedies[0]!.changes).toEqual([{ pointer: '/content/timing/repeats', before: 1, after: 2 }]);
    expect(found.remedies[2]!.changes).toEqual([{ pointer: '/content/timing/padSamples', before: 0, after: 2048 }]);
    expect(found.remedies[2]!.cost).toContain('66.7 µs of silence at the wrap');
  });

  test('shortest length, memory', () => {
    const short = find('leastLength', ladder(), { leastSamples: 100000 });
    expect(short).toMatchObject({ verdict: 'misses', distance: 69280, byHowMuch: '69 280 samples short' });
    expect(short.remedies.map((remedy) => remedy.label)).toEqual([
      'Repeat the frame 4 times: 122 880',
      'Oversample 4 times: 122 880',
      'Pad with 69 280 silent samples: 100 000',
      'Repeat 3 times and pad with 7840: 100 000',
    ]);
    const large = find('memory', ladder(), { mostSamples: 30000 });
    expect(large).toMatchObject({ verdict: 'misses', byHowMuch: 'too long by 720 samples', remedies: [] });
    expect(find('memory', ladder()).found).toContain('30 720 of 1 099 511 627 776');
    // a pad that the memory cannot hold is no remedy
    expect(find('granularity', ladder(), { granularitySamples: 4096, mostSamples: 31000 }).remedies).toEqual([]);
  });

  test('clock: range, step, and the oversampling that mends it', () => {
    const slow = find('clock', ladder(), { sampleClockHz: { least: 50e6, most: 200e6, step: null } });
    expect(slow).toMatchObject({ verdict: 'misses', byHowMuch: '19.28 MHz too slow', measured: 30.72e6, limit: 50e6 });
    expect(slow.remedies.map(({ kind }) => kind)).toEqual(['oversampling', 'fftSize']);
    expect(slow.remedies[0]).toMatchObject({
      label: 'Oversample 2 times: 61.44 MHz',
      changes: [{ pointer: '/content/oversampling', before: 1, after: 2 }],
    });
    const step = find('clock', ladder(), { sampleClockHz: { least: 1, most: 1e9, step: 50000 } });
    expect(step).toMatchObject({ verdict: 'misses', distance: 20000, byHowMuch: '20 kHz off the step' });
    expect(step.words).toContain('The nearest is 30.7 MHz');
    expect(step.remedies[0]!.label).toBe('Oversample 5 times: 153.6 MHz');
    // 0.1 Hz steps are decimal tenths, not the double next to them
    expect(find('clock', ladder(), { sampleClockHz: { least: 1, most: 1e9, step: 0.1 } }).verdict).toBe('meets');
    expect(
      find('clock', ladder({ subcarrierSpacingHz: [31250, 7] }), { sampleClockHz: { least: 1, most: 1e9, step: 1 } })
        .verdict,
    ).toBe('misses');
    expect(find('clock', ladder(), { sampleClockHz: { least: 1, most: 30e6, step: null } })).toMatchObject({
      byHowMuch: '720 kHz too fast',
      remedies: [{ kind: 'fftSize', label: 'Use an FFT size of 1920: 28.8 MHz' }],
    });
  });

  test('a clock remedy keeps the length loadable and the marks at their times', () => {
    const content = ladder({
      timing: { mode: 'loop', repeats: 1, gapSamples: 0, padSamples: 2048 },
      markers: [{ name: 'start', at: 'repeat', symbol: null, offsetSamples: 16, lengthSamples: 64 }],
    });
    const bench = { granularitySamples: 32768, sampleClockHz: { least: 80e6, most: 100e6, step: null } };
    const [remedy] = find('clock', content, bench).remedies;
    const after = applyChanges(documentOf(content), remedy!.changes).content;
    expect(after.oversampling).toBe(3);
    expect(deriveFigures(after).fileSamples % 32768).toBe(0);
    expect(after.markers[0]).toMatchObject({ offsetSamples: 48, lengthSamples: 192 });
  });

  test('mode, word, saturation', () => {
    expect(find('mode', ladder(), { modes: ['burst'] })).toMatchObject({
      verdict: 'misses',
      hard: true,
      byHowMuch: 'no loop',
    });
    expect(find('word', ladder()).found).toBe('16 bit, low byte first');
    expect(find('word', ladder(), { word: 'float32', bits: 32, byteOrder: 'big' }).found).toBe(
      '32 bit float, high byte first',
    );
    const saturated = measuredLevels({ saturatedComponents: 12 });
    expect(find('word', ladder(), {}, saturated)).toMatchObject({
      verdict: 'misses',
      byHowMuch: '12 components too large',
    });
    const rms = ladder({ level: { reference: 'rms', headroomDb: 9 } });
    expect(find('word', rms, {}, saturated)).toMatchObject({ verdict: 'meets' });
    expect(find('word', rms, {}, saturated).words).toContain('12 components are held at full scale');
  });

  test('markers: count, length, step, ends', () => {
    const marker = { name: 'frame start', at: 'repeat' as const, symbol: null, offsetSamples: 0, lengthSamples: 100 };
    const with1 = ladder({ markers: [marker] });
    const limits = { count: 1, packing: 'bytes' as const, leastSamples: 1, stepSamples: 1 };
    expect(find('markers', with1, { markers: limits })).toMatchObject({
      verdict: 'meets',
      found: '1 of 1, frame start',
    });
    expect(find('markers', ladder({ markers: [marker, marker] }), { markers: limits })).toMatchObject({
      verdict: 'misses',
      byHowMuch: '1 marker too many',
    });
    expect(find('markers', with1, { markers: { ...limits, leastSamples: 128 } }).byHowMuch).toBe('28 samples short');
    expect(find('markers', with1, { markers: { ...limits, stepSamples: 64 } }).byHowMuch).toBe(
      '28 samples off the step',
    );
    const each = { ...marker, at: 'symbol' as const, lengthSamples: 16 };
    // symbols begin at 0, 2208, 4400, …: multiples of 16
    expect(find('markers', ladder({ markers: [each] }), { markers: { ...limits, stepSamples: 16 } }).verdict).toBe(
      'meets',
    );
    expect(find('markers', ladder({ markers: [each] }), { markers: { ...limits, stepSamples: 32 } }).words).toContain(
      '4400',
    );
    const burst = { mode: 'burst' as const, repeats: 1, gapSamples: 0, padSamples: 0 };
    const late = { ...marker, at: 'file' as const, offsetSamples: 30700 };
    expect(find('markers', ladder({ markers: [late] }), { markers: limits }).verdict).toBe('meets');
    expect(find('markers', ladder({ markers: [late], timing: burst }), { markers: limits }).byHowMuch).toBe(
      '80 samples outside the file',
    );
  });

  test('headroom: the larger peak, and the level that mends it', () => {
    const sample = ladder({ level: { reference: 'samplePeak', headroomDb: 0 } });
    const high = measuredLevels({ renderedPeakDbfs: 0.27, reconstructedPeakDbfs: 0.25 });
    const found = find('headroom', sample, {}, high);
    expect(found).toMatchObject({ verdict: 'misses', hard: false, byHowMuch: '0.27 dB too high', measured: -0.27 });
    expect(found.words).toContain('Between samples the peak stands 0.27 dB above full scale');
    expect(found.remedies[0]!.label).toBe('Scale on the interpolated peak');
    expect(found.remedies[0]!.changes[0]).toMatchObject({
      pointer: '/content/level',
      after: { reference: 'interpolatedPeak', headroomDb: 0 },
    });
    // reconstruction finds more: that much stays above the interpolated peak
    const more = find(
      'headroom',
      sample,
      { leastHeadroomDb: 1 },
      measuredLevels({ renderedPeakDbfs: 0.27, reconstructedPeakDbfs: 0.5 }),
    );
    expect(more.remedies[0]!.changes[0]!.after).toEqual({ reference: 'interpolatedPeak', headroomDb: 1.3 });
    const same = find('headroom', ladder(), { leastHeadroomDb: 1 }, measuredLevels({ reconstructedPeakDbfs: -0.88 }));
    expect(same.byHowMuch).toBe('0.12 dB too high');
    expect(same.remedies[0]!.changes[0]!.after).toEqual({ reference: 'interpolatedPeak', headroomDb: 1.2 });
    expect(find('headroom', ladder(), {}, null)).toMatchObject({ verdict: 'cannotJudge', measured: null });
  });

  test('level at the device', () => {
    const document = documentOf(ladder(), {
      outputRmsDbm: -13,
      lossDb: 20,
      devicePeakLimitDbm: -10,
      deviceMeanLimitDbm: null,
    });
    const found = checkFit(document, wideBench(), measuredLevels()).at(-1)!;
    expect(found).toMatchObject({
      verdict: 'misses',
      hard: false,
      byHowMuch: '6.05 dB over',
      measured: expect.closeTo(-3.95, 9) as number,
      limit: -10,
    });
    expect(found.words).toBe('Over by 6.1 dB: do not switch on.');
  });
});

describe('closing the loop', () => {
  const base = smallContent({ fftSize: 800, subcarrierSpacingHz: [25000, 1], frequencyOffsetHz: 137300 });

  test('137.3 kHz at T = 800, 20 MS/s: 25 kHz grid, or 250 repeats', () => {
    const closing = loopClosing(base);
    expect(closing).toMatchObject({
      applies: true,
      closes: false,
      nearestOffsetHz: 125000,
      nearestChangeHz: -12300,
      repeatsThatClose: 250,
    });
    expect(closing.turns).toBe(5.492);
    expect(closing.residualTurns).toBeCloseTo(0.492, 15);
    const found = find('seam', base);
    expect(found).toMatchObject({ verdict: 'misses', hard: false, byHowMuch: '0.492 of a turn open' });
    expect(found.remedies.map((remedy) => remedy.label)).toEqual([
      'Repeat the frame 250 times: 200 000',
      'Move the offset to 125 kHz',
    ]);
    expect(found.remedies[0]!.cost).toContain('200 000 samples');
    expect(loopClosing({ ...base, timing: { ...base.timing, repeats: 250 } }).closes).toBe(true);
    expect(loopClosing({ ...base, frequencyOffsetHz: -125000 })).toMatchObject({ closes: true, turns: -5 });
  });

  test('the repeats are the least, by trial, with a pad too', () => {
    for (const padSamples of [0, 8, 100]) {
      for (const frequencyOffsetHz of [5000, -31250, 137300, 1 / 3]) {
        const content = { ...base, frequencyOffsetHz, timing: { ...base.timing, padSamples } };
        const { repeatsThatClose } = loopClosing(content);
        const turns = (r: number): number => ((r * 800 + padSamples) * frequencyOffsetHz) / 20e6;
        let least: number | null = null;
        for (let r = 1; r <= 4000 && least === null; r++)
          if (Math.abs(turns(r) - Math.round(turns(r))) < 1e-9) least = r;
        if (least !== null) expect(repeatsThatClose).toBe(least);
        else expect(repeatsThatClose === null || repeatsThatClose > 4000).toBe(true);
      }
    }
  });

  test('the nearest offset closes even where it is no round number, and the samples run on', () => {
    const content = smallContent({
      fftSize: 60,
      prefixSamples: [7],
      subcarrierSpacingHz: [31250, 7],
      frequencyOffsetHz: 12345.678,
      tray: [
        NULL_INK,
        { inkId: 'k1', name: 'CW', role: 'tone', powerDb: 0, value: { factors: [], phaseDeg: 0, continuous: true } },
      ],
      grid: { rows: [rowOf(60, (k) => (k === 0 ? 1 : 0))], rowOfSymbol: [0] },
    });
    const moved = { ...content, frequencyOffsetHz: loopClosing(content).nearestOffsetHz };
    expect(loopClosing(moved).closes).toBe(true);
    const synthesis = createSynthesis(moved);
    const samples = new Float64Array(2 * 67);
    synthesis.read(samples);
    // a lone turning carrier: the step from the last sample to the first is the step between any two
    const step = (from: number, to: number): number =>
      Math.atan2(
        samples[2 * to + 1]! * samples[2 * from]! - samples[2 * to]! * samples[2 * from + 1]!,
        samples[2 * to]! * samples[2 * from]! + samples[2 * to + 1]! * samples[2 * from + 1]!,
      );
    expect(step(66, 0)).toBeCloseTo(step(0, 1), 7);
  });

  test('a burst has no wrap', () => {
    expect(find('seam', { ...base, timing: { ...base.timing, mode: 'burst' } })).toMatchObject({ verdict: 'meets' });
  });
});

describe('tones', () => {
  const tone = (continuous: boolean): Ink => ({
    inkId: 'k1',
    name: 'CW',
    role: 'tone',
    powerDb: 0,
    value: { factors: [], phaseDeg: 0, continuous },
  });
  const content = (continuous: boolean, k: number, changes: Partial<WaveformContent> = {}): WaveformContent =>
    smallContent({
      fftSize: 64,
      symbolCount: 3,
      prefixSamples: [16],
      tray: [NULL_INK, tone(continuous)],
      grid: { rows: [rowOf(64, (at) => (at === k ? 1 : 0))], rowOfSymbol: [0, 0, 0] },
      ...changes,
    });

  test('a tone that is not continuous jumps by k·N_cp/N at each border', () => {
    expect(toneJumps(content(false, 5))).toMatchObject({
      count: 1,
      worst: { subcarrier: 5, turns: -0.25, at: 'symbols' },
      inksBetweenSymbols: ['k1'],
    });
    expect(toneJumps(content(false, 4)).count).toBe(0); // 4 · 16 / 64 is a whole turn
    const found = find('toneJump', content(false, 6));
    expect(found).toMatchObject({ verdict: 'misses', hard: false, byHowMuch: 'jumps by 0.500 of a turn' });
  });

  test('running on mends it where the file closes', () => {
    // three symbols of 80: k · 240/64 is whole for k = 4, 8, …; else the wrap jumps
    expect(toneJumps(content(true, 5))).toMatchObject({
      count: 1,
      worst: { turns: 0.25, at: 'wrap' },
      inksBetweenSymbols: [],
    });
    expect(toneJumps(content(true, 4)).count).toBe(0);
    const four = content(false, 5, { symbolCount: 4, grid: { ...content(false, 5).grid, rowOfSymbol: [0, 0, 0, 0] } });
    const [remedy] = find('toneJump', four).remedies;
    expect(remedy!.changes).toEqual([{ pointer: '/content/tray/1/value/continuous', before: false, after: true }]);
    // 3 · 80 · 5 / 64 is 18.75 turns: four repeats bring it back
    expect(find('toneJump', content(false, 5)).remedies.map(({ label }) => label)).toEqual([
      'Let the tone run on and repeat 4 times',
    ]);
  });

  test('silence between repeats hides a jump at the wrap', () => {
    expect(
      toneJumps(content(true, 5, { timing: { mode: 'loop', repeats: 1, gapSamples: 9, padSamples: 0 } })).count,
    ).toBe(0);
    expect(
      toneJumps(content(true, 5, { timing: { mode: 'loop', repeats: 1, gapSamples: 0, padSamples: 9 } })).count,
    ).toBe(0);
  });

  test('it says what the samples do', () => {
    const jumping = content(false, 5);
    const synthesis = createSynthesis(jumping);
    const samples = new Float64Array(2 * 240);
    synthesis.read(samples);
    const phase = (n: number): number => Math.atan2(samples[2 * n + 1]!, samples[2 * n]!) / (2 * Math.PI);
    const jump = phase(80) - phase(79) - 5 / 64;
    expect(jump - Math.round(jump)).toBeCloseTo(-0.25, 9);
  });
});

describe('payload', () => {
  const content = (changes: Partial<Parameters<typeof pnStream>[1]> & object, repeats = 1): WaveformContent =>
    smallContent({
      symbolCount: 2,
      tray: [NULL_INK, QPSK],
      streams: [pnStream(0, changes)],
      grid: { rows: [rowOf(64, (k) => (k > 0 && k <= 15 ? 1 : 0))], rowOfSymbol: [0, 0] },
      timing: { mode: 'loop', repeats, gapSamples: 0, padSamples: 0 },
    });
  const PN4 = { kind: 'pn' as const, stages: 4, taps: [3, 4], seed: 15, inverted: false };

  test('60 bits a frame close a sequence of 15 at once, one of 7 after 7 repeats', () => {
    expect(payloadClosing(content({ source: PN4 }))).toMatchObject([
      { bitsPerRepeat: 60, periodBits: 15, closes: true, repeatsToClose: 1 },
    ]);
    const PN3 = { ...PN4, stages: 3, taps: [2, 3], seed: 7 };
    expect(payloadClosing(content({ source: PN3 }))).toMatchObject([
      { periodBits: 7, closes: false, repeatsToClose: 7 },
    ]);
    expect(payloadClosing(content({ source: PN3, acrossRepeats: 'continue' }, 14))).toMatchObject([{ closes: true }]);
    const found = find('payloadWrap', content({ source: PN3 }));
    expect(found).toMatchObject({ verdict: 'meets', found: 'breaks, closes after 7', limit: 7 });
    expect(found.words).toContain('closes after 7 repeats');
    expect(found.remedies[0]!.changes).toEqual([
      { pointer: '/content/streams/0/acrossRepeats', before: 'restart', after: 'continue' },
      { pointer: '/content/timing/repeats', before: 1, after: 7 },
    ]);
  });

  test('patterns, uploads, anchored fill', () => {
    expect(payloadClosing(content({ source: { kind: 'pattern', bits: '01101' } }))).toMatchObject([
      { periodBits: 5, closes: true },
    ]);
    expect(
      payloadClosing(content({ source: { kind: 'uploaded', name: 'u', bitCount: 9, base64: 'AAA=' } })),
    ).toMatchObject([{ closes: false, repeatsToClose: 3 }]);
    expect(payloadClosing(content({ fill: 'anchored' }))).toMatchObject([{ isFixed: true, closes: true }]);
    expect(payloadClosing(content({ fill: 'anchored', acrossRepeats: 'continue', source: PN4 }))).toMatchObject([
      { bitsPerRepeat: 12 * 2 * 64, repeatsToClose: 5 },
    ]);
    expect(payloadClosing(smallContent({ streams: [pnStream(0)] }))).toEqual([]);
  });
});

test('changes are put by pointer and share the rest', () => {
  const document = documentOf(ladder());
  const after = applyChanges(document, [{ pointer: '/content/prefixSamples/1', before: 144, after: 100 }]);
  expect(after.content.prefixSamples[1]).toBe(100);
  expect(document.content.prefixSamples[1]).toBe(144);
  expect(after.intent).toBe(document.intent);
  expect(() => applyChanges(document, [{ pointer: '/content/none', before: 0, after: 1 }])).toThrow('none');
});

test.each([
  ['PN9', [5, 9], 511],
  ['PN11', [9, 11], 2047],
  ['PN15', [14, 15], 32767],
  ['PN20', [3, 20], 1048575],
  ['PN23', [18, 23], 8388607],
  ['x⁴ + x³ + x² + x + 1, irreducible, not primitive', [1, 2, 3, 4], 5],
  ['x⁴ + x² + 1 = (x² + x + 1)²', [2, 4], 6],
])('period of %s (ITU-T O.150; Golomb 1967 for the others)', (_name, taps, period) => {
  const stages = taps.at(-1)!;
  expect(periodOf({ kind: 'pn', stages, taps, seed: 1, inverted: false })).toBe(period);
});
