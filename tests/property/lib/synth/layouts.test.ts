import fc from 'fast-check';
import {
  createVectorForm,
  createVectorGather,
  createWordReader,
  createWordWriter,
  freeMarkerBits,
  fullScaleOf,
  markerBytes,
  vectorBytes,
  vectorRefusals,
  type BenchContent,
  type Marker,
} from '@/lib/synth';
import { smallDocument } from '@/tests/helpers/documents';
import { allLayouts, refusalsOf } from '@/tests/helpers/layouts';

const every = [...allLayouts()].map((bench) => ({ bench, refusals: refusalsOf(bench) }));
const possible = every.filter(({ refusals }) => refusals.length === 0).map(({ bench }) => bench);

/** One symbol of 16 samples and a pad: as many samples as a case asks for, and its markers. */
const contentOf = (samples: number, markers: Marker[]) => ({
  ...smallDocument({
    fftSize: 16,
    symbolCount: 1,
    prefixSamples: [0],
    overlapSamples: 0,
    timing: { mode: 'loop', repeats: 1, gapSamples: 0, padSamples: samples - 16 },
    grid: { rows: [[16, 1]], rowOfSymbol: [0] },
    markers,
  }).content,
  oversampling: 1,
});

const mark = fc.record({
  name: fc.constant('M'),
  at: fc.constant('file' as const),
  symbol: fc.constant(null),
  offsetSamples: fc.integer({ min: -100, max: 100 }),
  lengthSamples: fc.integer({ min: 1, max: 30 }),
});

/** What the words have to be, counted here by hand and not by the library. */
function meant(bench: BenchContent, value: number, scale: number, isQ: boolean): number {
  const exact = isQ && bench.negateQ ? -value * scale : value * scale;
  let word: number;
  if (bench.word === 'float32') word = Math.fround(exact);
  else {
    const floor = Math.floor(exact);
    const rest = exact - floor;
    const isUp = rest > 0.5 || (rest === 0.5 && floor % 2 !== 0);
    const most = 2 ** (bench.bits - 1) - 1;
    word = Math.min(Math.max(floor + (isUp ? 1 : 0), -most - 1), most);
  }
  return isQ && bench.negateQ ? 0 - word : word;
}

test('the table of what is possible: each refused combination says why', () => {
  const words = new Map<string, number>();
  for (const { refusals } of every) for (const one of refusals) words.set(one, (words.get(one) ?? 0) + 1);
  expect([...words.keys()].sort()).toEqual([
    '/content/byteOrder must be "little" in WAV: WAV stores the low byte first',
    '/content/layout must be "interleaved" in WAV: I and Q are the two channels of one WAV file',
    '/content/markers/packing must not be "lowBits": that needs left-aligned int16 words with free low bits',
    '/content/numberFormat must be "offsetBinary": 8-bit words in WAV are unsigned',
    '/content/numberFormat must be "twosComplement" with float32 words',
    '/content/numberFormat must be "twosComplement": 16-bit words in WAV are signed',
    '/content/word must be "float32" in CSV: CSV holds decimal numbers, full scale 1.0, which are floats',
  ]);
  // counted by hand. raw and npy: 8 order, layout × swap, negate each; 4 for WAV, which leaves swap and negate alone
  const plain = 1 * 2 * 2 + 18 * 2 * 2 + 1 * 2; // none, bytes: word spellings × format × packing
  const low = 8 * 2; // 8 to 15 bits to the left, both formats
  const wav = 4 * (1 * 2 + (18 * 2 + 8) + 1 * 2);
  const csv = 16 * 2;
  expect(possible).toHaveLength(2 * 16 * (plain + low) + wav + csv);
});

test('in every layout all words come back, both ways, in blocks of any size', () => {
  let turn = 0;
  const next = () => possible[turn++ % possible.length]!;
  fc.assert(
    fc.property(
      fc.array(fc.float({ noNaN: true, min: Math.fround(-1.5), max: 1.5 }), { minLength: 32, maxLength: 90 }),
      fc.array(mark, { maxLength: 4 }),
      fc.integer({ min: 1, max: 17 }),
      (numbers, marks, blockSamples) => {
        const bench = next();
        const count = Math.floor(numbers.length / 2);
        const samples = Float64Array.from(numbers).subarray(0, 2 * count);
        const content = contentOf(count, bench.markers.packing === 'none' ? [] : marks);
        if (bench.markers.packing === 'lowBits' && marks.length > freeMarkerBits(bench)) {
          expect(vectorRefusals(content, bench)).toHaveLength(1);
          expect(() => createVectorForm(content, bench)).toThrow(expect.objectContaining({ code: 'too_large' }));
          return;
        }
        const fullScale = fullScaleOf(bench);
        const scale = { scale: fullScale, fullScale, referenceLevel: 1, isSilent: false };
        const writer = createWordWriter(bench, scale);
        const form = createVectorForm(content, bench);
        const files: number[][] = form.files.map(({ head }) => [...head]);
        const size = writer.bytesPerSample;
        for (let at = 0; at < count; at += blockSamples) {
          const part = Math.min(blockSamples, count - at);
          const words = new Uint8Array(part * size);
          writer.write(samples.subarray(2 * at), part, words);
          form.form(words, part).forEach((bytes, i) => files[i]!.push(...bytes));
        }
        expect(files.map(({ length }) => length)).toEqual(form.files.map(({ bytes }) => bytes));
        expect(files.reduce((sum, { length }) => sum + length, 0)).toBe(vectorBytes(content, bench));

        const found = files.map((bytes) => Uint8Array.from(bytes));
        const gather = createVectorGather(bench);
        const reader = createWordReader(bench);
        const wanted = new Uint8Array(count);
        markerBytes(content).read(wanted);
        const back = new Float64Array(2 * count);
        const marked = new Uint8Array(count);
        for (let at = 0; at < count; at += 7) {
          const part = Math.min(7, count - at);
          const stored = form.files.map(({ head, bytesPerSample }, i) =>
            found[i]!.subarray(head.length + at * bytesPerSample),
          );
          const words = gather.gather(stored, part);
          reader.readWords(words, 0, part, back.subarray(2 * at));
          gather.readMarkers(words, part, marked.subarray(at));
        }
        samples.forEach((value, i) => {
          const word = meant(bench, value, scale.scale, i % 2 === 1);
          if (back[i] !== word) expect([i, back[i]]).toEqual([i, word]);
        });
        expect([...marked]).toEqual(bench.markers.packing === 'lowBits' ? [...wanted] : [...new Uint8Array(count)]);
        // the other way: words that were read are written as the same bytes
        const again = createVectorForm(content, bench);
        const rewritten = new Uint8Array(count * size);
        const one = { ...scale, scale: 1 };
        createWordWriter(bench, one).write(back, count, rewritten);
        again.form(rewritten, count).forEach((bytes, i) => {
          expect(Buffer.compare(found[i]!.subarray(again.files[i]!.head.length), bytes) === 0).toBe(true);
        });
      },
    ),
    { numRuns: possible.length, seed: 20261201 },
  );
});
