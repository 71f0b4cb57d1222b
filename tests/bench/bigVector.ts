/**
 * What the big vector's measures take one by one, each in a process of its own: `node bundle plain|transforms|words copied|new <samples> <folder>
 * [<bundle of the pool's threads>]` answers with a line of JSON. "copied": one frame again and again; "new": payload that runs on.
 */
import { createHash } from 'node:crypto';
import { closeSync, fsyncSync, openSync, readFileSync, rmSync, writeFileSync, writeSync } from 'node:fs';
import { open } from 'node:fs/promises';
import { join } from 'node:path';
import { createTransformPlan } from '@/lib/synth/engine/transformPlan';
import { createWordWriter, deriveFigures, frameLayout, type EngineExports, type WaveformContent } from '@/lib/synth';
import { defaultThreadCount, openPool } from '@/server/packs/pool/workPool';
import { writeVector } from '@/server/packs/vectorWriter';
import { openBench, smallDocument } from '@/tests/helpers/documents';
import { workload } from './workloads';

const [kind, way, samplesText, folder, threadFile] = process.argv.slice(2) as [string, string, string, string, string];
const bench = openBench();
const file = join(folder, 'vector');

/** W3's frame, as often as makes about so many samples. */
function contentOf(samples: number): WaveformContent {
  const frame = workload('W3');
  const repeats = Math.round(samples / frameLayout({ ...frame, timing: { ...frame.timing, repeats: 1 } }).samples);
  const acrossRepeats = way === 'copied' ? ('restart' as const) : ('continue' as const);
  return {
    ...frame,
    timing: { ...frame.timing, repeats },
    streams: frame.streams.map((stream) => ({ ...stream, acrossRepeats })),
  };
}

const content = contentOf(Number(samplesText));
const { samples, usefulSamples, symbolCount, repeats } = frameLayout(content);

/** Writing the file's bytes and their SHA-256, nothing else. */
function plain() {
  const block = Buffer.alloc(1 << 20);
  for (let i = 0; i < block.length; i++) block[i] = (i * 2654435761) >>> 13;
  const hash = createHash('sha256');
  const start = performance.now();
  const out = openSync(file, 'w');
  for (let left = 4 * samples; left > 0; left -= block.length) {
    const part = block.subarray(0, Math.min(left, block.length));
    writeSync(out, part);
    hash.update(part);
  }
  hash.digest();
  const ms = performance.now() - start;
  fsyncSync(out);
  const syncedMs = performance.now() - start;
  closeSync(out);
  return { ms, syncedMs };
}

/** The vector's transforms alone, in one thread: one a symbol, from the bins to the samples. */
function transforms() {
  const module = new WebAssembly.Module(readFileSync('public/wasm/engine.wasm'));
  const kernel = new WebAssembly.Instance(module).exports as unknown as EngineExports;
  const plan = createTransformPlan(usefulSamples);
  const row = 16 * usefulSamples + 4096;
  const at = kernel.freeFrom();
  kernel.memory.grow(Math.ceil((at + plan.bytes + 4 * row) / 65536));
  const planAt = at + 4 * row;
  plan.place(kernel.memory.buffer, planAt, at + 2 * row, at + 3 * row);
  const bins = new Float64Array(kernel.memory.buffer, at, 2 * usefulSamples);
  for (let i = 0; i < bins.length; i++) bins[i] = ((i * 48271) % 17) - 8;
  const half = 600; // as W3 paints
  const start = performance.now();
  for (let i = 0; i < repeats * symbolCount; i++) kernel.transform(planAt, at, at + row, half + 1, half);
  return { ms: performance.now() - start };
}

/** The pack's own pass that writes the words. */
async function words() {
  const threads = { file: threadFile, count: defaultThreadCount() };
  const scale = { scale: 4000, fullScale: 32767, referenceLevel: 1, isSilent: false };
  const out = await open(file, 'w+');
  const start = performance.now();
  const pool = openPool(content, bench.content, threads);
  const bytes = samples * createWordWriter(bench.content, scale).bytesPerSample;
  await writeVector(pool, content, bench.content, scale, [{ handle: out, offsetBytes: 0, bytes }]);
  await pool.close();
  const ms = performance.now() - start;
  await out.close();
  return { ms, threads: threads.count };
}

/** What the command line renders. */
function inputs() {
  writeFileSync(join(folder, 'w.json'), JSON.stringify(smallDocument(content)));
  writeFileSync(join(folder, 'b.json'), JSON.stringify(bench));
  return { megabytes: (4 * deriveFigures(content).fileSamples) / 1e6 };
}

const measures: Record<string, () => object | Promise<object>> = { plain, transforms, words, inputs };
console.log(JSON.stringify(await measures[kind]!()));
rmSync(file, { force: true });
