import { createReadStream, createWriteStream, type ReadStream } from 'node:fs';
import { pipeline } from 'node:stream/promises';
import { ZipArchive } from 'archiver';
import { fsyncFile } from './tmpFiles.ts';

export interface ZipSource {
  name: string;
  /** A finished file, or the bytes themselves. */
  from: string | Uint8Array;
}

/** The earliest date a zip can hold: no clock time enters a pack, so that equal inputs give equal bytes. */
const fixedDate = new Date(Date.UTC(1980, 0, 1));
const entryMode = 0o644;
const readAheadBytes = 1 << 20;

/**
 * Writes the entries, stored and in the given order, and flushes the file to the disk.
 * One entry is opened after another: the archiver would otherwise hold a file descriptor for each from the start.
 */
export async function writeZip(
  file: string,
  entries: ZipSource[],
  options: { signal?: AbortSignal; onBytes?: (bytes: number) => void } = {},
): Promise<void> {
  const archive = new ZipArchive({ store: true });
  const output = createWriteStream(file, { flags: 'wx' });
  if (options.onBytes) archive.on('data', (chunk) => options.onBytes?.(chunk.length));
  const written = pipeline(archive, output, options.signal ? { signal: options.signal } : {});
  let reading: ReadStream | null = null;
  const appended = (async () => {
    for (const entry of entries) {
      reading = typeof entry.from === 'string' ? createReadStream(entry.from, { highWaterMark: readAheadBytes }) : null;
      const source = reading ?? Buffer.from(entry.from as Uint8Array);
      await new Promise<void>((resolve, reject) => {
        // A pipeline that ended early (full disk, cancel) never reports the entry: `written` rejects, and ends this wait too.
        written.catch(reject);
        archive.once('entry', () => resolve());
        archive.append(source, { name: entry.name, date: fixedDate, mode: entryMode });
      });
    }
    await archive.finalize();
  })();
  try {
    await Promise.all([written, appended]);
  } finally {
    (reading as ReadStream | null)?.destroy();
  }
  await fsyncFile(file);
}
