import fc from 'fast-check';
import { parseWaveformDocument } from '@/lib/document/parse';
import {
  applyChanges,
  checkFit,
  createFrameMeasure,
  createSynthesis,
  createWordWriter,
  deriveFigures,
  fullScaleOf,
  interpolatedPeak,
  levelsAfter,
  levelsInDbfs,
  reconstructedPeak,
  vectorStats,
  wordScale,
  type BenchProfile,
  type FitFinding,
  type MeasuredLevels,
  type RemedyKind,
  type WaveformContent,
  type WaveformDocument,
} from '@/lib/synth';
import { documentOf, wideBench } from '@/tests/helpers/bench';
import { dataInk, NULL_INK, pnStream, rowOf, smallContent } from '@/tests/helpers/content';

const content = fc
  .record({
    fftSize: fc.constantFrom(16, 20, 64, 96),
    symbolCount: fc.integer({ min: 1, max: 5 }),
    prefix: fc.integer({ min: 0, max: 16 }),
    overlap: fc.integer({ min: 0, max: 16 }),
    oversampling: fc.integer({ min: 1, max: 16 }),
    spacing: fc.constantFrom<[number, number]>([15000, 1], [312500, 1], [31250, 7], [1, 3]),
    offset: fc.constantFrom(0, 0, 1000, -12500, 137300, 0.1),
    mode: fc.constantFrom<'loop' | 'burst'>('loop', 'burst'),
    repeats: fc.constantFrom(1, 1, 2, 7, 65536),
    gapSamples: fc.constantFrom(0, 0, 13),
    padSamples: fc.constantFrom(0, 0, 5, 4096),
    k: fc.integer({ min: -8, max: 7 }),
    continuous: fc.boolean(),
    reference: fc.constantFrom<WaveformContent['level']['reference']>(
      'interpolatedPeak',
      'samplePeak',
      'componentPeak',
      'rms',
    ),
    headroomDb: fc.constantFrom(0, 1, 12.3, 60),
    acrossRepeats: fc.constantFrom<'restart' | 'continue'>('restart', 'continue'),
    stages: fc.constantFrom(3, 9),
    marks: fc.array(
      fc.record({
        offset: fc.integer({ min: -20, max: 40 }),
        length: fc.integer({ min: 1, max: 64 }),
        at: fc.constantFrom<'file' | 'repeat' | 'symbol'>('file', 'repeat', 'symbol'),
      }),
      { maxLength: 2 },
    ),
  })
  .map((of): WaveformContent => {
    const clockHz = (of.fftSize * of.oversampling * of.spacing[0]) / of.spacing[1];
    return smallContent({
      fftSize: of.fftSize,
      symbolCount: of.symbolCount,
      prefixSamples: [of.prefix],
      overlapSamples: Math.min(of.overlap, of.prefix),
      oversampling: of.oversampling,
      subcarrierSpacingHz: of.spacing,
      frequencyOffsetHz: Math.abs(of.offset) <= clockHz / 2 ? of.offset : 0,
      timing: { mode: of.mode, repeats: of.repeats, gapSamples: of.gapSamples, padSamples: of.padSamples },
      tray: [
        NULL_INK,
        dataInk(1, { constellation: 'qpsk', bitMap: 'ts38211', streamId: 's0' }),
        {
          inkId: 'k2',
          name: 'CW',
          role: 'tone',
          powerDb: 0,
          value: { factors: [], phaseDeg: 0, continuous: of.continuous },
        },
      ],
      streams: [
        pnStream(0, {
          source: { kind: 'pn', stages: of.stages, taps: of.stages === 3 ? [2, 3] : [5, 9], seed: 7, inverted: false },
          acrossRepeats: of.acrossRepeats,
        }),
      ],
      grid: {
        rows: [rowOf(of.fftSize, (k) => (k === of.k ? 2 : k > 0 && k < 6 ? 1 : 0))],
        rowOfSymbol: new Array<number>(of.symbolCount).fill(0),
      },
      level: { reference: of.reference, headroomDb: of.headroomDb },
      markers: of.marks.map((mark, i) => ({
        name: `m${i}`,
        at: mark.at,
        symbol: null,
        offsetSamples: mark.offset,
        lengthSamples: mark.length,
      })),
    });
  });

const bench = fc
  .record({
    least: fc.constantFrom(1, 1e6, 20e6),
    span: fc.constantFrom(1.5, 10, 1e6),
    step: fc.constantFrom(null, null, 1, 1000, 0.1),
    granularitySamples: fc.constantFrom(1, 4, 100, 4096),
    leastSamples: fc.constantFrom(1, 1000, 100000),
    mostSamples: fc.constantFrom(2000, 1e6, 1e10),
    leastHeadroomDb: fc.constantFrom(0, 1, 3.25),
    markerStep: fc.constantFrom(1, 4),
    levelMeans: fc.constantFrom<BenchProfile['content']['levelMeans']>(
      'activeRms',
      'fileRms',
      'fullScaleTone',
      'unknown',
    ),
    modes: fc.constantFrom<('loop' | 'burst')[]>(['loop'], ['loop', 'burst'], ['burst']),
  })
  .map((of): BenchProfile =>
    wideBench({
      sampleClockHz: { least: of.least, most: of.least * of.span, step: of.step },
      granularitySamples: of.granularitySamples,
      leastSamples: of.leastSamples,
      mostSamples: of.mostSamples,
      leastHeadroomDb: of.leastHeadroomDb,
      markers: { count: 2, packing: 'bytes', leastSamples: 1, stepSamples: of.markerStep },
      levelMeans: of.levelMeans,
      modes: of.modes,
    }),
  );

const levels = fc
  .option(
    fc.record({
      rendered: fc.double({ min: -6, max: 4, noNaN: true }),
      more: fc.double({ min: -0.2, max: 1, noNaN: true }),
      papr: fc.double({ min: 3, max: 12, noNaN: true }),
    }),
  )
  .map(
    (of): MeasuredLevels | null =>
      of && {
        fileRmsDbfs: of.rendered - of.papr - 0.5,
        activeRmsDbfs: of.rendered - of.papr,
        renderedPeakDbfs: of.rendered,
        reconstructedPeakDbfs: of.rendered + of.more,
        saturatedComponents: 0,
      },
  );

const intent = fc.record({
  outputRmsDbm: fc.constantFrom(null, -10, -3),
  lossDb: fc.constant(3),
  devicePeakLimitDbm: fc.constantFrom(null, 5, -4),
  deviceMeanLimitDbm: fc.constantFrom(null, 0),
  levelToleranceDb: fc.constantFrom(0, 1),
});

const KINDS: RemedyKind[] = [
  'repeats',
  'dropRepeats',
  'oversampling',
  'spacing',
  'fftSize',
  'offset',
  'tones',
  'payload',
  'mode',
  'gap',
  'pad',
  'markers',
  'headroom',
  'outputLevel',
];

/** Findings whose miss refuses a pack; the length's remainder has no more and less. */
const isComparable = (finding: FitFinding): boolean => finding.hard && finding.check !== 'granularity';

test('every remedy, applied, mends its finding, breaks no other, worsens no hard one, and leaves a valid document', () => {
  const seen = new Map<string, number>();
  fc.assert(
    fc.property(content, bench, levels, intent, (of, profile, measured, device) => {
      const document = documentOf(of, device);
      fc.pre(parseWaveformDocument(document).ok);
      const before = checkFit(document, profile, measured);
      for (const finding of before) {
        for (const remedy of finding.remedies) {
          seen.set(remedy.kind, (seen.get(remedy.kind) ?? 0) + 1);
          const after = applyChanges(document, remedy.changes);
          const parsed = parseWaveformDocument(after);
          expect(parsed.ok ? [] : parsed.issues).toEqual([]);
          for (const { pointer, before: was } of remedy.changes) {
            expect(
              pointer
                .split('/')
                .slice(1)
                .reduce<unknown>((value, key) => (value as Record<string, unknown>)[key], document),
            ).toEqual(was);
          }
          expect(deriveFigures(after.content).fileSamples - deriveFigures(of).fileSamples).toBe(remedy.price.samples);
          if (after.content.frequencyOffsetHz === of.frequencyOffsetHz && remedy.kind !== 'spacing')
            expect(remedy.price.ppm).toBe(0);
          const now = checkFit(after, profile, levelsAfter(measured, document, after));
          const mended = now.find((one) => one.check === finding.check)!;
          expect(`${remedy.label}: ${mended.verdict}`).toBe(`${remedy.label}: meets`);
          if (finding.check === 'payloadWrap') expect(mended.limit).toBeNull();
          for (const one of now) {
            const old = before.find((other) => other.check === one.check)!;
            if (one.verdict !== 'misses') continue;
            expect(`${remedy.label}: ${one.check} ${old.verdict}`).toBe(`${remedy.label}: ${one.check} misses`);
            if (isComparable(one) && one.unit === old.unit)
              expect(one.distance ?? 0).toBeLessThanOrEqual((old.distance ?? 0) + 1e-6);
          }
        }
      }
    }),
    { numRuns: 90, seed: 20261201 },
  );
  // else the property says nothing about it
  expect([...seen.keys()].sort()).toEqual([...KINDS].sort());
});

/** Renders, quantizes and measures for real. */
function measureForReal(document: WaveformDocument, profile: BenchProfile): MeasuredLevels {
  const { content: of } = document;
  const synthesis = createSynthesis(of);
  const stats = vectorStats(synthesis);
  const scale = wordScale(
    of.level,
    {
      interpolatedPeak: interpolatedPeak(of),
      samplePeak: stats.samplePeak,
      componentPeak: stats.componentPeak,
      rms: stats.rms,
    },
    profile.content,
  );
  const samples = new Float64Array(2 * synthesis.samples);
  synthesis.rewind();
  for (let at = 0; at < samples.length;) at += 2 * synthesis.read(samples.subarray(at));
  const writer = createWordWriter(profile.content, scale);
  const bytes = new Uint8Array(writer.bytesPerSample * synthesis.samples);
  writer.write(samples, synthesis.samples, bytes);
  const words = Float64Array.from(new Int16Array(bytes.buffer));
  const measuring = createFrameMeasure(of);
  while (measuring.step());
  const frame = measuring.result();
  return levelsInDbfs({
    fileMeanPower: stats.rms ** 2,
    activeMeanPower: stats.activeRms ** 2,
    renderedPeakPower: frame.power.peakPower,
    reconstructedPower: reconstructedPeak(
      {
        samples: synthesis.samples,
        read: (first, count, out) => out.set(words.subarray(2 * first, 2 * (first + count))),
      },
      of.timing.mode,
    ).power,
    saturatedComponents: writer.saturated.components,
    scale: scale.scale,
    fullScale: fullScaleOf(profile.content),
  });
}

test('what a remedy foretells is what rendering it measures', () => {
  let checked = 0;
  for (const reference of ['samplePeak', 'componentPeak', 'interpolatedPeak', 'rms'] as const) {
    for (const granularitySamples of [1, 512]) {
      const document = documentOf(
        smallContent({
          symbolCount: 4,
          prefixSamples: [9],
          overlapSamples: 4,
          tray: [NULL_INK, dataInk(1, { constellation: '16qam', bitMap: 'ts38211', streamId: 's0' })],
          streams: [pnStream(0)],
          grid: { rows: [rowOf(64, (k) => (Math.abs(k) < 20 ? 1 : 0))], rowOfSymbol: [0, 0, 0, 0] },
          level: { reference, headroomDb: reference === 'rms' ? 12 : 0 },
        }),
      );
      const profile = wideBench({ leastHeadroomDb: 1, granularitySamples });
      const measured = measureForReal(document, profile);
      for (const finding of checkFit(document, profile, measured)) {
        for (const remedy of finding.remedies) {
          const after = applyChanges(document, remedy.changes);
          const foretold = levelsAfter(measured, document, after);
          const found = measureForReal(after, profile);
          const now = checkFit(after, profile, found).find((one) => one.check === finding.check)!;
          expect(`${remedy.label}: ${now.verdict} ${now.byHowMuch}`).toBe(`${remedy.label}: meets `);
          if (!foretold || after.content.timing.padSamples > 0) continue;
          for (const key of ['fileRmsDbfs', 'activeRmsDbfs', 'renderedPeakDbfs'] as const) {
            expect(Math.abs(foretold[key]! - found[key]!)).toBeLessThan(0.01);
          }
          checked++;
        }
      }
    }
  }
  expect(checked).toBeGreaterThan(4);
});
