/**
 * Our side of the bench: reads lines "W1", "W1 file", … and answers with one line of JSON per round:
 * { ms, peak, meanPower, firstWords }. The peers speak the same.
 */
import { closeSync, fsyncSync, openSync, readFileSync, writeSync } from 'node:fs';
import { createInterface } from 'node:readline';
import {
  createSampleEngine,
  createSynthesis,
  createWordWriter,
  vectorStats,
  wordScale,
  type BenchContent,
  type EngineExports,
} from '@/lib/synth';
import { workload, type WorkloadName } from './workloads';

const BLOCK_SAMPLES = 16384;
const outputPath = process.argv[2]!;
const module = new WebAssembly.Module(readFileSync('public/wasm/engine.wasm'));
const engine = createSampleEngine(() => new WebAssembly.Instance(module).exports as unknown as EngineExports);

const bench: BenchContent = {
  sampleClockHz: { least: 1, most: 1e12, step: null },
  word: 'int16',
  bits: 16,
  align: 'right',
  numberFormat: 'twosComplement',
  byteOrder: 'little',
  layout: 'interleaved',
  container: 'raw',
  swapIq: false,
  negateQ: false,
  granularitySamples: 1,
  leastSamples: 1,
  mostSamples: 1e9,
  leastHeadroomDb: 0,
  levelMeans: 'unknown',
  markers: { count: 0, packing: 'none', leastSamples: 1, stepSamples: 1 },
  modes: ['loop', 'burst'],
  fileName: { most: 31, extension: 'bin' },
};

// the words of a job are kept in memory up to W1's and W2's size; W3 goes through one block, as its peer's repeats do
const words = new Uint8Array(4 * 400000);
const view = new DataView(words.buffer);

function round(name: WorkloadName, toFile: boolean): object {
  const content = workload(name);
  const file = toFile ? openSync(outputPath, 'w') : null;
  const start = performance.now();
  const synthesis = createSynthesis(content, { engine });
  const stats = vectorStats(synthesis);
  const scale = wordScale(content.level, { ...stats, interpolatedPeak: stats.samplePeak }, bench);
  const writer = createWordWriter(bench, scale);
  let at = 0;
  let firstWords: number[] | null = null;
  while (synthesis.position < synthesis.samples) {
    if (at + 4 * BLOCK_SAMPLES > words.length) {
      if (file !== null) writeSync(file, words, 0, at);
      at = 0;
    }
    at += 4 * synthesis.readWords(writer, BLOCK_SAMPLES, words, at);
    firstWords ??= [0, 1, 2, 3, 4, 5, 6, 7].map((i) => view.getInt16(2 * i, true));
  }
  if (file !== null) {
    writeSync(file, words, 0, at);
    fsyncSync(file);
  }
  const ms = performance.now() - start;
  if (file !== null) closeSync(file);
  return { ms, peak: stats.samplePeak, meanPower: stats.rms * stats.rms, firstWords };
}

for await (const line of createInterface({ input: process.stdin })) {
  const [name, mode] = line.split(' ');
  console.log(JSON.stringify(round(name as WorkloadName, mode === 'file')));
}
