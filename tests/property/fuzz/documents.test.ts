import { canonicalJson } from '@/lib/document/digest';
import { exampleDocuments } from '@/lib/document/examples/exampleDocuments';
import { mostIssues, type ParseResult } from '@/lib/document/issues';
import { parseBenchProfile, parseWaveformDocument } from '@/lib/document/parse';
import { exampleBenches } from '@/lib/document/examples/exampleBenches';
import { presets } from '@/lib/document/presets/presets';
import { canonicalGrid } from '@/lib/document/runs';
import {
  createSynthesis,
  deriveFigures,
  expandGrid,
  layoutRefusals,
  type BenchProfile,
  type WaveformDocument,
} from '@/lib/synth';
import { arbitraryDocument } from '@/tests/helpers/arbitraryDocument';
import { openBench, smallDocument } from '@/tests/helpers/documents';
import { createFuzzWatch, expectNoHang, fuzzCount, mutantOf } from '@/tests/helpers/fuzz';
import { seededRandom } from '@/tests/helpers/mutateDocument';
import fc from 'fast-check';

const seed = 20260417;
const documents = fuzzCount(43_000);
const profiles = fuzzCount(25_000);

/** A refusal that a person can read, bounded, with a place. */
function expectReadable({ issues, more }: Extract<ParseResult<unknown>, { ok: false }>): void {
  const isList = issues.length >= 1 && issues.length <= mostIssues && more >= 0;
  const areReadable = issues.every(
    ({ pointer, message, code }) =>
      /^(\/|$)/.test(pointer) && message.length > 3 && /^(invalid|too_large|malformed)$/.test(code),
  );
  if (!isList || !areReadable) throw new Error(JSON.stringify({ issues, more }).slice(0, 500));
}

/** What "half accepted" would look like: a right answer that dropped, changed or overlooked something. */
function expectSame(input: unknown, value: unknown): string {
  const text = canonicalJson(value);
  if (canonicalJson(typeof input === 'string' ? JSON.parse(input) : input) !== text)
    throw new Error('changed on the way');
  return text;
}

function expectWhole({ content }: WaveformDocument): void {
  if (content.grid.rowOfSymbol.length !== content.symbolCount) throw new Error('a symbol without a row');
  if (JSON.stringify(canonicalGrid(content.grid)) !== JSON.stringify(content.grid)) throw new Error('two spellings');
  const cells = expandGrid(content.grid, content.fftSize);
  if (cells.length !== content.symbolCount * content.fftSize) throw new Error('cells are missing');
  for (const cell of cells) if (cell >= content.tray.length) throw new Error('a cell without ink');
}

const block = new Float64Array(2 * 96);
/** Whatever passes can be rendered: figures are numbers, and so are samples at the file's beginning. */
function expectRendered({ content }: WaveformDocument): void {
  if (content.peakReduction.kind !== 'none') return;
  const { sampleClockHz, frameTimeSec } = deriveFigures(content);
  if (!(sampleClockHz > 0) || !Number.isFinite(frameTimeSec)) throw new Error('figures that are no numbers');
  const count = createSynthesis(content).read(block);
  if (count < 1) throw new Error('no samples');
  for (const part of block.subarray(0, 2 * count))
    if (!Number.isFinite(part)) throw new Error('a sample that is no number');
}

/** Small grids alone: what a grid's size costs is no question of a mutation. */
function baseTexts(): string[] {
  const built = [smallDocument(), ...[...exampleDocuments, ...presets].map(({ build }) => build())];
  const drawn = fc.sample(arbitraryDocument, { seed, numRuns: 12 });
  return [...built, ...drawn]
    .filter(({ content }) => content.fftSize * content.symbolCount <= 2048)
    .map((document) => JSON.stringify(document))
    .filter((text) => text.length <= 12_000);
}

test(`${documents} mutated documents, seed ${seed}: none crashes, hangs or is half accepted`, () => {
  const random = seededRandom(seed);
  const texts = baseTexts();
  expect(texts.length).toBeGreaterThan(8);
  const watch = createFuzzWatch(seed);
  const opening = createFuzzWatch(seed);
  let accepted = 0;
  for (let at = 0; at < documents; at += 1) {
    const input = mutantOf(texts, random);
    watch.run(at, () => {
      const result = opening.run(at, () => parseWaveformDocument(input));
      if (!result.ok) return expectReadable(result);
      accepted += 1;
      expectSame(input, result.value);
      expectWhole(result.value);
      if (accepted % 8 === 0) expectRendered(result.value);
    });
  }
  expect(opening.slowestMs()).toBeLessThan(1000);
  expectNoHang(watch);
  // both answers are met often enough to mean something
  expect(accepted).toBeGreaterThan(documents / 100);
  expect(accepted).toBeLessThan(documents / 2);
});

test(`${profiles} mutated bench profiles, seed ${seed}: none crashes, hangs or is half accepted`, () => {
  const random = seededRandom(seed + 1);
  const bases: BenchProfile[] = [openBench(), ...exampleBenches.map(({ build }) => build())];
  const texts = bases.map((base) => JSON.stringify(base));
  const watch = createFuzzWatch(seed + 1);
  let accepted = 0;
  for (let at = 0; at < profiles; at += 1) {
    const input = mutantOf(texts, random);
    watch.run(at, () => {
      const result = parseBenchProfile(input);
      if (!result.ok) return expectReadable(result);
      accepted += 1;
      const text = expectSame(input, result.value);
      const again = parseBenchProfile(text);
      if (!again.ok || canonicalJson(again.value) !== text) throw new Error('not the same when read again');
      // a layout that no file can have is refused in words
      for (const { path, words } of layoutRefusals(result.value.content))
        if (path.length === 0 || words.length < 4) throw new Error('a refusal without words');
    });
  }
  expectNoHang(watch);
  expect(accepted).toBeGreaterThan(profiles / 100);
  expect(accepted).toBeLessThan(profiles / 2);
});
