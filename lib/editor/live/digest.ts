import { sha256 } from '@noble/hashes/sha2.js';
import { bytesToHex } from '@noble/hashes/utils.js';
import {
  createStatsCollector,
  createSynthesis,
  createVectorForm,
  createWordWriter,
  interpolationOf,
  wordScale,
} from '@/lib/synth/index';
import type {
  BenchContent,
  SampleEngine,
  Synthesis,
  VectorForm,
  VectorStats,
  WaveformContent,
  WordWriter,
} from '@/lib/synth/index';

const BLOCK_SAMPLES = 1 << 14;

/** The vector's digest, of two files together I's before Q's, block by block: the bytes are those of a pack's vector. */
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

/** Throws SynthError for a content that cannot be rendered, or a layout that no file can have. */
export function createDigestJob(content: WaveformContent, bench: BenchContent, engine?: SampleEngine): DigestJob {
  const synthesis = createSynthesis(content, { engine });
  const oversampling = interpolationOf(content.oversampling);
  const isOwn = oversampling === content.oversampling;
  const own = createStatsPass(synthesis);
  const interpolated = isOwn ? null : createStatsPass(createSynthesis(content, { oversampling, engine }));
  const hash = sha256.create();
  let phase: 'own' | 'interpolated' | 'words' | 'done' = 'own';
  let writer: WordWriter | null = null;
  let form: VectorForm | null = null;
  let file = 0; // which of the vector's files is being hashed: one behind the other, each in a pass of its own
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
    form = createVectorForm(content, bench);
    phase = isSilent ? 'done' : 'words';
    startFile();
  }

  function startFile(): void {
    synthesis.rewind();
    form!.rewind();
    take(form!.files[file]!.head);
  }

  function take(part: Uint8Array): void {
    hash.update(part);
    written += part.length;
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
        const count = synthesis.readWords(writer!, BLOCK_SAMPLES, bytes);
        take(form!.form(bytes, count)[file]!);
        if (synthesis.position >= synthesis.samples) {
          file++;
          if (file < form!.files.length) startFile();
          else phase = 'done';
        }
      }
      return phase !== 'done';
    },
    result: () => (isSilent ? null : { sha256: bytesToHex(hash.digest()), bytes: written }),
  };
}
