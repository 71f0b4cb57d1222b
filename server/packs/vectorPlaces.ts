import type { FileHandle } from 'node:fs/promises';
import type { VectorFile } from '@/lib/synth';

/** Where one of a vector's files lies in an open file: the whole of it, or in a pack, behind the head of its entry. */
export interface VectorPlace {
  handle: FileHandle;
  offsetBytes: number;
  bytes: number;
}

/** Writes all of a buffer: a nearly full disk takes a part without an error, and refuses only the next write. */
export async function writeAll(handle: FileHandle, bytes: Uint8Array, position: number): Promise<void> {
  for (let done = 0; done < bytes.length;)
    done += (await handle.write(bytes, done, bytes.length - done, position + done)).bytesWritten;
}

/** Fills the first `bytes` bytes of a buffer from a file's `position` on. */
export async function readInto(handle: FileHandle, into: Uint8Array, bytes: number, position: number): Promise<void> {
  for (let done = 0; done < bytes;) {
    const { bytesRead } = await handle.read(into, done, bytes - done, position + done);
    if (bytesRead === 0) throw new Error('The vector ended before its size.');
    done += bytesRead;
  }
}

/** The vector's files side by side. */
export interface VectorReading {
  /** Whole samples that every file has. */
  readonly samples: number;
  /** How many files begin otherwise than `files` says, or end before their head does. */
  headsDiffer(): Promise<number>;
  /** How many files have bytes behind their last whole sample, all of them wrong. */
  readonly rests: number;
  /** The first `count` samples of each file. */
  first(count: number): Promise<Uint8Array[]>;
}

export function readVector(files: readonly VectorFile[], places: readonly VectorPlace[]): VectorReading {
  const headBytes = files.map(({ head }, i) => Math.min(head.length, places[i]!.bytes));
  const samples = Math.min(
    ...files.map(({ bytesPerSample }, i) => Math.floor((places[i]!.bytes - headBytes[i]!) / bytesPerSample)),
  );
  async function part(i: number, from: number, bytes: number): Promise<Uint8Array> {
    const found = new Uint8Array(bytes);
    await readInto(places[i]!.handle, found, bytes, places[i]!.offsetBytes + from);
    return found;
  }
  return {
    samples,
    async headsDiffer() {
      const found = await Promise.all(files.map((_, i) => part(i, 0, headBytes[i]!)));
      return files.filter(({ head }, i) => Buffer.compare(head, found[i]!) !== 0).length;
    },
    rests: files.filter(({ bytesPerSample }, i) => places[i]!.bytes > headBytes[i]! + samples * bytesPerSample).length,
    first: (count) =>
      Promise.all(
        files.map(({ bytesPerSample }, i) => part(i, headBytes[i]!, Math.min(count, samples) * bytesPerSample)),
      ),
  };
}

/** Bytes from…end−1 of a file in blocks, the next one read while the present one is worked on; each is valid until the next. */
export async function* readAhead(handle: FileHandle, from: number, end: number): AsyncGenerator<Uint8Array> {
  const size = Math.min(1 << 20, end - from);
  const blocks = [new Uint8Array(size), new Uint8Array(size)];
  const begin = (at: number, i: number): Promise<void> | null => {
    if (at >= end) return null;
    const reading = readInto(handle, blocks[i]!, Math.min(size, end - at), at);
    reading.catch(() => undefined); // whoever stops early does not wait for it
    return reading;
  };
  let i = 0;
  let reading = begin(from, i);
  for (let at = from; at < end; at += size) {
    await reading;
    reading = begin(at + size, 1 - i);
    yield blocks[i]!.subarray(0, Math.min(size, end - at));
    i = 1 - i;
  }
}
