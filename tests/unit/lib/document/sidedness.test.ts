import fc from 'fast-check';
import { sidednessOf, sidednessWords } from '@/lib/document/sidedness';
import { parseWaveformDocument } from '@/lib/document/parse';
import { createSynthesis, deriveFigures, type BenchContent } from '@/lib/synth/index';
import { refusalOf } from '@/server/packs/refusals';
import { openBench, smallDocument } from '@/tests/helpers/documents';

function madeFor(overrides: Partial<BenchContent>) {
  const made = sidednessOf(openBench(overrides));
  if (!made.ok) throw new Error(made.issue.message);
  return made.value;
}

test('is one tone at +N/8 on 16 samples: an eighth of a turn forward from sample to sample', () => {
  const { document, words } = madeFor({});
  expect(parseWaveformDocument(JSON.stringify(document))).toMatchObject({ ok: true });
  const synthesis = createSynthesis(document.content);
  expect(synthesis.samples).toBe(16);
  const x = new Float64Array(32);
  synthesis.read(x);
  const size = Math.hypot(x[0]!, x[1]!);
  for (let n = 0; n < 16; n++) {
    expect(x[2 * n]! / size).toBeCloseTo(Math.cos((2 * Math.PI * n) / 8), 12);
    expect(x[2 * n + 1]! / size).toBeCloseTo(Math.sin((2 * Math.PI * n) / 8), 12);
  }
  expect(deriveFigures(document.content).sampleClockHz).toBe(16e6);
  expect(words).toContain('the tone stands 2 MHz above the carrier');
  expect(document.about.title).toBe('Sidedness: tone 2 MHz above the carrier');
});

test.each<[string, Partial<BenchContent>, object]>([
  [
    'a clock range below',
    { sampleClockHz: { least: 1e3, most: 48e3, step: null } },
    { subcarrierSpacingHz: [3000, 1] },
  ],
  [
    'a step of three tenths',
    { sampleClockHz: { least: 1e6, most: 2e7, step: 0.3 } },
    { subcarrierSpacingHz: [159999999, 160] },
  ],
  ['lengths', { granularitySamples: 24, leastSamples: 100 }, { timing: expect.objectContaining({ repeats: 9 }) }],
  ['bursts alone', { modes: ['burst'] }, { timing: expect.objectContaining({ mode: 'burst' }) }],
  ['more headroom', { leastHeadroomDb: 6 }, { level: { reference: 'interpolatedPeak', headroomDb: 6 } }],
  ['very long files', { leastSamples: 2 ** 24, mostSamples: 2 ** 24 }, { symbolCount: 16 }],
])('keeps to the profile: %s', (_name, overrides, content) => {
  const { document } = madeFor(overrides);
  expect(document.content).toMatchObject(content);
  expect(refusalOf(document, openBench(overrides))).toBeNull();
});

test('says why there is none', () => {
  const none = (overrides: Partial<BenchContent>) => sidednessOf(openBench(overrides));
  expect(none({ sampleClockHz: { least: 1e6 + 1, most: 2e6 - 1, step: 1e6 } })).toMatchObject({
    ok: false,
    issue: { pointer: '/content/sampleClockHz/step' },
  });
  expect(none({ sampleClockHz: { least: 2e10, most: 3e10, step: null } })).toMatchObject({ ok: false });
  expect(none({ granularitySamples: 9, leastSamples: 1, mostSamples: 20 })).toMatchObject({
    ok: false,
    issue: { pointer: '/content/mostSamples' },
  });
});

test('whatever a profile asks for, a pack of it is not refused', () => {
  const clock = fc
    .tuple(fc.double({ min: 1, max: 1e10, noNaN: true }), fc.double({ min: 1, max: 1e10, noNaN: true }))
    .map(([a, b]) => ({ least: Math.min(a, b), most: Math.max(a, b) }));
  const step = fc.option(fc.constantFrom(0.1, 1, 2.5, 1000, 1e6));
  const samples = fc.tuple(fc.integer({ min: 1, max: 2 ** 22 }), fc.integer({ min: 1, max: 2 ** 30 }));
  fc.assert(
    fc.property(clock, step, samples, fc.integer({ min: 1, max: 5000 }), (range, by, [a, b], granularitySamples) => {
      const profile = openBench({
        sampleClockHz: { ...range, step: by },
        leastSamples: Math.min(a, b),
        mostSamples: Math.max(a, b),
        granularitySamples,
      });
      const made = sidednessOf(profile);
      if (!made.ok) return;
      expect(parseWaveformDocument(JSON.stringify(made.value.document))).toMatchObject({ ok: true });
      expect(refusalOf(made.value.document, profile)?.message ?? null).toBeNull();
    }),
    { numRuns: 150, seed: 20261201 },
  );
});

test('is known again by its content, not by its title', () => {
  const profile = openBench();
  const { document, words } = madeFor({});
  expect(sidednessWords({ ...document, about: { ...document.about, title: 'Other' } }, profile)).toBe(words);
  expect(sidednessWords(document, openBench({ leastSamples: 32 }))).toBeNull();
  expect(
    sidednessWords(smallDocument({ fftSize: 16, grid: { rows: [[16, 1]], rowOfSymbol: [0, 0, 0, 0] } }), profile),
  ).toBeNull();
});
