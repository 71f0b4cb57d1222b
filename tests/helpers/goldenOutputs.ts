import {
  createSynthesis,
  createWordWriter,
  interpolatedPeak,
  vectorStats,
  wordScale,
  type BenchContent,
  type WaveformContent,
} from '@/lib/synth';

/** The three outputs whose bytes a golden digest holds. */
export type GoldenKind = 'float64' | 'float32' | 'int16';

/**
 * The bytes of one output of a content, the low byte first: samples as they are rendered, or words of the content's level.
 * Runs in Node and in a page alike; no file, no hashing.
 */
export function goldenBytes(content: WaveformContent, bench: BenchContent, kind: GoldenKind): Uint8Array {
  const synthesis = createSynthesis(content);
  if (kind === 'float64') {
    const samples = new Float64Array(2 * synthesis.samples);
    synthesis.read(samples);
    const bytes = new Uint8Array(samples.byteLength);
    const view = new DataView(bytes.buffer);
    samples.forEach((part, i) => view.setFloat64(8 * i, part, true));
    return bytes;
  }
  const profile: BenchContent = kind === 'int16' ? bench : { ...bench, word: 'float32' };
  const stats = vectorStats(synthesis);
  const scale = wordScale(content.level, { ...stats, interpolatedPeak: interpolatedPeak(content) }, profile);
  const writer = createWordWriter(profile, scale);
  const bytes = new Uint8Array(synthesis.samples * writer.bytesPerSample);
  const block = new Float64Array(2 * 4096);
  let at = 0;
  for (let count = synthesis.read(block); count > 0; count = synthesis.read(block))
    at += writer.write(block, count, bytes, at);
  return bytes;
}
