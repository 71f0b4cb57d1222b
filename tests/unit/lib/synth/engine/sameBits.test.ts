import { readdirSync, readFileSync } from 'node:fs';
import { join } from 'node:path';
import fc from 'fast-check';
import FFT from 'fft.js';
import {
  compressGrid,
  createStatsCollector,
  createSymbolSynthesis,
  createSynthesis,
  createWordWriter,
  interpolatedPeak,
  vectorStats,
  type BenchContent,
  type BenchProfile,
  type RenderOptions,
  type Synthesis,
  type WaveformContent,
  type WaveformDocument,
} from '@/lib/synth';
import { arbitraryContent } from '../../../../helpers/arbitraryContent';
import { relativeDb } from '../../../../helpers/directTransform';
import { openTestEngine } from '../../../../helpers/sampleEngine';

const EXAMPLES = join(__dirname, '../../../../golden/fixtures/examples');
const read = (name: string): unknown => JSON.parse(readFileSync(join(EXAMPLES, name), 'utf8'));
const bench = (read('int16.bench.json') as BenchProfile).content;
const examples = readdirSync(EXAMPLES)
  .filter((name) => name.endsWith('.combwright.json'))
  .map((name) => [name, (read(name) as WaveformDocument).content] as const);
const engine = openTestEngine();

const bytesOf = (numbers: Float64Array): Buffer => Buffer.from(numbers.buffer, numbers.byteOffset, numbers.byteLength);

/** All words of a rendering, `cut` samples a call, and what saturated. */
function wordsOf(synthesis: Synthesis, layout: BenchContent, scale: number, cut: number) {
  synthesis.rewind();
  const fullScale = layout.word === 'float32' ? 1 : 2 ** (layout.bits - 1) - 1;
  const writer = createWordWriter(layout, { scale: scale * fullScale, fullScale, referenceLevel: 1, isSilent: false });
  const bytes = new Uint8Array(writer.bytesPerSample * synthesis.samples);
  let at = 0;
  for (;;) {
    const most = Math.min(cut, synthesis.samples - synthesis.position);
    const count = synthesis.readWords(writer, most, bytes, at);
    if (count === 0) break;
    at += count * writer.bytesPerSample;
  }
  expect(at).toBe(bytes.length);
  return { bytes: Buffer.from(bytes).toString('latin1'), saturated: { ...writer.saturated } };
}

/** Every sample, every level and every word of a content, by one arithmetic. */
function outputsOf(
  content: WaveformContent,
  options: RenderOptions,
  words: BenchContent[],
  scale: number,
  cut: number,
) {
  const synthesis = createSynthesis(content, options);
  const samples = new Float64Array(2 * synthesis.samples);
  for (let at = 0; at < samples.length;) at += 2 * synthesis.read(samples.subarray(at, at + 2 * cut));
  const stats = vectorStats(synthesis);
  const collector = createStatsCollector();
  while (synthesis.collect(collector, cut) > 0);
  const files = words.map((layout) => wordsOf(synthesis, layout, scale, cut));
  // the first words again, of a rendering that was never measured, so that the engine knows no largest component
  files.push(wordsOf(createSynthesis(content, options), words[0]!, scale, cut));
  return { samples, stats, state: Array.from(collector.state), files };
}

const layouts: BenchContent[] = [
  bench,
  { ...bench, word: 'float32' },
  { ...bench, bits: 12, align: 'left' },
  { ...bench, bits: 10, align: 'right' },
  { ...bench, byteOrder: 'big' },
  { ...bench, word: 'int8', bits: 8 },
];

function expectSame(content: WaveformContent, scale: number, cut: number, oversampling?: number): void {
  const own = oversampling === undefined ? {} : { oversampling };
  const here = outputsOf(content, own, layouts, scale, cut);
  const there = outputsOf(content, { ...own, engine }, layouts, scale, cut);
  expect(bytesOf(there.samples).equals(bytesOf(here.samples))).toBe(true);
  expect(there.stats).toEqual(here.stats);
  expect(there.state).toEqual(here.state);
  here.files.forEach((file, i) => {
    expect([i, there.files[i]!.bytes === file.bytes]).toEqual([i, true]);
    expect(there.files[i]!.saturated).toEqual(file.saturated);
  });
}

/** One symbol of 64-QAM over the inner part of a transform. */
function oneSymbol(fftSize: number, oversampling: number, used = Math.floor(0.8 * fftSize)): WaveformContent {
  const cells = new Uint8Array(2 * fftSize);
  const first = Math.floor((fftSize - used) / 2);
  for (const symbol of [0, fftSize]) cells.fill(1, symbol + first, symbol + first + used);
  const base = examples[0]![1];
  return {
    ...base,
    fftSize,
    oversampling,
    symbolCount: 2,
    prefixSamples: [0, 3],
    overlapSamples: 0,
    frequencyOffsetHz: 0,
    timing: { mode: 'loop', repeats: 2, gapSamples: 5, padSamples: 7 * oversampling },
    tray: [
      { inkId: 'k0', name: 'null', role: 'null', powerDb: 0, value: null },
      {
        inkId: 'k1',
        name: 'data',
        role: 'data',
        powerDb: 0,
        value: { constellation: '64qam', bitMap: 'ts38211', streamId: 's0' },
      },
    ],
    grid: compressGrid(cells, fftSize, 2),
    streams: [
      {
        streamId: 's0',
        name: 'PN15',
        source: { kind: 'pn', stages: 15, taps: [14, 15], seed: 1, inverted: false },
        fill: 'running',
        acrossRepeats: 'continue',
      },
    ],
    markers: [],
  };
}

describe('the engine has the same bits as the arithmetic without it', () => {
  it.each(examples)('in %s', (_name, content) => {
    expectSame(content, 0.3, 1000);
    const { samples } = createSynthesis(content);
    if (samples < 50000) expectSame(content, 1.7, 4096, 4 * content.oversampling);
  });

  it.each([
    [16, 1],
    [32, 1],
    [64, 1],
    [128, 1],
    [256, 1],
    [512, 1],
    [1024, 1],
    [2048, 1],
    [4096, 1],
    [16, 2],
    [32, 4],
    [256, 2],
    [512, 4],
    [1024, 8],
    [4096, 4],
    [2048, 3],
    [24, 1],
    [40, 1],
    [48, 1],
    [80, 1],
    [120, 1],
    [144, 1],
    [200, 1],
    [216, 1],
    [600, 1],
    [1536, 1],
    [1536, 2],
    [3000, 1],
    [1000, 2],
    [1200, 4],
    [15, 8],
    [27, 8],
    [125, 16],
    [3240, 5],
    [15, 1],
    [20, 1],
    [8, 1],
    [12, 3],
  ])('at size %i rendered %i-fold', (fftSize, oversampling) => {
    expectSame(oneSymbol(fftSize, oversampling), 0.4, 777);
    expectSame(oneSymbol(fftSize, oversampling, fftSize), 0.9, 4096);
  });

  it('in random documents', () => {
    fc.assert(
      fc.property(
        arbitraryContent(),
        fc.integer({ min: 1, max: 9000 }),
        fc.double({ min: 0.01, max: 3, noNaN: true }),
        (content, cut, scale) => expectSame(content, scale, cut),
      ),
      { numRuns: 40 },
    );
  });

  it('when several renderings take the rooms from each other', () => {
    const contents = examples.map(([, content]) => content);
    const renderings = contents.map((content) => createSynthesis(content, { engine }));
    const wanted = contents.map((content) => createSynthesis(content));
    expect(renderings.length).toBeGreaterThan(3);
    const block = new Float64Array(2 * 301);
    const plain = new Float64Array(2 * 301);
    for (let turn = 0; turn < 12; turn++) {
      renderings.forEach((rendering, i) => {
        const count = rendering.read(block);
        expect(wanted[i]!.read(plain)).toBe(count);
        expect(bytesOf(block.subarray(0, 2 * count)).equals(bytesOf(plain.subarray(0, 2 * count)))).toBe(true);
      });
    }
  });

  it('symbol by symbol, and in the peak between samples', () => {
    for (const [, content] of examples) {
      const here = createSymbolSynthesis(content);
      const there = createSymbolSynthesis(content, { engine });
      const a = new Float64Array(2 * here.layout.usefulSamples);
      const b = new Float64Array(a.length);
      for (let symbol = content.symbolCount - 1; symbol >= 0; symbol--) {
        here.useful(0, symbol, a);
        there.useful(0, symbol, b);
        expect(bytesOf(b).equals(bytesOf(a))).toBe(true);
      }
      expect(interpolatedPeak(content, { engine })).toBe(interpolatedPeak(content));
    }
  });
});

describe('the engine against an independent transform', () => {
  // fft.js, a general-purpose package with tables and passes of its own
  it.each([64, 512, 2048, 4096, 16384])('at size %i', (fftSize) => {
    const content = { ...oneSymbol(fftSize, 1), prefixSamples: [0] };
    const symbols = createSymbolSynthesis(content, { engine });
    const found = new Float64Array(2 * fftSize);
    const values = new Float64Array(2 * fftSize);
    const bins = new Float64Array(2 * fftSize);
    const wanted = new Float64Array(2 * fftSize);
    symbols.useful(0, 1, found);
    symbols.values.write(0, 1, values);
    for (let p = 0; p < fftSize; p++) {
      const bin = (p + fftSize / 2) % fftSize;
      // the values already carry 1/√N; the conjugate's forward transform is the conjugate of the inverse
      bins[2 * bin] = values[2 * p]!;
      bins[2 * bin + 1] = -values[2 * p + 1]!;
    }
    new FFT(fftSize).transform(wanted, bins);
    for (let i = 1; i < wanted.length; i += 2) wanted[i] = -wanted[i]!;
    expect(relativeDb(found, wanted)).toBeLessThan(-290);
  });
});
