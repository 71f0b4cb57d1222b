import { createHash } from 'node:crypto';
import { existsSync, mkdtempSync, readdirSync, readFileSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import path from 'node:path';
import { build } from 'esbuild';
import {
  createSynthesis,
  createWordWriter,
  interpolatedPeak,
  vectorStats,
  type BenchContent,
  type WaveformContent,
} from '@/lib/synth';
import { makePack, scaleOf } from '@/server/packs/makePack';
import type { MadePack } from '@/server/packs/packTypes';
import { measureRendering } from '@/server/packs/measureRendering';
import { cutPiece, planFile, stretchMost } from '@/server/packs/pool/stretchPlan';
import { openPool, type WorkThreads } from '@/server/packs/pool/workPool';
import { loadSampleEngine } from '@/server/sampleEngine';
import { verifyPack } from '@/server/packs/verifyPack';
import { openBench, smallDocument } from '../../../helpers/documents';
import { openTestEngine } from '../../../helpers/sampleEngine';

jest.setTimeout(60_000); // threads are opened

let bundles: string;
let folder: string;
let file: string;
beforeAll(async () => {
  openTestEngine(); // builds the module where it is missing
  loadSampleEngine(path.resolve('public/wasm/engine.wasm'));
  // beside the module, as build/ is, and where the packages that stay outside are found
  bundles = mkdtempSync(path.join(process.cwd(), 'build-pool-'));
  file = path.join(bundles, 'work.worker.mjs');
  await build({
    entryPoints: ['server/packs/pool/work.worker.ts'],
    outfile: file,
    bundle: true,
    platform: 'node',
    target: 'node20',
    format: 'esm',
    packages: 'external',
    logLevel: 'error',
  });
});
afterAll(() => rmSync(bundles, { recursive: true, force: true }));
beforeEach(() => (folder = mkdtempSync(path.join(tmpdir(), 'pool-'))));
afterEach(() => rmSync(folder, { recursive: true, force: true }));

const threadsOf = (count: number): WorkThreads => ({ file, count, leastSamples: 0 });
const sha256 = (bytes: Uint8Array): string => createHash('sha256').update(bytes).digest('hex');

const { streams, grid } = smallDocument().content;
const timing = (repeats: number, more: Partial<WaveformContent['timing']> = {}) => ({
  mode: 'loop' as const,
  repeats,
  gapSamples: 0,
  padSamples: 0,
  ...more,
});
const continued = [{ ...streams[0]!, acrossRepeats: 'continue' as const }];
const symbols = (count: number) => ({
  symbolCount: count,
  grid: { rows: grid.rows, rowOfSymbol: new Array<number>(count).fill(0) },
});
const markers = [{ name: 'Frame', at: 'repeat' as const, symbol: null, offsetSamples: -3, lengthSamples: 8 }];
const lowBits = { count: 1, packing: 'lowBits', leastSamples: 1, stepSamples: 1 } as const;
/** Each is long enough for several tasks, of a length whose transform is quick. */
const cases: [string, number[], Partial<WaveformContent>, Partial<BenchContent>][] = [
  [
    'overlap in a loop, continued payload, markers in low bits',
    [1, 2, 4],
    { overlapSamples: 8, ...symbols(375), timing: timing(9), streams: continued, markers },
    { bits: 12, align: 'left', markers: lowBits },
  ],
  [
    'an offset that never closes, oversampled',
    [0, 4],
    { frequencyOffsetHz: 1234.5, oversampling: 2, ...symbols(20), timing: timing(90) },
    {},
  ],
  [
    'copies in a burst with overlap and a tail',
    [0, 1, 2, 4],
    { overlapSamples: 8, ...symbols(5), timing: timing(700, { mode: 'burst', padSamples: 77 }) },
    {},
  ],
  [
    'copies of an odd length with gaps, int8',
    [0, 1, 2, 4],
    { prefixSamples: [15], ...symbols(3), timing: timing(1200, { gapSamples: 4, padSamples: 9 }) },
    { word: 'int8', bits: 8 },
  ],
  ['an offset that closes', [0, 2], { frequencyOffsetHz: 62500, timing: timing(850) }, { word: 'float32' }],
  [
    'bursts with gaps in two files',
    [0, 2],
    { overlapSamples: 4, timing: timing(1000, { mode: 'burst', gapSamples: 200 }) },
    { layout: 'split' },
  ],
  [
    'lowered peaks',
    [0, 2],
    {
      peakReduction: { kind: 'clipAndFilter', targetPaprDb: 6, iterations: 2 },
      prefixSamples: [64],
      ...symbols(24),
      timing: timing(10),
      streams: continued,
    },
    {},
  ],
  ['copies of text', [0, 2], { timing: timing(40) }, { word: 'float32', container: 'csv' }],
];

test.each(cases)(
  'any number of threads gives the same bytes, and the words and levels of a plain rendering: %s',
  async (_name, counts, overrides, layout) => {
    const document = smallDocument(overrides);
    const bench = openBench(layout);
    const made: MadePack[] = [];
    for (const count of counts) {
      const outFile = () => path.join(folder, `${count}.zip`);
      const threads = count === 0 ? undefined : threadsOf(count);
      const result = await makePack({ document, profile: bench, state: 'draft', tmpFolder: folder, outFile, threads });
      if (!result.ok) throw new Error(result.message);
      expect(sha256(readFileSync(result.pack.file))).toBe(result.pack.fileSha256);
      made.push(result.pack);
    }
    expect(new Set(made.map(({ fileSha256 }) => fileSha256)).size).toBe(1);

    const { content } = document;
    const pool = openPool(content, bench.content, threadsOf(2));
    const measure = await measureRendering(pool, content);
    await pool.close();
    const engine = openTestEngine();
    const synthesis = createSynthesis(content, { engine });
    expect(measure.stats).toEqual(vectorStats(synthesis));
    expect(measure.levels.interpolatedPeak).toBe(interpolatedPeak(content, { engine }));
    if (layout.layout === 'split' || layout.container || layout.markers) return;
    const writer = createWordWriter(bench.content, scaleOf(document, bench, measure));
    const words = new Uint8Array(synthesis.samples * writer.bytesPerSample);
    for (let at = 0; at < synthesis.samples;)
      at += synthesis.readWords(writer, 1 << 16, words, at * writer.bytesPerSample);
    expect(made[0]!.vectorSha256).toBe(sha256(words));
    expect(made[0]!.manifest.levels.saturatedComponents).toBe(writer.saturated.components);
  },
);

test('a pack is proved again by threads', async () => {
  const outFile = () => path.join(folder, 'pack.zip');
  const document = smallDocument({ overlapSamples: 8, timing: timing(4) });
  await makePack({ document, profile: openBench(), state: 'draft', tmpFolder: folder, outFile });
  const verified = await verifyPack(outFile(), { threads: threadsOf(2) });
  expect(verified).toMatchObject({ ok: true, verified: { madeAgain: true } });
});

test('a saturated sample is counted as often as its copies stand in the file', async () => {
  const document = smallDocument({ timing: timing(7), level: { reference: 'rms', headroomDb: 3 } });
  const once = smallDocument({ timing: timing(1), level: { reference: 'rms', headroomDb: 3 } });
  const saturated = async (of: typeof document) => {
    const outFile = () => path.join(folder, 'pack.zip');
    const made = await makePack({ document: of, profile: openBench(), state: 'draft', tmpFolder: folder, outFile });
    if (!made.ok) throw new Error(made.message);
    return made.pack.manifest;
  };
  const [seven, one] = [await saturated(document), await saturated(once)];
  expect(one.levels.saturatedComponents).toBeGreaterThan(0);
  expect(seven.levels.saturatedComponents).toBe(7 * one.levels.saturatedComponents);
  expect(seven.proof.cells).toBe(7 * one.proof.cells);
  expect(seven.proof.evmDb).toBeCloseTo(one.proof.evmDb!, 9);
});

test('stretches follow from the document alone and cover it once', () => {
  const plan = planFile(smallDocument({ ...symbols(100), timing: timing(300, { padSamples: 5 }) }).content);
  expect(plan.copies).toEqual({ from: 8000, end: 2_400_000, cycleSamples: 8000 });
  expect(plan.tail).toEqual([{ from: 2_400_000, end: 2_400_005, times: 1 }]);
  const whole = planFile(smallDocument({ ...symbols(3375) }).content);
  const cuts = [...cutPiece(whole.layout, whole.head[0]!)];
  expect(cuts.length).toBeGreaterThan(1);
  cuts.forEach(({ from, end }, i) => {
    expect(from).toBe(i === 0 ? 0 : cuts[i - 1]!.end);
    expect(end - from).toBeLessThanOrEqual(stretchMost(whole.layout));
  });
  expect(cuts.at(-1)!.end).toBe(whole.layout.samples);
});

test('a cancel ends the threads and leaves nothing', async () => {
  for (const step of ['rendering', 'readingBack'] as const) {
    const stop = new AbortController();
    const result = await makePack({
      document: smallDocument({ ...symbols(3375) }),
      profile: openBench(),
      state: 'draft',
      tmpFolder: folder,
      outFile: () => path.join(folder, 'pack.zip'),
      threads: threadsOf(2),
      signal: stop.signal,
      onProgress: (progress) => progress.step === step && stop.abort(),
    });
    expect(result).toEqual({ ok: false, code: 'cancelled', message: 'Cancelled. Nothing was kept.', issues: [] });
    expect(readdirSync(folder)).toEqual([]);
  }
});

test('a thread that dies, or one that was never there, ends the pack with words and leaves nothing', async () => {
  const dying = path.join(bundles, 'dying.mjs');
  writeFileSync(
    dying,
    "import { parentPort } from 'node:worker_threads'; parentPort.once('message', () => process.exit(1));",
  );
  for (const bundle of [dying, path.join(bundles, 'missing.mjs')]) {
    const made = makePack({
      document: smallDocument(),
      profile: openBench(),
      state: 'draft',
      tmpFolder: folder,
      outFile: () => path.join(folder, 'pack.zip'),
      threads: { file: bundle, count: 2, leastSamples: 0 },
    });
    await expect(made).rejects.toThrow('A thread of the rendering ended unexpectedly.');
    expect(readdirSync(folder)).toEqual([]);
  }
  expect(existsSync(file)).toBe(true);
});

test('what lib/synth refuses in a thread is refused in its words', async () => {
  const { content } = smallDocument();
  const pool = openPool(content, openBench().content, threadsOf(1));
  const beyond = { from: 1, end: 129 };
  await expect(pool.run<'levels'>({ kind: 'levels', oversampling: 1, stretch: beyond })).rejects.toMatchObject({
    name: 'SynthError',
    code: 'bad_index',
  });
  const stretch = { from: 0, end: 128 };
  await expect(pool.run<'levels'>({ kind: 'levels', oversampling: 1, stretch })).resolves.toMatchObject({
    samples: 128,
  });
  const waiting = expect(pool.run<'levels'>({ kind: 'levels', oversampling: 1, stretch })).rejects.toThrow('given up');
  await pool.close();
  await waiting;
});
