import { createReadStream, createWriteStream } from 'node:fs';
import { Readable } from 'node:stream';
import { pipeline } from 'node:stream/promises';
import { ZipArchive } from 'archiver';

export interface ZipSource {
  name: string;
  /** A finished file's path, or what makes the bytes once it is this entry's turn. */
  from: string | (() => Iterable<Uint8Array>);
}

/** The earliest date a zip can hold: no clock time enters a pack, so that equal inputs give equal bytes. */
const fixedDate = new Date(Date.UTC(1980, 0, 1));
const entryMode = 0o644;
const blockBytes = 1 << 20;

function streamOf(from: ZipSource['from']): Readable {
  return typeof from === 'string'
    ? createReadStream(from, { highWaterMark: blockBytes })
    : Readable.from(from(), { objectMode: false, highWaterMark: blockBytes });
}

/**
 * Writes the entries, stored and in the given order, and flushes the file to the disk. One entry is opened after another: the archiver
 * would otherwise hold a file descriptor for each from the start, and an entry may say what the ones before it were.
 */
export async function writeZip(
  file: string,
  entries: Iterable<ZipSource>,
  options: { signal?: AbortSignal | undefined; onBytes?: (bytes: number) => void } = {},
): Promise<void> {
  const archive = new ZipArchive({ store: true });
  // flush: the write stream's own fsync before it closes
  const output = createWriteStream(file, { flags: 'wx', flush: true, highWaterMark: blockBytes });
  if (options.onBytes) archive.on('data', (chunk) => options.onBytes?.(chunk.length));
  const written = pipeline(archive, output, options.signal ? { signal: options.signal } : {});
  let reading: Readable | null = null;
  const appended = (async () => {
    for (const { name, from } of entries) {
      const source = (reading = streamOf(from));
      await new Promise<void>((resolve, reject) => {
        // A pipeline that ended early (full disk, cancel) never reports the entry: `written` rejects, and ends this wait too.
        written.catch(reject);
        source.once('error', (error) => {
          archive.destroy(error);
          reject(error);
        });
        archive.once('entry', () => resolve());
        archive.append(source, { name, date: fixedDate, mode: entryMode });
      });
    }
    await archive.finalize();
  })();
  try {
    await Promise.all([written, appended]);
  } finally {
    (reading as Readable | null)?.destroy();
    await Promise.allSettled([written, appended]);
  }
}
