import { sha256 } from '@noble/hashes/sha2.js';
import { bytesToHex } from '@noble/hashes/utils.js';
import { createStatsCollector, createSynthesis, createWordWriter, interpolationOf, wordScale } from '@/lib/synth/index';
import type { BenchContent, SampleEngine, Synthesis, VectorStats, WaveformContent } from '@/lib/synth/index';

const BLOCK_SAMPLES = 1 << 14;

/** The vector's digest, taken block by block: the bytes are those that a pack of the same content and profile holds. */
export interface DigestJob {
  /** One block on; false when done. */
  step(): boolean;
  /** After the last step; null when there is nothing to scale. */
  result(): { sha256: string; bytes: number } | null;
}

/** Levels of a rendering, block by block; done when step gives false. */
function createStatsPass(synthesis: Synthesis): { step(): boolean; stats(): VectorStats } {
  const collector = createStatsCollector();
  const { repeats, activeSamples, lastActiveSamples } = synthesis.layout;
  return {
    step() {
      synthesis.collect(collector, BLOCK_SAMPLES);
      return synthesis.position < synthesis.samples;
    },
    stats: () => collector.stats((repeats - 1) * activeSamples + lastActiveSamples),
  };
}

/** Throws SynthError for a profile or content that cannot be rendered yet. */
export function createDigestJob(content: WaveformContent, bench: BenchContent, engine?: SampleEngine): DigestJob {
  const synthesis = createSynthesis(content, { engine });
  const oversampling = interpolationOf(content.oversampling);
  const isOwn = oversampling === content.oversampling;
  const own = createStatsPass(synthesis);
  const interpolated = isOwn ? null : createStatsPass(createSynthesis(content, { oversampling, engine }));
  const hash = sha256.create();
  let phase: 'own' | 'interpolated' | 'words' | 'done' = 'own';
  let writer: ReturnType<typeof createWordWriter> | null = null;
  let bytes = new Uint8Array(0);
  let written = 0;
  let isSilent = false;

  function startWords(): void {
    const stats = own.stats();
    const interpolatedPeak = interpolated ? interpolated.stats().samplePeak : stats.samplePeak;
    const scale = wordScale(content.level, { ...stats, interpolatedPeak }, bench);
    isSilent = scale.isSilent;
    writer = createWordWriter(bench, scale);
    bytes = new Uint8Array(BLOCK_SAMPLES * writer.bytesPerSample);
    synthesis.rewind();
    phase = isSilent ? 'done' : 'words';
  }

  return {
    step() {
      if (phase === 'own') {
        if (!own.step()) {
          if (interpolated) phase = 'interpolated';
          else startWords();
        }
      } else if (phase === 'interpolated') {
        if (!interpolated!.step()) startWords();
      } else if (phase === 'words') {
        const size = writer!.bytesPerSample * synthesis.readWords(writer!, BLOCK_SAMPLES, bytes);
        hash.update(bytes.subarray(0, size));
        written += size;
        if (synthesis.position >= synthesis.samples) phase = 'done';
      }
      return phase !== 'done';
    },
    result: () => (isSilent ? null : { sha256: bytesToHex(hash.digest()), bytes: written }),
  };
}
