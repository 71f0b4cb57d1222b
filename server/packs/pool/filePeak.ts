import {
  createReconstructedPeak,
  createVectorGather,
  createWordReader,
  vectorFiles,
  type BenchContent,
  type ReconstructedPeak,
  type WaveformContent,
  type WordScale,
} from '@/lib/synth';
import { createSampleReader } from './bytePlaces.ts';
import { planVector } from './stretchPlan.ts';
import type { BytePlace } from './workTasks.ts';

interface Excerpt {
  samples: number;
  /** Where a sample of the excerpt lies in the file, and how many follow it there. */
  placeOf: (sample: number) => { at: number; following: number };
}

/**
 * The part of a file that holds all of its waveform. Where repeats have the words of earlier ones, a loop without pad is its first cycle
 * played again and again, and any other file its first cycle, the repeat behind it and the last one: a thousand repeats cost no more.
 */
function excerptOf(content: WaveformContent, bench: BenchContent, found: number): Excerpt {
  const { layout, copies } = planVector(content, bench);
  const { samples, repeats, repeatSamples, mode, padSamples } = layout;
  if (copies === null || found !== samples) return { samples: found, placeOf: (at) => ({ at, following: found - at }) };
  const { cycleSamples, from } = copies;
  const cycle = cycleSamples / repeatSamples;
  if (mode === 'loop' && padSamples === 0 && from === cycleSamples && repeats % cycle === 0)
    return { samples: cycleSamples, placeOf: (at) => ({ at, following: cycleSamples - at }) };
  // what is left out is whole cycles, so that each border stands between the repeats that it has in the file
  const left = Math.floor((repeats * repeatSamples - repeatSamples - from) / cycleSamples) * cycleSamples;
  return {
    samples: samples - left,
    placeOf: (at) => (at < from ? { at, following: from - at } : { at: at + left, following: samples - (at + left) }),
  };
}

/** The peak between the samples of the file as it is (it has so many), by lib/synth's own method; reads where that asks. */
export function findFilePeak(
  content: WaveformContent,
  bench: BenchContent,
  scale: WordScale,
  places: readonly BytePlace[],
  samples: number,
): ReconstructedPeak {
  const reader = createWordReader(bench);
  const gather = createVectorGather(bench);
  const sampleReader = createSampleReader(vectorFiles(content, bench), places);
  const excerpt = excerptOf(content, bench, samples);
  const source = {
    samples: excerpt.samples,
    read(first: number, count: number, out: Float64Array) {
      const parts = sampleReader.room(count);
      for (let done = 0; done < count;) {
        const { at, following } = excerpt.placeOf(first + done);
        const part = Math.min(count - done, following);
        sampleReader.read(at, part, done);
        done += part;
      }
      reader.readWords(gather.gather(parts, count), 0, count, out);
      for (let i = 0; i < 2 * count; i++) out[i] = out[i]! / scale.fullScale;
    },
  };
  const measuring = createReconstructedPeak(source, content.timing.mode);
  while (measuring.step());
  return measuring.result();
}
