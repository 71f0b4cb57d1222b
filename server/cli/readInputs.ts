import { open } from 'node:fs/promises';
import type { ParseResult } from '@/lib/document/issues';
import { parseBenchProfile, parseWaveformDocument } from '@/lib/document/parse';
import type { BenchProfile, WaveformDocument } from '@/lib/synth';
import { refused, type Outcome } from './outcome.ts';

/** As for documents over the web: larger is refused before it is parsed. */
const mostDocumentBytes = 32 * 1024 * 1024;
const mostProfileBytes = 1024 * 1024;

export type Read<T> = { ok: true; value: T } | { ok: false; outcome: Outcome };

const systemWords: Record<string, string> = {
  ENOENT: 'there is no such file',
  EACCES: 'it may not be read',
  EPERM: 'it may not be read',
  EISDIR: 'it is a folder',
};

/** The system's reason in plain words, without a stack or an error class. */
export function reasonOf(error: unknown): string {
  const code = (error as NodeJS.ErrnoException | null)?.code;
  return (code && systemWords[code]) ?? (code ? `the system answered ${code}` : 'it could not be read');
}

async function readBytes(file: string, mostBytes: number): Promise<Read<Uint8Array>> {
  const fail = (code: string, words: string): Read<never> => ({
    ok: false,
    outcome: refused(code, `${file}: ${words}.`),
  });
  try {
    const handle = await open(file, 'r');
    try {
      const stat = await handle.stat();
      if (stat.isDirectory()) return fail('io_failed', 'it is a folder');
      if (stat.size > mostBytes) return fail('too_large', `it has ${stat.size} bytes, the limit is ${mostBytes}`);
      // A pipe tells no size: what comes is counted as it is read.
      const parts: Buffer[] = [];
      let bytes = 0;
      for await (const part of handle.createReadStream({ autoClose: false })) {
        bytes += (part as Buffer).length;
        if (bytes > mostBytes) return fail('too_large', `it has more than ${mostBytes} bytes`);
        parts.push(part as Buffer);
      }
      return { ok: true, value: Buffer.concat(parts) };
    } finally {
      await handle.close();
    }
  } catch (error) {
    return fail('io_failed', reasonOf(error));
  }
}

async function readParsed<T>(
  file: string,
  where: 'document' | 'bench',
  mostBytes: number,
  parse: (bytes: Uint8Array) => ParseResult<T>,
): Promise<Read<T>> {
  const read = await readBytes(file, mostBytes);
  if (!read.ok) return read;
  const parsed = parse(read.value);
  if (parsed.ok) return parsed;
  const issues = parsed.issues.map(({ pointer, message }) => ({ where, pointer, message }));
  const what = where === 'document' ? 'waveform document' : 'bench profile';
  const code = parsed.issues[0]?.code ?? 'invalid';
  return { ok: false, outcome: refused(code, `${file} is not a valid ${what}.`, issues, parsed.more) };
}

export const readDocument = (file: string): Promise<Read<WaveformDocument>> =>
  readParsed(file, 'document', mostDocumentBytes, parseWaveformDocument);

export const readProfile = (file: string): Promise<Read<BenchProfile>> =>
  readParsed(file, 'bench', mostProfileBytes, parseBenchProfile);
