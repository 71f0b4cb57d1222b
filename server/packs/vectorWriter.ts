import { open, type FileHandle } from 'node:fs/promises';
import path from 'node:path';
import {
  createSynthesis,
  createVectorForm,
  createWordWriter,
  type BenchContent,
  type SaturationCount,
  type VectorFile,
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

/** A finished file of a vector in the work folder. */
export interface WrittenFile {
  file: string;
  role: VectorFile['role'];
  bytes: number;
}

/**
 * Pass two of a pack: the words, block by block, in the profile's form, flushed to the disk at the end. The files lie in
 * `folder`, in the order of vectorFiles.
 */
export async function writeVector(
  folder: string,
  content: WaveformContent,
  bench: BenchContent,
  scale: WordScale,
  options: StepOptions = {},
): Promise<{ saturated: SaturationCount; written: WrittenFile[] }> {
  const synthesis = createSynthesis(content, { engine: sampleEngine() });
  const writer = createWordWriter(bench, scale);
  const form = createVectorForm(content, bench);
  const bytes = new Uint8Array(blockSamples * writer.bytesPerSample);
  const written = form.files.map(({ role, ending, bytes }) => ({
    file: path.join(folder, `vector${ending}`),
    role,
    bytes,
  }));
  const handles: FileHandle[] = [];
  try {
    for (const { file } of written) handles.push(await open(file, 'wx'));
    for (const [i, { head }] of form.files.entries()) await writeAll(handles[i]!, head);
    for (;;) {
      throwIfCancelled(options.signal);
      const count = synthesis.readWords(writer, blockSamples, bytes);
      if (count === 0) break;
      const parts = form.form(bytes.subarray(0, count * writer.bytesPerSample), count);
      for (const [i, part] of parts.entries()) await writeAll(handles[i]!, part);
      options.onProgress?.(synthesis.position / synthesis.samples);
    }
    for (const handle of handles) await handle.sync();
  } finally {
    for (const handle of handles) await handle.close();
  }
  return { saturated: writer.saturated, written };
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
