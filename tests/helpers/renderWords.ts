import {
  createSynthesis,
  createWordWriter,
  interpolatedPeak,
  vectorStats,
  wordScale,
  type BenchContent,
  type VectorStats,
  type WaveformContent,
  type WordScale,
} from '@/lib/synth';

const BLOCK_SAMPLES = 3000; // no divisor of anything: blocks decide no bit

export interface RenderedWords {
  bytes: Uint8Array;
  stats: VectorStats;
  scale: WordScale;
  saturatedComponents: number;
}

/** Both passes of a rendering, levels then words, in memory: for small documents of tests. */
export function renderWords(content: WaveformContent, bench: BenchContent): RenderedWords {
  const synthesis = createSynthesis(content);
  const stats = vectorStats(synthesis);
  const scale = wordScale(content.level, { ...stats, interpolatedPeak: interpolatedPeak(content) }, bench);
  const writer = createWordWriter(bench, scale);
  const bytes = new Uint8Array(synthesis.samples * writer.bytesPerSample);
  const block = new Float64Array(2 * BLOCK_SAMPLES);
  let at = 0;
  for (let count = synthesis.read(block); count > 0; count = synthesis.read(block))
    at += writer.write(block, count, bytes, at);
  return { bytes, stats, scale, saturatedComponents: writer.saturated.components };
}

/** All samples of a rendering, interleaved. */
export function renderSamples(content: WaveformContent, oversampling?: number): Float64Array {
  const synthesis = createSynthesis(content, oversampling === undefined ? {} : { oversampling });
  const samples = new Float64Array(2 * synthesis.samples);
  synthesis.read(samples);
  return samples;
}
