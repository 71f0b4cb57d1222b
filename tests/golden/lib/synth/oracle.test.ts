import { execFile } from 'node:child_process';
import { createHash } from 'node:crypto';
import { mkdtempSync, readFileSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { promisify } from 'node:util';
import { emptyDocument } from '@/lib/document/newDocument';
import { parseBenchProfile, parseWaveformDocument } from '@/lib/document/parse';
import {
  createSynthesis,
  createVectorForm,
  createWordWriter,
  expandGrid,
  interpolatedPeak,
  isFiveSmooth,
  vectorStats,
  wordScale,
  type BenchContent,
  type SampleEngine,
  type WaveformContent,
} from '@/lib/synth';
import { openBench } from '../../../helpers/documents';
import { renderSamples } from '../../../helpers/renderWords';
import { openTestEngine } from '../../../helpers/sampleEngine';

// Source: generate/oracle.py, an independent reading of the conventions in NumPy with long doubles; it drew the documents,
// too. A document's words are held by digest here, and its samples by distance with the oracle run beside the test.
const fixtures = join(__dirname, '../../fixtures/oracle');
const script = join(__dirname, '../../generate/oracle.py');
const read = (name: string): unknown => JSON.parse(readFileSync(join(fixtures, name), 'utf8'));

interface Told {
  samples: number;
  int16: string;
  own: string[];
}
const documents = read('documents.json') as { content: WaveformContent; bench: BenchContent }[];
const expected = read('digests.json') as Told[];
const int16 = openBench().content;
const engine = openTestEngine();
/** Double arithmetic over at most 14 levels of a transform leaves about −310 dB. */
const MOST_DB = -290;
const BLOCK_SAMPLES = 3000;

/** Single precision numbers in steps of 2^−20, half to even: they keep what doubles round where a sample is nothing. */
function floatSteps(bytes: Uint8Array, isLittle: boolean): Uint8Array {
  const view = new DataView(bytes.buffer, bytes.byteOffset, bytes.length);
  const steps = new Uint8Array(bytes.length);
  const out = new DataView(steps.buffer);
  const rounder = 1.5 * 2 ** 52;
  for (let at = 0; at < bytes.length; at += 4)
    out.setInt32(at, view.getFloat32(at, isLittle) * 2 ** 20 + rounder - rounder, true);
  return steps;
}

/** Digests of the bytes behind the heads of a vector's files. */
function digestsOf(content: WaveformContent, bench: BenchContent, engine?: SampleEngine): string[] {
  const synthesis = createSynthesis(content, engine ? { engine } : {});
  const levels = { ...vectorStats(synthesis), interpolatedPeak: interpolatedPeak(content) };
  const writer = createWordWriter(bench, wordScale(content.level, levels, bench));
  const form = createVectorForm(content, bench);
  const hashes = form.files.map(() => createHash('sha256'));
  const block = new Float64Array(2 * BLOCK_SAMPLES);
  const words = new Uint8Array(BLOCK_SAMPLES * writer.bytesPerSample);
  for (let count = synthesis.read(block); count > 0; count = synthesis.read(block)) {
    writer.write(block, count, words);
    form.form(words, count).forEach((part, i) => {
      hashes[i]!.update(bench.word === 'float32' ? floatSteps(part, bench.byteOrder === 'little') : part);
    });
  }
  return hashes.map((hash) => hash.digest('hex'));
}

test('the documents are valid, and hold every feature', () => {
  expect(documents.length).toBeGreaterThanOrEqual(60);
  const met = new Set<string>();
  for (const { content, bench } of documents) {
    expect(parseWaveformDocument(emptyDocument({ title: 'Drawn', content }))).toMatchObject({ ok: true });
    expect(parseBenchProfile({ ...openBench(), content: bench })).toMatchObject({ ok: true });
    const { timing, level, fftSize, prefixSamples, tray, streams } = content;
    const cells = expandGrid(content.grid, fftSize);
    const used = new Set(cells);
    expect(isFiveSmooth(fftSize)).toBe(true);
    met.add(Number.isInteger(Math.log2(fftSize)) ? 'power of two' : fftSize % 2 === 1 ? 'odd size' : 'even size');
    met.add(timing.mode).add(level.reference).add(`oversampling ${content.oversampling}`);
    if (timing.repeats > 1) met.add('repeats');
    if (timing.gapSamples > 0) met.add(`gap in a ${timing.mode}`);
    if (timing.padSamples > 0) met.add(`pad in a ${timing.mode}`);
    if (content.overlapSamples > 0) met.add(`overlap in a ${timing.mode}`);
    if (prefixSamples.length > 1) met.add('prefix list');
    if (content.frequencyOffsetHz !== 0) met.add(content.frequencyOffsetHz < 0 ? 'offset below' : 'offset above');
    if (streams.length > 1) met.add('streams');
    for (const word of [bench.word, bench.align, bench.numberFormat, bench.byteOrder, bench.layout, bench.container])
      met.add(word);
    if (bench.bits < 16 && bench.word === 'int16') met.add(`narrow ${bench.align}`);
    if (bench.swapIq) met.add('swapped');
    if (bench.negateQ) met.add('negated');
    for (const place of used) {
      const ink = tray[place]!;
      met.add(ink.role);
      if (ink.role === 'data') {
        const stream = streams.find(({ streamId }) => streamId === ink.value.streamId)!;
        met.add(`${ink.value.constellation} ${ink.value.bitMap}`).add(`${stream.fill} ${stream.acrossRepeats}`);
        met.add(`source ${stream.source.kind}`);
        if (stream.source.kind === 'pn') met.add(`source inverted ${stream.source.inverted}`);
      }
      if (ink.role === 'tone') met.add(`continuous ${ink.value.continuous}`);
      if (ink.role === 'tone' || ink.role === 'pilot') {
        met.add(`${ink.role} of ${ink.value.factors.length}`);
        for (const { sequence, counter } of ink.value.factors)
          met.add(`${sequence.kind}${sequence.kind === 'gold' ? sequence.points : ''}`).add(`counter ${counter}`);
      }
    }
  }
  const maps = {
    ts38211: ['bpsk', 'pi2-bpsk', 'qpsk', '16qam', '64qam', '256qam', '1024qam', '4096qam'],
    ieee80211: ['bpsk', 'qpsk', '16qam', '64qam', '256qam', '1024qam', '4096qam'],
    en300744: ['qpsk', '16qam', '64qam'],
  };
  const wanted = [
    ...Object.entries(maps).flatMap(([map, names]) => names.map((name) => `${name} ${map}`)),
    ...['null', 'data', 'pilot', 'tone', 'reserved', 'power of two', 'odd size', 'even size', 'loop', 'burst'],
    ...['repeats', 'prefix list', 'offset below', 'offset above', 'streams', 'swapped', 'negated', 'narrow left'],
    ...['loop', 'burst'].flatMap((mode) => [`gap in a ${mode}`, `pad in a ${mode}`, `overlap in a ${mode}`]),
    ...['running', 'anchored'].flatMap((fill) => [`${fill} restart`, `${fill} continue`]),
    ...['pn', 'gold', 'zeros', 'ones', 'pattern', 'uploaded', 'inverted true', 'inverted false'].map(
      (s) => `source ${s}`,
    ),
    ...['constant', 'alternating', 'pn', 'goldbpsk', 'goldqpsk', 'zadoffChu', 'newman', 'schroeder', 'listed'],
    ...['cell', 'symbolCell', 'subcarrier', 'symbol'].map((counter) => `counter ${counter}`),
    ...['continuous true', 'continuous false', 'pilot of 1', 'pilot of 2', 'pilot of 3', 'tone of 0', 'tone of 3'],
    ...['interpolatedPeak', 'samplePeak', 'componentPeak', 'rms', 'narrow right'],
    ...[1, 2, 3, 4, 5, 8].map((factor) => `oversampling ${factor}`),
    ...['int8', 'int16', 'float32', 'left', 'right', 'twosComplement', 'offsetBinary', 'little', 'big'],
    ...['interleaved', 'split', 'raw', 'npy', 'wav'],
  ];
  expect(wanted.filter((feature) => !met.has(feature))).toEqual([]);
});

test.each(documents.map((document, number) => ({ ...document, number })))(
  'document $number has the words that the oracle told',
  ({ content, bench, number }) => {
    const told = expected[number]!;
    expect(createSynthesis(content).samples).toBe(told.samples);
    expect(digestsOf(content, int16)).toEqual([told.int16]);
    expect(digestsOf(content, int16, engine)).toEqual([told.int16]);
    expect(digestsOf(content, bench)).toEqual(told.own);
  },
);

test('the oracle tells the same today, and every sample is within −290 dB of its own', async () => {
  const folder = mkdtempSync(join(tmpdir(), 'combwright-oracle-'));
  try {
    documents.forEach(({ content }, number) =>
      writeFileSync(join(folder, `${number}.f64`), new Uint8Array(renderSamples(content).buffer)),
    );
    const call = ['judge', join(fixtures, 'documents.json'), folder];
    const { stdout } = await promisify(execFile)('/usr/bin/python3', [script, ...call], { maxBuffer: 1 << 24 });
    const results = JSON.parse(stdout) as (Told & { distanceDb: number })[];
    expect(results.map(({ samples, int16: words, own }) => ({ samples, int16: words, own }))).toEqual(expected);
    const far = results
      .map(({ distanceDb }, number) => ({ number, distanceDb }))
      .filter((r) => !(r.distanceDb <= MOST_DB));
    expect(far).toEqual([]);
  } finally {
    rmSync(folder, { recursive: true, force: true });
  }
}, 240_000);
