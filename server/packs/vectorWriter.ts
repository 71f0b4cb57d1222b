import { open } from 'node:fs/promises';
import {
  createSynthesis,
  createWordWriter,
  type BenchContent,
  type SaturationCount,
  type WaveformContent,
  type WordScale,
} from '@/lib/synth';
import { sampleEngine } from '../sampleEngine.ts';
import type { StepOptions } from './measureRendering.ts';
import { throwIfCancelled } from './packError.ts';

const blockSamples = 1 << 16;

/** Writes all of a buffer: a nearly full disk takes a part without an error, and refuses only the next write. */
async function writeAll(
  handle: { write(b: Uint8Array, o: number, l: number): Promise<{ bytesWritten: number }> },
  bytes: Uint8Array,
): Promise<void> {
  for (let done = 0; done < bytes.length;) done += (await handle.write(bytes, done, bytes.length - done)).bytesWritten;
}

/** Pass two of a pack: the words, block by block, flushed to the disk at the end. */
export async function writeVector(
  file: string,
  content: WaveformContent,
  bench: BenchContent,
  scale: WordScale,
  options: StepOptions = {},
): Promise<SaturationCount> {
  const synthesis = createSynthesis(content, { engine: sampleEngine() });
  const writer = createWordWriter(bench, scale);
  const bytes = new Uint8Array(blockSamples * writer.bytesPerSample);
  const handle = await open(file, 'wx');
  try {
    for (;;) {
      throwIfCancelled(options.signal);
      const count = synthesis.readWords(writer, blockSamples, bytes);
      if (count === 0) break;
      await writeAll(handle, bytes.subarray(0, count * writer.bytesPerSample));
      options.onProgress?.(synthesis.position / synthesis.samples);
    }
    await handle.sync();
  } finally {
    await handle.close();
  }
  return writer.saturated;
}

/** Writes an entry's chunks as they are made. */
export async function writeChunks(file: string, chunks: Iterable<Uint8Array>, signal?: AbortSignal): Promise<void> {
  const handle = await open(file, 'wx');
  try {
    for (const chunk of chunks) {
      throwIfCancelled(signal);
      await writeAll(handle, chunk);
    }
  } finally {
    await handle.close();
  }
}
