import { readSync } from 'node:fs';
import type { FileHandle } from 'node:fs/promises';
import type { VectorFile } from '@/lib/synth';

/** Where one of a finished vector's files lies: a file, or a stored entry of a pack. */
export interface VectorPlace {
  handle: FileHandle;
  offsetBytes: number;
  bytes: number;
}

const endedEarly = () => new Error('The vector ended before its size.');

async function readInto(handle: FileHandle, into: Uint8Array, bytes: number, position: number): Promise<void> {
  for (let done = 0; done < bytes;) {
    const { bytesRead } = await handle.read(into, done, bytes - done, position + done);
    if (bytesRead === 0) throw endedEarly();
    done += bytesRead;
  }
}

/** The vector's files side by side, read by samples: heads are left out, bytes that are no whole sample behind the last too. */
export interface VectorReading {
  /** Whole samples that every file has. */
  readonly samples: number;
  /** How many files begin otherwise than `files` says, or end before their head does. */
  headsDiffer(): Promise<number>;
  /** Bytes of each file behind its last whole sample, all of them wrong. */
  rests(): Promise<Uint8Array[]>;
  /** The heads as they are. */
  heads(): Promise<Uint8Array[]>;
  /** Samples from…from+count−1 of each file; valid until the next call. */
  read(from: number, count: number): Promise<Uint8Array[]>;
  /** The same at once, for callers that cannot wait; in buffers of its own. */
  readNow(from: number, count: number, into: Uint8Array[], at: number): void;
}

export function readVector(files: readonly VectorFile[], places: readonly VectorPlace[]): VectorReading {
  const headBytes = files.map(({ head }, i) => Math.min(head.length, places[i]!.bytes));
  const samples = Math.min(
    ...files.map(({ bytesPerSample }, i) => Math.floor((places[i]!.bytes - headBytes[i]!) / bytesPerSample)),
  );
  let buffers: Uint8Array[] = [];

  async function part(i: number, from: number, bytes: number): Promise<Uint8Array> {
    const found = new Uint8Array(bytes);
    await readInto(places[i]!.handle, found, bytes, places[i]!.offsetBytes + from);
    return found;
  }
  const heads = () => Promise.all(files.map((_, i) => part(i, 0, headBytes[i]!)));

  return {
    samples,
    heads,
    async headsDiffer() {
      const found = await heads();
      return files.filter(({ head }, i) => Buffer.compare(head, found[i]!) !== 0).length;
    },
    rests: () =>
      Promise.all(
        files.map(({ bytesPerSample }, i) => {
          const from = headBytes[i]! + samples * bytesPerSample;
          return part(i, from, places[i]!.bytes - from);
        }),
      ),
    async read(from, count) {
      if (buffers.length === 0 || buffers[0]!.length < count * files[0]!.bytesPerSample)
        buffers = files.map(({ bytesPerSample }) => new Uint8Array(count * bytesPerSample));
      const parts = files.map(({ bytesPerSample }, i) => buffers[i]!.subarray(0, count * bytesPerSample));
      for (const [i, { bytesPerSample }] of files.entries()) {
        const { handle, offsetBytes } = places[i]!;
        await readInto(handle, parts[i]!, parts[i]!.length, offsetBytes + headBytes[i]! + from * bytesPerSample);
      }
      return parts;
    },
    readNow(from, count, into, at) {
      files.forEach(({ bytesPerSample }, i) => {
        const { handle, offsetBytes } = places[i]!;
        const bytes = count * bytesPerSample;
        const position = offsetBytes + headBytes[i]! + from * bytesPerSample;
        for (let done = 0; done < bytes;) {
          const got = readSync(handle.fd, into[i]!, at * bytesPerSample + done, bytes - done, position + done);
          if (got === 0) throw endedEarly();
          done += got;
        }
      });
    },
  };
}
