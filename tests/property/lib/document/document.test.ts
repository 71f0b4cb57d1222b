import fc from 'fast-check';
import { canonicalJson, contentDigest, documentDigest } from '@/lib/document/digest';
import { parseWaveformDocument } from '@/lib/document/parse';
import { canonicalGrid } from '@/lib/document/runs';
import { compressGrid, expandGrid, type WaveformDocument } from '@/lib/synth/index';
import { arbitraryDocument } from '@/tests/helpers/arbitraryDocument';

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
