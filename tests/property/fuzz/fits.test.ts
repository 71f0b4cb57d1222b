import fc from 'fast-check';
import { exampleBenches } from '@/lib/document/examples/exampleBenches';
import { parseBenchProfile, parseWaveformDocument } from '@/lib/document/parse';
import { applyChanges, checkFit, type BenchProfile, type WaveformDocument } from '@/lib/synth';
import { arbitraryDocument } from '@/tests/helpers/arbitraryDocument';
import { openBench, smallDocument } from '@/tests/helpers/documents';
import { createFuzzWatch, expectNoHang, fuzzCount, mutantOf } from '@/tests/helpers/fuzz';
import { seededRandom } from '@/tests/helpers/mutateDocument';

const seed = 20260422;
const pairs = fuzzCount(100);

/** Mutants until one is accepted, odd as it may be. */
function acceptedOf<T>(
  texts: string[],
  random: () => number,
  parse: (input: unknown) => { ok: true; value: T } | { ok: false },
): T {
  for (;;) {
    const result = parse(mutantOf(texts, random));
    if (result.ok) return result.value;
  }
}

test(`${pairs} fits of accepted mutants, seed ${seed}: every limit is judged in words, every remedy leaves a right document`, () => {
  const random = seededRandom(seed);
  const documents = [smallDocument(), ...fc.sample(arbitraryDocument, { seed, numRuns: 12 })].map((one) =>
    JSON.stringify(one),
  );
  const benches: BenchProfile[] = [openBench(), ...exampleBenches.map(({ build }) => build())];
  const profiles = benches.map((one) => JSON.stringify(one));
  const watch = createFuzzWatch(seed);
  let remedies = 0;
  for (let at = 0; at < pairs; at += 1) {
    const document: WaveformDocument = acceptedOf(documents, random, parseWaveformDocument);
    const profile = acceptedOf(profiles, random, parseBenchProfile);
    watch.run(at, () => {
      const findings = checkFit(document, profile, null);
      if (new Set(findings.map(({ check }) => check)).size !== 13) throw new Error('a limit was not judged');
      for (const { verdict, words, measured, limit, distance, remedies: offered } of findings) {
        if (!['meets', 'misses', 'cannotJudge'].includes(verdict) || words.length < 5)
          throw new Error(`${verdict}: ${words}`);
        if ([measured, limit, distance].some((figure) => figure !== null && Number.isNaN(figure)))
          throw new Error(words);
        for (const { label, changes } of offered) {
          remedies += 1;
          const mended = parseWaveformDocument(applyChanges(document, changes));
          if (!mended.ok) throw new Error(`${label}: ${JSON.stringify(mended.issues[0])}`);
        }
      }
    });
  }
  expectNoHang(watch);
  expect(remedies).toBeGreaterThan(pairs / 4);
});
