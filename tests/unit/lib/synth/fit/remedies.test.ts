import {
  applyChanges,
  checkFit,
  createSeamCollector,
  createSynthesis,
  symbolPeaksOf,
  type BenchContent,
  type FitCheck,
  type FitFinding,
  type FitKnowledge,
  type MeasuredLevels,
  type Remedy,
  type WaveformContent,
  type WaveformDocument,
} from '@/lib/synth';
import { documentOf, measuredLevels, wideBench } from '@/tests/helpers/bench';
import { dataInk, factor, NULL_INK, pilotInk, pnStream, rowOf, smallContent } from '@/tests/helpers/content';

// Every number here was worked by hand from the definitions: lengths are integer sums, a phase jump of t turns is a step of 2·sin(πt).

const loop = (repeats: number, gapSamples = 0, padSamples = 0) => ({
  mode: 'loop' as const,
  repeats,
  gapSamples,
  padSamples,
});

function find(
  check: FitCheck,
  content: WaveformContent,
  bench: Partial<BenchContent> = {},
  more: { intent?: Partial<WaveformDocument['intent']>; levels?: MeasuredLevels | null; known?: FitKnowledge } = {},
): FitFinding {
  const { intent = {}, levels = measuredLevels(), known = {} } = more;
  return checkFit(documentOf(content, intent), wideBench(bench), levels, known).find((one) => one.check === check)!;
}

const plain = (text: string): string => text.replace(/\u202f/g, ' ');
const shortly = (remedies: Remedy[]) => remedies.map(({ kind, label, price }) => [kind, plain(label), price.samples]);

describe('memory, worked by hand', () => {
  // 64 · 156 + 20 = 10 004; of 10 003 the granularity of 4 uses 10 000
  const content = smallContent({ timing: loop(156, 0, 20) });
  const bench = { granularitySamples: 4, mostSamples: 10003 };

  test('the usable most is the largest multiple of the granularity, and it is too long by 4 samples', () => {
    const found = find('memory', content, bench);
    expect(found).toMatchObject({ verdict: 'misses', measured: 10004, limit: 10000, distance: 4 });
    expect(plain(found.byHowMuch)).toBe('too long by 4 samples');
    expect(plain(found.words)).toBe('10 004 samples; of the memory of 10 003, whole multiples of 4 use 10 000.');
    expect(find('memory', smallContent({ timing: loop(156, 0, 16) }), bench)).toMatchObject({
      verdict: 'meets',
      distance: 0,
    });
  });

  test('a repeat fewer, then a shorter pad, each with its price', () => {
    const { remedies } = find('memory', content, bench);
    expect(shortly(remedies)).toEqual([
      ['dropRepeats', 'Repeat the frame 155 times: 9940', -64],
      ['pad', 'Shorten the pad by 4: 10 000', -4],
    ]);
    expect(plain(remedies[0]!.cost)).toMatch(/^64 samples fewer, 0 ppm\. /);
  });

  test('a memory smaller than the granularity holds nothing, and nothing mends it', () => {
    const found = find('memory', content, { granularitySamples: 4096, mostSamples: 4000 });
    expect(found).toMatchObject({ limit: 0, remedies: [] });
    expect(plain(found.words)).toContain('holds no multiple of 4096, so nothing loads');
  });

  test('a lower oversampling where a repeat fewer is not to be had', () => {
    // 3 · 64 = 192 samples in a memory of 150: M = 2 makes 128
    const three = smallContent({ oversampling: 3 });
    expect(shortly(find('memory', three, { mostSamples: 150 }).remedies)).toEqual([
      ['oversampling', 'Oversample 2 times: 128', -64],
    ]);
    // 2 · (64 + 30) = 188 in 150: 19 fewer after each of the two
    const gapped = smallContent({ timing: loop(2, 30) });
    expect(shortly(find('memory', gapped, { mostSamples: 150 }).remedies)).toEqual([
      ['dropRepeats', 'Play the frame once: 94', -94],
      ['gap', 'Shorten the gap by 19: 150', -38],
    ]);
  });
});

describe('length, worked by hand', () => {
  test('two repeats of 64 on a granularity of 100: 25 repeats, a gap of 36, a pad of 72', () => {
    // 64 r = 100 j first at r = 25; 2 · (64 + 36) = 200; 128 + 72 = 200
    const { remedies } = find('granularity', smallContent({ timing: loop(2) }), { granularitySamples: 100 });
    expect(shortly(remedies)).toEqual([
      ['repeats', 'Repeat the frame 25 times: 1600', 1472],
      ['gap', 'Lengthen the gap by 36: 200', 72],
      ['pad', 'Pad with 72 silent samples: 200', 72],
    ]);
  });

  test('fewer repeats where they fit the granularity', () => {
    // 5 · 64 = 320 is no multiple of 128; 6 and 4 are
    const { remedies } = find('granularity', smallContent({ timing: loop(5) }), { granularitySamples: 128 });
    expect(shortly(remedies).slice(0, 2)).toEqual([
      ['repeats', 'Repeat the frame 6 times: 384', 64],
      ['dropRepeats', 'Repeat the frame 4 times: 256', -64],
    ]);
  });

  test('a pad that would open the loop takes the offset along', () => {
    // 15 kHz turns once in 64 samples at 960 kS/s: 100, 200, 300 and 400 samples are no whole turns, 25 · 64 = 1600 are 25
    const turning = smallContent({ frequencyOffsetHz: 15000 });
    expect(find('seam', turning)).toMatchObject({ verdict: 'meets', measured: 1, limit: 1 });
    const { remedies } = find('granularity', turning, { granularitySamples: 100 });
    expect(shortly(remedies)).toEqual([
      ['repeats', 'Repeat the frame 25 times: 1600', 1536],
      ['pad', 'Pad with 36 silent samples: 100, and move the offset', 36],
    ]);
    // 100 samples at 15 kHz are 1.5625 turns; two make 960 kHz · 2 / 100 = 19.2 kHz, 4.2 of 960 kHz are 4375 ppm
    expect(remedies[1]!.changes.at(-1)).toMatchObject({ pointer: '/content/frequencyOffsetHz', after: 19200 });
    expect(remedies[1]!.price.ppm).toBeCloseTo(4375, 9);
  });
});

describe('clock, worked by hand', () => {
  const ladder = smallContent({
    fftSize: 2048,
    symbolCount: 2,
    prefixSamples: [128],
    tray: [NULL_INK, pilotInk(1, [factor({ kind: 'alternating' }, 'subcarrier', 2000)])],
    grid: { rows: [rowOf(2048, (k) => (k !== 0 && Math.abs(k) <= 3 ? 1 : 0))], rowOfSymbol: [0, 0] },
  });

  test('a step of 50 kHz: 30.7 MHz is nearest, −20 kHz of 30.72 MHz is −651.04 ppm, 30.7 MHz / 2048 is 959375/64 Hz', () => {
    const found = find('clock', ladder, { sampleClockHz: { least: 1, most: 40e6, step: 50000 } });
    expect(found).toMatchObject({ verdict: 'misses', limit: 30.7e6, distance: 20000 });
    expect(found.words).toContain(
      'The nearest is 30.7 MHz: played there, the subcarrier spacing is off by −651.0 ppm.',
    );
    const spacing = found.remedies.find(({ kind }) => kind === 'spacing')!;
    expect(spacing.changes).toEqual([
      { pointer: '/content/subcarrierSpacingHz', before: [15000, 1], after: [959375, 64] },
    ]);
    expect(spacing.price).toEqual({ samples: 0, ppm: expect.closeTo(-20000 / 30.72, 9) as number });
    expect(plain(spacing.cost)).toMatch(/^No sample more, −651\.0 ppm\. The spacing becomes 14\.990234375 kHz/);
    // 2000 · 15 kHz = 30 MHz, 600 steps; its prefix is 128 · 2000 / 2048 = 125
    const size = found.remedies.find(({ kind }) => kind === 'fftSize')!;
    expect(size.changes[0]).toEqual({ pointer: '/content/fftSize', before: 2048, after: 2000 });
    expect(found.words).toMatch(/Change the spacing or N \(FFT size\)\.$/);
  });

  test('31 to 35 MHz: N = 2160 at the same spacing, DC and what counts subcarriers kept', () => {
    const bench = { sampleClockHz: { least: 31e6, most: 35e6, step: null } };
    const found = find('clock', ladder, bench);
    // 31 against 30.72 MHz is 9115 ppm, still within 1 %
    expect(found.remedies.map(({ kind }) => kind)).toEqual(['spacing', 'fftSize']);
    const remedy = found.remedies[1];
    // 2 · (2160 + 135) − 2 · (2048 + 128) = 238
    expect(remedy!.price).toEqual({ samples: 238, ppm: 0 });
    const after = applyChanges(documentOf(ladder), remedy!.changes).content;
    expect(after).toMatchObject({ fftSize: 2160, prefixSamples: [135] });
    expect(after.grid.rows).toEqual([[1077, 0, 3, 1, 1, 0, 3, 1, 1076, 0]]);
    // ⌊2160/2⌋ − ⌊2048/2⌋ = 56 subcarriers more below
    expect(after.tray[1]).toMatchObject({ value: { factors: [{ start: 1944 }] } });
    // the same signal: each painted cell keeps its value, so the useful parts agree where both have samples (every 2048th of 2160 …)
    const values = (content: WaveformContent): number => {
      const samples = new Float64Array(4);
      createSynthesis({ ...content, prefixSamples: [0] }).read(samples);
      return samples[0]! * Math.sqrt(content.fftSize);
    };
    expect(values(after)).toBeCloseTo(values(ladder), 9);
  });

  test('a range without any multiple of the step', () => {
    const found = find('clock', ladder, { sampleClockHz: { least: 31e6, most: 31.5e6, step: 2e6 } });
    expect(found.words).toContain('No multiple of 2 MHz lies between');
    expect(found.remedies).toEqual([]);
    expect(found.words).toMatch(/Neither M, N nor a spacing within 1 %/);
  });
});

describe('seam, worked by hand', () => {
  const turning = smallContent({
    fftSize: 800,
    subcarrierSpacingHz: [25000, 1],
    frequencyOffsetHz: 137300,
    tray: [NULL_INK, dataInk(1, { constellation: 'qpsk', bitMap: 'ts38211', streamId: 's0' })],
    streams: [pnStream(0)],
    grid: { rows: [rowOf(800, (k) => (Math.abs(k) < 100 ? 1 : 0))], rowOfSymbol: [0] },
  });

  test('0.492 of a turn is a step of 2·sin(0.492 π) = 6.02 dB above the mean, and the samples do that', () => {
    const found = find('seam', turning);
    expect(found).toMatchObject({ verdict: 'misses', measured: 5.492, limit: 5 });
    expect(found.distance).toBeCloseTo(0.492, 12);
    expect(found.words).toContain('a step 6.0 dB above the mean power');
    // what would follow in a longer file against what the loop plays instead
    const longer = new Float64Array(4 * 800);
    createSynthesis({ ...turning, timing: loop(2) }).read(longer);
    let step = 0;
    let power = 0;
    for (let i = 0; i < 1600; i++) {
      step += (longer[1600 + i]! - longer[i]!) ** 2;
      power += longer[i]! ** 2;
    }
    expect(10 * Math.log10(step / power)).toBeCloseTo(20 * Math.log10(2 * Math.sin(0.492 * Math.PI)), 6);
    expect(10 * Math.log10(step / power)).toBeCloseTo(6.0, 1);
  });

  test('repeats come before the offset; price in samples and in ppm of the clock', () => {
    const { remedies } = find('seam', turning);
    expect(shortly(remedies)).toEqual([
      ['repeats', 'Repeat the frame 250 times: 200 000', 199200],
      ['offset', 'Move the offset to 125 kHz', 0],
    ]);
    expect(remedies[1]!.price.ppm).toBeCloseTo(-12300 / 20, 9);
    // 200 000 samples and a granularity of 3: three times as many repeats
    expect(shortly(find('seam', turning, { granularitySamples: 3, leastSamples: 3 }).remedies)[0]).toEqual([
      'repeats',
      'Repeat the frame 750 times: 600 000',
      599200,
    ]);
  });

  test('a pad that closes: one turn in 64 samples, a frame of 60', () => {
    // 60 · 960 kHz / 64 … 15 kHz at 60 · 16 000 Hz = 960 kS/s: 60 samples are 0.9375 turns, 4 more make one
    const short = smallContent({ fftSize: 60, subcarrierSpacingHz: [16000, 1], frequencyOffsetHz: 15000 });
    expect(shortly(find('seam', short).remedies)).toEqual([
      ['repeats', 'Repeat the frame 16 times: 960', 900],
      ['offset', 'Move the offset to 16 kHz', 0],
      ['pad', 'Pad with 4 silent samples: 64', 4],
    ]);
  });

  test('a tone that runs on and misses the wrap by a quarter turn: 3.0 dB above the mean, four repeats', () => {
    const tone = smallContent({
      symbolCount: 3,
      prefixSamples: [16],
      tray: [
        NULL_INK,
        { inkId: 'k1', name: 'CW', role: 'tone', powerDb: 0, value: { factors: [], phaseDeg: 0, continuous: true } },
      ],
      grid: { rows: [rowOf(64, (k) => (k === 5 ? 1 : 0))], rowOfSymbol: [0, 0, 0] },
    });
    // 5 · 240 / 64 = 18.75 turns; |1 − e^{jπ/2}|² = 2
    const found = find('seam', tone);
    expect(found).toMatchObject({ verdict: 'misses', measured: 0.25, byHowMuch: '1 tone jumps' });
    expect(found.words).toContain('jumps there by 0.250 of a turn, a step 3.0 dB above the mean power.');
    expect(shortly(found.remedies)).toEqual([['repeats', 'Repeat the frame 4 times: 960', 720]]);
    expect(find('toneJump', tone)).toMatchObject({ verdict: 'meets', found: 'run on' });
  });

  test('the measured step: 0, 1, 3 has steps of 1 and 2 and comes back by 3; the RMS is √(10/3)', () => {
    const collector = createSeamCollector();
    collector.add(Float64Array.from([0, 0, 1, 0]), 2);
    collector.add(Float64Array.from([3, 0]), 1);
    const rms = Math.sqrt(10 / 3);
    const seam = collector.result()!;
    expect(seam.stepAtWrap).toBeCloseTo(3 / rms, 12);
    expect(seam.stepElsewhere).toBeCloseTo(2 / rms, 12);
    expect(seam.around.map((value) => Math.round(value * rms * 1e9) / 1e9)).toEqual([
      0, 0, 1, 0, 3, 0, 0, 0, 1, 0, 3, 0,
    ]);
    const found = find('seam', smallContent(), {}, { known: { wave: { seam, symbolPeaks: null } } });
    expect(found).toMatchObject({ title: 'Seam, step at the wrap', found: '1.64 of the RMS, elsewhere 1.10' });
  });

  test('of a longer file the last and first 64 are kept, in order, however the blocks are cut', () => {
    const ramp = Float64Array.from({ length: 600 }, (_, i) => (i % 2 === 0 ? i / 2 : 0));
    const around = [100, 7, 64, 300].map((cut) => {
      const collector = createSeamCollector();
      for (let at = 0; at < 300; at += cut) {
        collector.add(ramp.subarray(2 * at, 2 * Math.min(300, at + cut)), Math.min(cut, 300 - at));
      }
      return collector.result()!.around;
    });
    const rms = Math.sqrt((299 * 599) / 6); // Σ n² for n < 300, over 300
    const real = around[0]!.filter((_, i) => i % 2 === 0).map((value) => Math.round(value * rms));
    expect(real).toEqual([
      ...Array.from({ length: 64 }, (_, i) => 236 + i),
      ...Array.from({ length: 64 }, (_, i) => i),
    ]);
    for (const one of around) expect(one).toEqual(around[0]);
  });
});

describe('markers, worked by hand', () => {
  const marker = { name: 'start', at: 'repeat' as const, symbol: null, offsetSamples: 13, lengthSamples: 10 };
  const limits = { count: 1, packing: 'bytes' as const, leastSamples: 16, stepSamples: 8 };

  test('moved to the step and made long enough: 13 to 16, 10 to 16', () => {
    const content = smallContent({ timing: loop(2), markers: [marker] });
    const found = find('markers', content, { markers: limits });
    expect(found).toMatchObject({ verdict: 'misses', unit: 'samples', measured: 10, limit: 16, distance: 6 });
    const [remedy] = found.remedies;
    expect(remedy).toMatchObject({ kind: 'markers', label: 'Move the mark', price: { samples: 0, ppm: 0 } });
    expect(remedy!.changes[0]!.after).toEqual([{ ...marker, offsetSamples: 16, lengthSamples: 16 }]);
    expect(remedy!.cost).toBe('No sample more, 0 ppm. Begin or end of “start” moves by 6 samples.');
  });

  test('into a burst of 64 samples: 60 with 16 samples goes back to 48', () => {
    const content = smallContent({
      timing: { mode: 'burst', repeats: 1, gapSamples: 0, padSamples: 0 },
      markers: [{ ...marker, at: 'file', offsetSamples: 60, lengthSamples: 16 }],
    });
    const found = find('markers', content, { markers: limits });
    expect(found.remedies[0]!.changes[0]!.after).toMatchObject([{ offsetSamples: 48, lengthSamples: 16 }]);
  });

  test('repeats of 60 samples never stand on steps of 8 together, and too many markers are nobody’s press', () => {
    const odd = smallContent({ fftSize: 60, timing: loop(2), markers: [marker] });
    expect(find('markers', odd, { markers: limits }).remedies).toEqual([]);
    const two = smallContent({ markers: [marker, { ...marker, name: 'b' }] });
    expect(find('markers', two, { markers: limits })).toMatchObject({ unit: 'markers', distance: 1, remedies: [] });
  });
});

describe('levels, worked by hand', () => {
  test('the output falls by what is over and by the tolerance, down to a tenth', () => {
    // peak 9.05 dB over the mean: −13 + 9.05 = −3.95 dBm, 6.05 over −10; −13 − 6.05 − 1 = −20.05, so −20.1
    const intent = { outputRmsDbm: -13, lossDb: 20, devicePeakLimitDbm: -10, levelToleranceDb: 1 };
    const found = find('level', smallContent(), {}, { intent });
    expect(found.distance).toBeCloseTo(6.05, 9);
    expect(found.remedies).toMatchObject([
      {
        kind: 'outputLevel',
        label: 'Lower the output to −20.1 dBm',
        changes: [{ pointer: '/intent/outputRmsDbm', before: -13, after: -20.1 }],
        price: { samples: 0, ppm: 0 },
      },
    ]);
    // the mean limit decides where it is the tighter one: −13 against −15 is 2 over
    const mean = find(
      'level',
      smallContent(),
      {},
      { intent: { ...intent, devicePeakLimitDbm: 0, deviceMeanLimitDbm: -15 } },
    );
    expect(mean).toMatchObject({ measured: expect.closeTo(-13, 9) as number, limit: -15 });
    expect(mean.remedies[0]!.changes[0]!.after).toBe(-16);
  });

  test('what the setting means decides: a full-scale tone reads 10.05 dB above the mean of this file', () => {
    const intent = { outputRmsDbm: -13, lossDb: 0, devicePeakLimitDbm: 5, deviceMeanLimitDbm: null };
    const active = find('level', smallContent(), { levelMeans: 'activeRms' }, { intent });
    const unknown = find('level', smallContent(), { levelMeans: 'unknown' }, { intent });
    expect(active.measured).toBeCloseTo(-13 + 9.05, 9);
    expect(active.verdict).toBe('meets');
    // set for the lowest of three readings, and read by the highest: the setting of a mean, read as the file's mean
    expect(unknown.measured).toBeCloseTo(-3.95, 9);
    expect(unknown.words).toContain('the highest of three readings counts');
  });

  test('an RMS reference keeps its meaning, or goes to the peak', () => {
    const rms = smallContent({ level: { reference: 'rms', headroomDb: 8 } });
    const found = find('headroom', rms, { leastHeadroomDb: 2 }, { levels: measuredLevels({ renderedPeakDbfs: 0.5 }) });
    // 2 + 0.5 = 2.5 too high
    expect(found.remedies.map(({ label }) => label)).toEqual([
      'Keep the RMS 10.5 dB down',
      'Scale on the interpolated peak, 2.0 dB below',
    ]);
  });

  test('words that cannot saturate, words that may, a file that cannot be', () => {
    const uncounted = measuredLevels({ saturatedComponents: null });
    expect(find('word', smallContent(), {}, { levels: uncounted })).toMatchObject({ verdict: 'meets', distance: 0 });
    const rms = smallContent({ level: { reference: 'rms', headroomDb: 8 } });
    expect(find('word', rms, {}, { levels: uncounted })).toMatchObject({ verdict: 'cannotJudge' });
    expect(find('word', smallContent(), { container: 'wav', layout: 'split' })).toMatchObject({
      verdict: 'misses',
      hard: true,
      byHowMuch: 'no such file can be written',
    });
    expect(find('word', smallContent(), { bits: 12, align: 'left', numberFormat: 'offsetBinary' })).toMatchObject({
      found: '12 bit, low byte first',
      words: '12 bit, low byte first, left-aligned, offset binary; nothing saturates.',
    });
  });

  test('peaks of 1, 1, 1 and 2.1: 3.22 dB above the median of 1', () => {
    const symbolPeaks = symbolPeaksOf(Float64Array.from([1, 0, 1, 1, 2.1]))!;
    expect(symbolPeaks).toMatchObject({ symbol: 4, outstanding: [4] });
    expect(symbolPeaks.aboveMedianDb).toBeCloseTo(3.2222, 4);
    const found = find('symbolPeak', smallContent(), {}, { known: { wave: { seam: null, symbolPeaks } } });
    expect(found).toMatchObject({
      verdict: 'misses',
      hard: false,
      limit: 3,
      byHowMuch: '3.22 dB above the median',
      remedies: [],
    });
    expect(symbolPeaksOf(new Float64Array(3))).toBeNull();
  });

  test('what was not measured says why', () => {
    const why = 'The file is too long to be measured here; its pack measures it.';
    const findings = checkFit(documentOf(smallContent()), wideBench(), null, { unmeasuredBecause: why });
    for (const check of ['headroom', 'symbolPeak'] as const)
      expect(findings.find((one) => one.check === check)).toMatchObject({ verdict: 'cannotJudge', words: why });
  });
});

describe('mode and payload, worked by hand', () => {
  test('a burst is W · M longer: 8 samples, so 56 fill 64 up', () => {
    const content = smallContent({ prefixSamples: [4], overlapSamples: 4, fftSize: 60, oversampling: 2 });
    const found = find('mode', content, { modes: ['burst'], granularitySamples: 64 });
    expect(shortly(found.remedies)).toEqual([['mode', 'Make it a burst', 64]]);
    expect(found.remedies[0]!.changes).toEqual([
      { pointer: '/content/timing/mode', before: 'loop', after: 'burst' },
      { pointer: '/content/timing/padSamples', before: 0, after: 56 },
    ]);
  });

  test('two streams close together after the least common multiple of their repeats', () => {
    // 4 bits of a sequence of 3, 4 bits of one of 7: 3 and 7 repeats, together 21
    const ink = (place: number) =>
      dataInk(place, { constellation: 'qpsk', bitMap: 'ts38211', streamId: `s${place - 1}` });
    const stream = (place: number, stages: number, taps: number[]) =>
      pnStream(place, { source: { kind: 'pn', stages, taps, seed: 1, inverted: false } });
    const content = smallContent({
      tray: [NULL_INK, ink(1), ink(2)],
      streams: [stream(0, 2, [1, 2]), stream(1, 3, [2, 3])],
      grid: { rows: [rowOf(64, (k) => (k === 1 || k === 2 ? 1 : k === 3 || k === 4 ? 2 : 0))], rowOfSymbol: [0] },
    });
    const found = find('payloadWrap', content);
    expect(found.words).toContain(
      '4 bits a repeat of a sequence of 3. Continued, it closes after 3 repeats. 2 streams',
    );
    expect(shortly(found.remedies)).toEqual([['payload', 'Continue the payload over 21 repeats', 20 * 64]]);
  });
});
