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
  ReferenceLevels,
  SampleEngine,
  Synthesis,
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

/** One rendering's levels, block by block; done when step gives false. */
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

/** What a level can refer to, of the whole rendering and between its samples, block by block. */
export interface LevelsJob {
  /** One block on; false when done. */
  step(): boolean;
  /** After the last step. */
  levels(): VectorStats & ReferenceLevels;
}

/** Throws SynthError for a content that cannot be rendered. */
export function createLevelsJob(content: WaveformContent, engine?: SampleEngine): LevelsJob {
  const oversampling = interpolationOf(content.oversampling);
  const own = createStatsPass(createSynthesis(content, { engine }));
  const interpolated =
    oversampling === content.oversampling ? null : createStatsPass(createSynthesis(content, { oversampling, engine }));
  let isOwnDone = false;
  return {
    step() {
      if (isOwnDone) return interpolated!.step();
      isOwnDone = !own.step();
      return !isOwnDone || interpolated !== null;
    },
    levels() {
      const stats = own.stats();
      return { ...stats, interpolatedPeak: interpolated ? interpolated.stats().samplePeak : stats.samplePeak };
    },
  };
}

/** Throws SynthError for a content that cannot be rendered, or a layout that no file can have. */
export function createDigestJob(content: WaveformContent, bench: BenchContent, engine?: SampleEngine): DigestJob {
  const levels = createLevelsJob(content, engine);
  const synthesis = createSynthesis(content, { engine });
  const form = createVectorForm(content, bench);
  const hash = sha256.create();
  let phase: 'levels' | 'words' | 'done' = 'levels';
  let writer: WordWriter | null = null;
  let bytes = new Uint8Array(0);
  let written = 0;
  let file = 0; // which of the vector's files is being hashed: one behind the other, each in a pass of its own

  function take(part: Uint8Array): void {
    hash.update(part);
    written += part.length;
  }

  function startFile(): void {
    synthesis.rewind();
    form.rewind();
    take(form.files[file]!.head);
  }

  function startWords(): void {
    const scale = wordScale(content.level, levels.levels(), bench);
    if (scale.isSilent) {
      phase = 'done';
      return;
    }
    writer = createWordWriter(bench, scale);
    bytes = new Uint8Array(BLOCK_SAMPLES * writer.bytesPerSample);
    phase = 'words';
    startFile();
  }

  return {
    step() {
      if (phase === 'levels') {
        if (!levels.step()) startWords();
      } else if (phase === 'words') {
        const count = synthesis.readWords(writer!, BLOCK_SAMPLES, bytes);
        take(form.form(bytes, count)[file]!);
        if (synthesis.position >= synthesis.samples) {
          file++;
          if (file < form.files.length) startFile();
          else phase = 'done';
        }
      }
      return phase !== 'done';
    },
    result: () => (writer === null ? null : { sha256: bytesToHex(hash.digest()), bytes: written }),
  };
}
