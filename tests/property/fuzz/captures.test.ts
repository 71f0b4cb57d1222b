import {
  bytesPerSample,
  createVectorGather,
  createWordReader,
  layoutRefusals,
  SynthError,
  type BenchContent,
} from '@/lib/synth';
import { openBench } from '@/tests/helpers/documents';
import { createFuzzWatch, expectNoHang, fuzzCount, mutateBytes } from '@/tests/helpers/fuzz';
import { seededRandom } from '@/tests/helpers/mutateDocument';

const seed = 20260418;
const captures = fuzzCount(24_000);
const SAMPLES = 60;

/** Every layout that a file can have, with two converters' widths. */
function layouts(): BenchContent[] {
  const all: BenchContent[] = [];
  for (const container of ['raw', 'wav', 'npy', 'csv'] as const)
    for (const word of ['int8', 'int16', 'float32'] as const)
      for (const byteOrder of ['little', 'big'] as const)
        for (const layout of ['interleaved', 'split'] as const)
          for (const numberFormat of ['twosComplement', 'offsetBinary'] as const)
            for (const align of ['left', 'right'] as const) {
              if (word !== 'int16' && (align === 'left' || (word === 'float32' && numberFormat === 'offsetBinary')))
                continue;
              const bits = word === 'int8' ? 8 : word === 'float32' ? 16 : align === 'left' ? 12 : 14;
              const bench = openBench({ container, word, byteOrder, layout, numberFormat, align, bits }).content;
              if (layoutRefusals(bench).length === 0) all.push(bench);
            }
  return all;
}

/** Bytes that look like a capture in that layout: words near full scale, or decimal numbers in text. */
function captureBytes(bench: BenchContent, bytes: number, random: () => number): Uint8Array {
  const out = new Uint8Array(bytes);
  if (bench.container === 'csv') {
    const numbers = Math.floor(bytes / 16);
    const text = Array.from({ length: numbers }, (_, i) => {
      const value = (2 * random() - 1).toExponential(8).replace(/e([+-])(\d)$/, 'e$10$2');
      return `${value.startsWith('-') ? '' : '+'}${value}${bench.layout === 'split' || i % 2 === 1 ? '\n' : ','}`;
    });
    out.set(Buffer.from(text.join('')).subarray(0, bytes));
  } else for (let i = 0; i < bytes; i++) out[i] = Math.floor(random() * 256);
  return out;
}

test(`${captures} mutated captures in every layout, seed ${seed}: numbers or a refusal, never a crash or a part`, () => {
  const random = seededRandom(seed);
  const benches = layouts();
  expect(benches.length).toBeGreaterThan(20);
  const bases = benches.map((bench) => {
    const files = bench.layout === 'split' ? 2 : 1;
    return captureBytes(bench, (SAMPLES * bytesPerSample(bench)) / files, random);
  });
  const watch = createFuzzWatch(seed);
  const words = new Float64Array(2 * SAMPLES);
  let refused = 0;
  for (let at = 0; at < captures; at += 1) {
    const bench = benches[at % benches.length]!;
    const files = bench.layout === 'split' ? 2 : 1;
    const parts = Array.from({ length: files }, () => mutateBytes(bases[at % benches.length]!, random));
    watch.run(at, () => {
      words.fill(-7777);
      try {
        const gathered = createVectorGather(bench).gather(parts, SAMPLES);
        createWordReader(bench).readWords(gathered, 0, SAMPLES, words);
      } catch (error) {
        if (!(error instanceof SynthError) || error.code !== 'buffer_too_small') throw error;
        refused += 1;
        // refused before anything was written
        if (words.some((word) => word !== -7777)) throw new Error('a half result');
        if (parts.every((part) => (part.length * files) / bytesPerSample(bench) >= SAMPLES))
          throw new Error('refused what was long enough');
        return;
      }
      if (bench.word === 'float32') return;
      const most = 2 ** (bench.bits - 1);
      const isWide = bench.word === 'int16' && bench.align === 'right';
      for (const word of words)
        if (!Number.isInteger(word) || (!isWide && Math.abs(word) > most)) throw new Error(`${word} is no word`);
    });
  }
  expectNoHang(watch);
  expect(refused).toBeGreaterThan(captures / 50);
  expect(refused).toBeLessThan(captures / 2);
});
