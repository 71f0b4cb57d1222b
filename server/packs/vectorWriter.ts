import type { FileHandle } from 'node:fs/promises';
import {
  createVectorForm,
  createWordWriter,
  type BenchContent,
  type SaturationCount,
  type WaveformContent,
  type WordScale,
} from '@/lib/synth';
import type { StepOptions } from './measureRendering.ts';
import { throwIfCancelled } from './packError.ts';
import { cutPiece, planVector, stretchMost, type FilePiece } from './pool/stretchPlan.ts';
import { inOrder, type WorkPool } from './pool/workPool.ts';
import type { TaskOf } from './pool/workTasks.ts';
import { readInto, writeAll, type VectorPlace } from './vectorPlaces.ts';

const copyBytes = 1 << 22;

/**
 * Pass two of a pack: the words, stretch by stretch in the profile's form, to the places of the vector's files, which are in the order of
 * vectorFiles. Repeats that are copies are written from the file's own earlier bytes.
 */
export async function writeVector(
  pool: WorkPool,
  content: WaveformContent,
  bench: BenchContent,
  scale: WordScale,
  places: readonly VectorPlace[],
  options: StepOptions = {},
): Promise<SaturationCount> {
  const form = createVectorForm(content, bench);
  const { bytesPerSample: wordBytes } = createWordWriter(bench, scale);
  const { layout, head, copies, tail } = planVector(content, bench);
  const saturated: SaturationCount = { components: 0, samples: 0 };
  const freeRooms: ArrayBuffer[] = [];
  const positionOf = (file: number, sample: number): number => {
    const { head: fileHead, bytesPerSample } = form.files[file]!;
    return places[file]!.offsetBytes + fileHead.length + sample * bytesPerSample;
  };
  const note = (sample: number): void => {
    throwIfCancelled(options.signal);
    options.onProgress?.(sample / layout.samples);
  };

  function* tasksOf(piece: FilePiece): Generator<{ task: TaskOf<'words'>; transfer: ArrayBuffer[] }> {
    for (const stretch of cutPiece(layout, piece)) {
      const bytes = (stretch.end - stretch.from) * wordBytes;
      const at = freeRooms.findIndex(({ byteLength }) => byteLength >= bytes);
      const room =
        at >= 0 ? freeRooms.splice(at, 1)[0]! : new ArrayBuffer(Math.max(bytes, stretchMost(layout) * wordBytes));
      yield { task: { kind: 'words', scale, stretch, room }, transfer: [room] };
    }
  }

  async function writePieces(pieces: readonly FilePiece[]): Promise<void> {
    for (const piece of pieces) {
      form.seek(piece.from);
      await inOrder<'words'>(pool, tasksOf(piece), async (found, { stretch: { from, end } }) => {
        saturated.components += piece.times * found.saturated.components;
        saturated.samples += piece.times * found.saturated.samples;
        const words = new Uint8Array(found.room, 0, (end - from) * wordBytes);
        for (const [file, part] of form.form(words, end - from).entries())
          await writeAll(places[file]!.handle, part, positionOf(file, from));
        freeRooms.push(found.room);
        note(end);
      });
    }
  }

  for (const [file, { head: fileHead }] of form.files.entries())
    await writeAll(places[file]!.handle, fileHead, places[file]!.offsetBytes);
  await writePieces(head);
  if (copies !== null) {
    for (const [file, { bytesPerSample }] of form.files.entries()) {
      await repeatBytes(places[file]!.handle, {
        from: positionOf(file, copies.from),
        end: positionOf(file, copies.end),
        cycleBytes: copies.cycleSamples * bytesPerSample,
        onWritten: (bytes) => note(copies.from + bytes / bytesPerSample / form.files.length),
      });
    }
  }
  await writePieces(tail);
  return saturated;
}

/** Writes the bytes from…end−1 of a file, each equal to the one `cycleBytes` before it. */
async function repeatBytes(
  handle: FileHandle,
  {
    from,
    end,
    cycleBytes,
    onWritten,
  }: { from: number; end: number; cycleBytes: number; onWritten(bytes: number): void },
): Promise<void> {
  const isShort = 2 * cycleBytes <= copyBytes;
  const block = new Uint8Array(
    isShort ? Math.floor(copyBytes / cycleBytes) * cycleBytes : Math.min(copyBytes, cycleBytes),
  );
  if (isShort) {
    await readInto(handle, block, cycleBytes, from - cycleBytes);
    for (let filled = cycleBytes; filled < block.length; filled *= 2) block.copyWithin(filled, 0, filled);
  }
  for (let at = from; at < end;) {
    const count = Math.min(block.length, end - at);
    if (!isShort) await readInto(handle, block, count, at - cycleBytes);
    await writeAll(handle, block.subarray(0, count), at);
    at += count;
    onWritten(at - from);
  }
}
