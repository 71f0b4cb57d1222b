import fc from 'fast-check';
import { canonicalJson, contentDigest, documentDigest } from '@/lib/document/digest';
import { exampleDocuments } from '@/lib/document/examples/exampleDocuments';
import { mostIssues } from '@/lib/document/issues';
import { parseWaveformDocument } from '@/lib/document/parse';
import { presets } from '@/lib/document/presets/presets';
import { canonicalGrid } from '@/lib/document/runs';
import { compressGrid, expandGrid, type WaveformDocument } from '@/lib/synth/index';
import { arbitraryDocument } from '@/tests/helpers/arbitraryDocument';
import { smallDocument } from '@/tests/helpers/documents';
import { mutateText, mutateValue, seededRandom } from '@/tests/helpers/mutateDocument';

function parsed(input: unknown): WaveformDocument {
  const result = parseWaveformDocument(input);
  if (!result.ok) throw new Error(JSON.stringify(result.issues));
  return result.value;
}

test('a right document survives canonical JSON, with the same digests', () => {
  fc.assert(
    fc.property(arbitraryDocument, (document) => {
      const text = canonicalJson(document);
      const back = parsed(text);
      expect(back).toEqual(document);
      expect(canonicalJson(back)).toBe(text);
      expect(documentDigest(back)).toBe(documentDigest(document));
      expect(contentDigest(back.content)).toBe(contentDigest(document.content));
      expect(parsed(new TextEncoder().encode(JSON.stringify(document, null, 1)))).toEqual(document);
    }),
    { numRuns: 300 },
  );
});

test('equal cells have one spelling: cut and shuffled runs come back to it', () => {
  fc.assert(
    fc.property(arbitraryDocument, fc.nat(), ({ content: { grid, fftSize, symbolCount } }, salt) => {
      const rows = grid.rows.flatMap((row) => [
        row.flatMap((entry, at) => (at % 2 === 0 && entry > 1 ? [1, row[at + 1]!, entry - 1] : [entry])),
      ]);
      const doubled = [[fftSize, 63], ...rows, ...grid.rows];
      const rowOfSymbol = grid.rowOfSymbol.map((row, symbol) => 1 + row + ((symbol + salt) % 2) * rows.length);
      expect(canonicalGrid({ rows: doubled, rowOfSymbol })).toEqual(grid);
      expect(compressGrid(expandGrid(grid, fftSize), fftSize, symbolCount)).toEqual(grid);
    }),
    { numRuns: 200 },
  );
});

const seed = 20260417;
const mutants = 20_000;
const LONGEST_MS = 1000;

/** Milliseconds that a parse takes; a slow one is tried again, since other work on the machine is not the document's doing. */
function parseMs(input: unknown): number {
  let least = Infinity;
  for (let tries = 0; tries < 4 && least > LONGEST_MS; tries += 1) {
    const start = performance.now();
    parseWaveformDocument(input);
    least = Math.min(least, performance.now() - start);
  }
  return least;
}

// What "half accepted" would look like: a right answer that dropped, changed or overlooked something.
function expectWhole(input: unknown, value: WaveformDocument): void {
  const source: unknown = typeof input === 'string' ? JSON.parse(input) : input;
  const text = canonicalJson(value);
  expect(canonicalJson(source)).toBe(text);
  expect(canonicalJson(parsed(text))).toBe(text);
  const { content } = value;
  expect(content.grid.rowOfSymbol).toHaveLength(content.symbolCount);
  expect(JSON.stringify(canonicalGrid(content.grid))).toBe(JSON.stringify(content.grid));
  const cells = expandGrid(content.grid, content.fftSize);
  expect(cells).toHaveLength(content.symbolCount * content.fftSize);
  for (const cell of cells) if (cell >= content.tray.length) throw new Error('a cell without ink');
}

test(`${mutants} mutated documents, seed ${seed}: none crashes, takes over 1 s or is half accepted`, () => {
  const random = seededRandom(seed);
  const all = [smallDocument(), ...[...exampleDocuments, ...presets].map(({ build }) => build())];
  const bases = all.filter(({ content }) => content.fftSize * content.symbolCount <= 4096);
  expect(bases.length).toBeGreaterThan(5);
  const texts = bases.map((base) => JSON.stringify(base));
  let accepted = 0;
  let slowest = 0;
  for (let at = 0; at < mutants; at += 1) {
    const text = texts[Math.floor(random() * texts.length)]!;
    let input: unknown;
    if (random() < 0.3) input = mutateText(text, random);
    else {
      input = JSON.parse(text);
      for (let times = 1 + Math.floor(random() ** 2 * 4); times > 0; times -= 1) mutateValue(input, random);
      if (random() < 0.3) input = JSON.stringify(input);
    }
    const start = performance.now();
    const result = parseWaveformDocument(input);
    const took = performance.now() - start;
    slowest = Math.max(slowest, took > LONGEST_MS ? parseMs(input) : took);
    if (result.ok) {
      accepted += 1;
      expectWhole(input, result.value);
    } else {
      const { issues, more } = result;
      const isList = issues.length >= 1 && issues.length <= mostIssues && more >= 0;
      const areReadable = issues.every(
        ({ pointer, message, code }) =>
          /^(\/|$)/.test(pointer) && message.length > 3 && /^(invalid|too_large|malformed)$/.test(code),
      );
      if (!isList || !areReadable) throw new Error(`mutant ${at}: ${JSON.stringify(result).slice(0, 500)}`);
    }
  }
  expect(slowest).toBeLessThanOrEqual(LONGEST_MS);
  // both answers are met often enough to mean something
  expect(accepted).toBeGreaterThan(mutants / 100);
  expect(accepted).toBeLessThan(mutants / 2);
});
