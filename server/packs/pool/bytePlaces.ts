import { readSync } from 'node:fs';
import type { VectorFile } from '@/lib/synth';
import type { BytePlace } from './workTasks.ts';

const blockBytes = 1 << 20;

/** Fills into[at…] with `bytes` bytes of an open file from `position` on, at once: for threads that have nothing else to do. */
export function readNow(fd: number, into: Uint8Array, at: number, bytes: number, position: number): void {
  for (let done = 0; done < bytes;) {
    const got = readSync(fd, into, at + done, bytes - done, position + done);
    if (got === 0) throw new Error('The vector ended before its size.');
    done += got;
  }
}

/** The bytes of a place in blocks; each is valid until the next. */
export function* blocksOf({ fd, offsetBytes, bytes }: BytePlace): Generator<Uint8Array> {
  const block = new Uint8Array(Math.min(blockBytes, bytes));
  for (let done = 0; done < bytes;) {
    const count = Math.min(block.length, bytes - done);
    readNow(fd, block, 0, count, offsetBytes + done);
    yield block.subarray(0, count);
    done += count;
  }
}

/** Reads samples of a vector's files into buffers of its own, which grow with what is asked for. */
export function createSampleReader(files: readonly VectorFile[], places: readonly BytePlace[]) {
  let parts: Uint8Array[] = [];
  return {
    /** Room for `samples` samples of each file. */
    room(samples: number): Uint8Array[] {
      if (parts.length === 0 || parts[0]!.length < samples * files[0]!.bytesPerSample)
        parts = files.map(({ bytesPerSample }) => new Uint8Array(samples * bytesPerSample));
      return parts;
    },
    /** Samples from…from+count−1 to the parts' samples at…; room was made for them. */
    read(from: number, count: number, at: number): void {
      files.forEach(({ head, bytesPerSample }, i) => {
        const { fd, offsetBytes } = places[i]!;
        const position = offsetBytes + head.length + from * bytesPerSample;
        readNow(fd, parts[i]!, at * bytesPerSample, count * bytesPerSample, position);
      });
    },
  };
}
