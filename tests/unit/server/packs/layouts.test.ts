import { mkdtempSync, rmSync } from 'node:fs';
import { open, truncate } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import path from 'node:path';
import { createDigestJob } from '@/lib/editor/live/digest';
import {
  createSynthesis,
  createVectorForm,
  createWordWriter,
  fullScaleOf,
  vectorFiles,
  type BenchContent,
  type WaveformDocument,
} from '@/lib/synth';
import { makePack, requireProof, scaleOf } from '@/server/packs/makePack';
import { measureRendering } from '@/server/packs/measureRendering';
import { openPool } from '@/server/packs/pool/workPool';
import { readSmallEntry, readZipEntries } from '@/server/packs/zipReader';
import { proveVector } from '@/server/packs/vectorProof';
import { writeVector } from '@/server/packs/vectorWriter';
import { wordWords } from '@/server/packs/wordWords';
import { openBench, smallDocument } from '../../../helpers/documents';

let folder: string;
beforeEach(() => (folder = mkdtempSync(path.join(tmpdir(), 'layouts-'))));
afterEach(() => rmSync(folder, { recursive: true, force: true }));

const document: WaveformDocument = smallDocument({
  markers: [{ name: 'Frame', at: 'repeat', symbol: null, offsetSamples: 3, lengthSamples: 5 }],
});
const float = { word: 'float32' } as const;
const lowBits = { count: 1, packing: 'lowBits', leastSamples: 1, stepSamples: 1 } as const;
const benchOf = (layout: Partial<BenchContent>) => openBench({ markers: { ...lowBits, packing: 'bytes' }, ...layout });

test.each<[string, Partial<BenchContent>]>([
  ['split', { layout: 'split' }],
  ['WAV', { container: 'wav' }],
  ['npy in two files', { ...float, container: 'npy', layout: 'split' }],
  ['CSV in two files', { ...float, container: 'csv', layout: 'split', swapIq: true }],
  ['markers in low bits', { bits: 12, align: 'left', markers: lowBits }],
])('the page takes the digest of the very bytes that a pack holds: %s', async (_name, layout) => {
  const bench = benchOf(layout);
  const outFile = () => path.join(folder, 'pack.zip');
  const result = await makePack({ document, profile: bench, state: 'draft', tmpFolder: folder, outFile });
  if (!result.ok) throw new Error(result.message);
  const job = createDigestJob(document.content, bench.content);
  while (job.step());
  const bytes = result.pack.manifest.files
    .filter(({ role }) => role.startsWith('vector'))
    .reduce((sum, file) => sum + file.bytes, 0);
  expect(job.result()).toEqual({ sha256: result.pack.vectorSha256, bytes });
});

test.each<[string, Partial<BenchContent>]>([
  ['split', { layout: 'split' }],
  ['CSV', { ...float, container: 'csv' }],
  ['markers in low bits, split', { bits: 14, align: 'left', layout: 'split', markers: { ...lowBits, count: 2 } }],
])('copied repeats are the bytes that a rendering in one go gives: %s', async (_name, layout) => {
  const { content } = document;
  const mark = content.markers[0]!;
  const repeated: WaveformDocument = {
    ...document,
    content: {
      ...content,
      timing: { ...content.timing, repeats: 50 },
      // one on in every repeat, one that only the first has: both over a border
      markers: [
        { ...mark, offsetSamples: -2 },
        { ...mark, name: 'Start', at: 'file', offsetSamples: 318, lengthSamples: 9 },
      ],
    },
  };
  const profile = openBench({ markers: { ...lowBits, packing: 'bytes', count: 2 }, ...layout });
  const outFile = () => path.join(folder, 'pack.zip');
  const result = await makePack({ document: repeated, profile, state: 'draft', tmpFolder: folder, outFile });
  if (!result.ok) throw new Error(result.message);
  const { manifest, file } = result.pack;
  const synthesis = createSynthesis(repeated.content);
  const { scaleLsbPerUnit } = manifest.word;
  const fullScale = fullScaleOf(profile.content);
  const scale = { scale: scaleLsbPerUnit, fullScale, referenceLevel: 1, isSilent: false };
  const writer = createWordWriter(profile.content, scale);
  const words = new Uint8Array(synthesis.samples * writer.bytesPerSample);
  synthesis.readWords(writer, synthesis.samples, words);
  const form = createVectorForm(repeated.content, profile.content);
  const meant = form.form(words, synthesis.samples).map((part, i) => Buffer.concat([form.files[i]!.head, part]));
  const handle = await open(file, 'r');
  const entries = await readZipEntries(handle);
  for (const [i, bytes] of meant.entries())
    expect((await readSmallEntry(handle, entries[i]!, 1 << 24)).equals(bytes)).toBe(true);
  await handle.close();
});

/** Writes a vector, damages it, and says why it is not offered. */
async function whyNot(layout: Partial<BenchContent>, damage: (files: string[]) => Promise<void>): Promise<string> {
  const bench = benchOf(layout);
  const pool = openPool(document.content, bench.content);
  const measure = await measureRendering(pool, document.content);
  const scale = scaleOf(document, bench, measure);
  const names = vectorFiles(document.content, bench.content).map(({ ending }) => path.join(folder, `vector${ending}`));
  const handles = await Promise.all(names.map((file) => open(file, 'wx+')));
  const placesNow = () =>
    Promise.all(handles.map(async (handle) => ({ handle, offsetBytes: 0, bytes: (await handle.stat()).size })));
  await writeVector(pool, document.content, bench.content, scale, await placesNow());
  await damage(names);
  try {
    const proof = await proveVector(pool, document.content, bench.content, scale, await placesNow());
    requireProof(proof, measure.stats.samples);
  } catch (error) {
    return (error as Error).message;
  } finally {
    for (const handle of handles) await handle.close();
  }
  return 'offered';
}

async function put(file: string, at: number, text: string): Promise<void> {
  const handle = await open(file, 'r+');
  await handle.write(Buffer.from(text, 'latin1'), 0, text.length, at);
  await handle.close();
}

test.each<[string, Partial<BenchContent>, (files: string[]) => Promise<void>, RegExp]>([
  ['nothing', { layout: 'split' }, async () => {}, /^offered$/],
  ['one word of Q', { layout: 'split' }, ([, q]) => put(q!, 100, '\xff'), /1 of 640 words differ/],
  ['Q shorter', { layout: 'split' }, ([, q]) => truncate(q!, 200), /has 100 samples instead of 320/],
  ['another clock in the head', { container: 'wav' }, ([wav]) => put(wav!, 24, '\x01'), /begins? with another head/],
  ['a shape', { container: 'npy' }, ([npy]) => put(npy!, 12, 'x'), /begins? with another head/],
  ['a head cut off', { container: 'npy' }, ([npy]) => truncate(npy!, 50), /no whole sample/],
  ['a digit', { ...float, container: 'csv' }, ([csv]) => put(csv!, 4 + 32 * 7 + 2, '0'), /words differ/],
  [
    'a marker bit',
    { bits: 12, align: 'left', markers: lowBits },
    // the third sample's first word carries a marker bit, its low bits are empty
    ([raw]) => put(raw!, 4 * 2, '\x01'),
    /1 of 640 words differ/,
  ],
])('what is damaged on the disk is not offered, and it says why: %s', async (_name, layout, damage, words) => {
  expect(await whyNot(layout, damage)).toMatch(words);
});

test.each<[Partial<BenchContent>, string]>([
  [{}, "16-bit signed integers, two's complement, little-endian: the value 1 is stored 01 00; I0 Q0 I1 Q1 …"],
  [
    { bits: 12, align: 'left', byteOrder: 'big', numberFormat: 'offsetBinary' },
    '16-bit unsigned integers, offset binary, 12 bits aligned to the left, big-endian: 0 is stored 80 00, the value 1 is stored 80 10; I0 Q0 I1 Q1 …',
  ],
  [
    { word: 'int8', bits: 8, swapIq: true, layout: 'split' },
    "8-bit signed integers, two's complement: the value 1 is stored 01; Q in the file that ends in -i, I in the one that ends in -q",
  ],
  [
    { bits: 14, align: 'left', markers: { ...lowBits, count: 4 }, negateQ: true },
    "16-bit signed integers, two's complement, 14 bits aligned to the left, little-endian: the value 1 is stored 04 00; I0 Q0 I1 Q1 …, Q negated; low bits: in the first word of a sample bits 0 to 1 are markers 0 to 1, in the second bits 0 to 1 are markers 2 to 3",
  ],
  [
    { ...float, container: 'csv', swapIq: true },
    'decimal numbers of single precision, full scale 1.0: the value 0.5 is stored +5.00000000e-01; columns Q,I; a header line, dots, lines end with LF, all as long as each other',
  ],
  [
    { ...float, container: 'wav' },
    '32-bit floats (IEEE 754), little-endian: the value 1 is stored 00 00 80 3F; I0 Q0 I1 Q1 …; behind a WAV header, two channels',
  ],
])('the layout in words, %#', (layout, words) => {
  expect(wordWords(openBench(layout).content)).toBe(words);
});
