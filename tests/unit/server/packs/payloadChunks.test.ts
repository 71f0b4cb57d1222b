import fc from 'fast-check';
import { createCellValues } from '@/lib/synth';
import { listedRepeats, payloadChunks, usedStreams } from '@/server/packs/entryChunks';
import { arbitraryContent } from '../../../helpers/arbitraryContent';

test("a stream's file is the bits of its cells, one after another", () => {
  let files = 0;
  fc.assert(
    fc.property(arbitraryContent({ cellsMost: 512, samplesMost: 8192 }), (content) => {
      const values = createCellValues(content);
      for (const stream of usedStreams(values)) {
        const wanted: number[] = [];
        for (let repeat = 0; repeat < listedRepeats(values); repeat++) {
          for (let symbol = 0; symbol < content.symbolCount; symbol++) {
            const bits = new Uint8Array(values.bitsOfSymbol(stream, symbol));
            values.readBits(stream, repeat, symbol, bits);
            wanted.push(...bits);
          }
        }
        const count = { bits: 0, ones: 0 };
        const bytes = Buffer.concat([...payloadChunks(values, stream, count)]);
        expect(bytes.length).toBe(Math.ceil(wanted.length / 8));
        const found = [...bytes].flatMap((byte) => [7, 6, 5, 4, 3, 2, 1, 0].map((bit) => (byte >> bit) & 1));
        expect(found.slice(0, wanted.length).join('')).toBe(wanted.join(''));
        expect(found.slice(wanted.length).every((bit) => bit === 0)).toBe(true);
        expect(count).toEqual({ bits: wanted.length, ones: wanted.filter((bit) => bit === 1).length });
        files++;
      }
    }),
    { numRuns: 60, seed: 11 },
  );
  expect(files).toBeGreaterThan(30);
});
