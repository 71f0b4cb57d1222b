import { readSync } from 'node:fs';
import { open, readFile, stat, type FileHandle } from 'node:fs/promises';
import { guessLayout, readSigmfMeta, type ByteSource, type CaptureLayout } from '@/lib/synth';
import { reasonOf } from './readInputs.ts';

/** Captures are read where they are needed, never whole; beyond this a capture is cut first. */
export const mostCaptureBytes = 2 ** 31;
const mostMetaBytes = 16 * 1024 * 1024;

/** A part of an open file as bytes that are read at once. */
export function fileBytes(fd: number, offsetBytes: number, bytes: number): ByteSource {
  return {
    bytes,
    read(at, count, out) {
      for (let done = 0; done < count;) {
        const got = readSync(fd, out, done, count - done, offsetBytes + at + done);
        if (got === 0) throw new Error('The file ended while it was read.');
        done += got;
      }
    },
  };
}

export interface OpenCapture {
  sources: ByteSource[];
  layout: CaptureLayout;
  /** What the file itself says; null where it says none. */
  clockHz: number | null;
  /** True where nobody and nothing said how the words lie: the bytes alone did. */
  isGuessed: boolean;
  close(): Promise<void>;
}

export type CaptureOutcome =
  { ok: true; capture: OpenCapture } | { ok: false; code: 'io_failed' | 'too_large' | 'invalid'; message: string };

/** The recording that a SigMF metadata file stands beside, and the other way round. */
function sigmfPair(file: string): { meta: string; data: string } | null {
  const base = file.replace(/\.sigmf-(meta|data)$/, '');
  return base === file ? null : { meta: `${base}.sigmf-meta`, data: `${base}.sigmf-data` };
}

/**
 * Opens a capture: one file, or I's and Q's, or a SigMF pair by either name (the data alone is taken as raw). What is `told` about the words
 * goes before what the bytes say, `expected` after it.
 */
export async function openCapture(
  file: string,
  q: string | null,
  told: Partial<CaptureLayout>,
  expected: CaptureLayout | null,
): Promise<CaptureOutcome> {
  const pair = q === null ? sigmfPair(file) : null;
  const handles: FileHandle[] = [];
  const close = async (): Promise<void> => {
    for (const handle of handles) await handle.close();
  };
  const fail = async (code: 'io_failed' | 'too_large' | 'invalid', message: string): Promise<CaptureOutcome> => {
    await close();
    return { ok: false, code, message };
  };
  const names = q === null ? [pair?.data ?? file] : [file, q];
  const sources: ByteSource[] = [];
  for (const name of names) {
    try {
      const handle = await open(name, 'r');
      handles.push(handle);
      const facts = await handle.stat();
      if (!facts.isFile()) return await fail('io_failed', `${name}: it is no file.`);
      if (facts.size > mostCaptureBytes) return await fail('too_large', `${name}: larger than 2 GB. Cut the capture.`);
      sources.push(fileBytes(handle.fd, 0, facts.size));
    } catch (error) {
      return await fail('io_failed', `${name}: ${reasonOf(error)}.`);
    }
  }
  let found = guessLayout(sources[0]!, expected, q !== null);
  let isGuessed = found.ok && found.layout.container === 'raw' && !('byteOrder' in told || 'numberFormat' in told);
  if (pair !== null) {
    try {
      const { size } = await stat(pair.meta);
      if (size > mostMetaBytes) return await fail('too_large', `${pair.meta}: the metadata is too large.`);
      found = readSigmfMeta(await readFile(pair.meta, 'utf8'));
      isGuessed = false;
    } catch (error) {
      if (file === pair.meta) return await fail('io_failed', `${pair.meta}: ${reasonOf(error)}.`);
    }
  }
  if (!found.ok) return await fail('invalid', `${names[0]}: ${found.message}`);
  const layout = { ...found.layout, ...told };
  return { ok: true, capture: { sources, layout, clockHz: found.clockHz, isGuessed, close } };
}
