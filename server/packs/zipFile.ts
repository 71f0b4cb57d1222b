import { open, type FileHandle } from 'node:fs/promises';
import { crc32 } from 'node:zlib';
import { throwIfCancelled } from './packError.ts';

const localSignature = 0x04034b50;
const centralSignature = 0x02014b50;
const endSignature = 0x06054b50;
const end64Signature = 0x06064b50;
const end64LocatorSignature = 0x07064b50;
const localBytes = 30;
const centralBytes = 46;
/** The local head's ZIP64 field: both sizes. */
const extra64Bytes = 20;
const most32 = 0xffffffff;
const most16 = 0xffff;
const plainVersion = 20;
const zip64Version = 45;
/** Made on a Unix system: the upper half of the attributes is a file's mode. */
const madeOnUnix = 3 << 8;
const attributes = (0o100644 << 16) >>> 0;
/** 1980-01-01, the earliest date a zip can hold: no clock time enters a pack, so that equal inputs give equal bytes. */
const fixedDate = (1 << 5) | 1;

/** One entry, as its heads say it. */
interface Entry {
  name: string;
  headOffset: number;
  bytes: number;
  crc32: number;
  /** The local head has room for sizes of 64 bits. */
  is64: boolean;
}

/** Room for an entry's bytes in the zip; they may be written and read there before the entry has its name. */
export interface ZipRoom {
  handle: FileHandle;
  offsetBytes: number;
  bytes: number;
}

/** A zip of stored entries that is written where it will stand: large entries are never copied. */
export interface ZipFile {
  /** Room for an entry of known size and length of name; entries stand in the order of the calls. */
  reserve(nameLength: number, bytes: number): ZipRoom;
  /** The entry of a reserved room: its bytes are all written. The name has the length that was said. */
  settle(room: ZipRoom, name: string, sum: number): Promise<void>;
  /** Writes an entry's chunks behind all others. `isLarge`: it may have 4 GiB or more. Every room must be settled. */
  append(
    name: string,
    chunks: Iterable<Uint8Array>,
    options?: { isLarge?: boolean; signal?: AbortSignal | undefined },
  ): Promise<void>;
  /** Where the next entry will begin: all bytes before it are as they will be once every room is settled. */
  readonly bytes: number;
  readonly handle: FileHandle;
  /** Writes the directory and flushes the file to the disk; it has this many bytes. */
  finish(): Promise<number>;
  close(): Promise<void>;
}

/** Writes all of a buffer: a nearly full disk takes a part without an error, and refuses only the next write. */
export async function writeAll(handle: FileHandle, bytes: Uint8Array, position: number): Promise<void> {
  for (let done = 0; done < bytes.length;)
    done += (await handle.write(bytes, done, bytes.length - done, position + done)).bytesWritten;
}

function localHead({ name, bytes, crc32: sum, is64 }: Entry): Buffer {
  const head = Buffer.alloc(localBytes + name.length + (is64 ? extra64Bytes : 0));
  head.writeUInt32LE(localSignature, 0);
  head.writeUInt16LE(is64 ? zip64Version : plainVersion, 4);
  head.writeUInt16LE(fixedDate, 12);
  head.writeUInt32LE(sum, 14);
  head.writeUInt32LE(is64 ? most32 : bytes, 18);
  head.writeUInt32LE(is64 ? most32 : bytes, 22);
  head.writeUInt16LE(name.length, 26);
  head.write(name, localBytes, 'latin1');
  if (is64) {
    head.writeUInt16LE(extra64Bytes, 28);
    const at = localBytes + name.length;
    head.writeUInt16LE(1, at);
    head.writeUInt16LE(extra64Bytes - 4, at + 2);
    head.writeBigUInt64LE(BigInt(bytes), at + 4);
    head.writeBigUInt64LE(BigInt(bytes), at + 12);
  }
  return head;
}

function centralHead({ name, bytes, crc32: sum, headOffset, is64 }: Entry): Buffer {
  const isFar = headOffset >= most32;
  const wide = [...(is64 ? [bytes, bytes] : []), ...(isFar ? [headOffset] : [])];
  const extraBytes = wide.length === 0 ? 0 : 4 + 8 * wide.length;
  const head = Buffer.alloc(centralBytes + name.length + extraBytes);
  const version = extraBytes > 0 ? zip64Version : plainVersion;
  head.writeUInt32LE(centralSignature, 0);
  head.writeUInt16LE(madeOnUnix | version, 4);
  head.writeUInt16LE(version, 6);
  head.writeUInt16LE(fixedDate, 14);
  head.writeUInt32LE(sum, 16);
  head.writeUInt32LE(is64 ? most32 : bytes, 20);
  head.writeUInt32LE(is64 ? most32 : bytes, 24);
  head.writeUInt16LE(name.length, 28);
  head.writeUInt16LE(extraBytes, 30);
  head.writeUInt32LE(attributes, 38);
  head.writeUInt32LE(isFar ? most32 : headOffset, 42);
  head.write(name, centralBytes, 'latin1');
  if (extraBytes > 0) {
    const at = centralBytes + name.length;
    head.writeUInt16LE(1, at);
    head.writeUInt16LE(extraBytes - 4, at + 2);
    wide.forEach((value, i) => head.writeBigUInt64LE(BigInt(value), at + 4 + 8 * i));
  }
  return head;
}

function endRecords(count: number, bytes: number, offset: number): Buffer {
  const end = Buffer.alloc(22);
  end.writeUInt32LE(endSignature, 0);
  end.writeUInt16LE(Math.min(count, most16), 8);
  end.writeUInt16LE(Math.min(count, most16), 10);
  end.writeUInt32LE(Math.min(bytes, most32), 12);
  end.writeUInt32LE(Math.min(offset, most32), 16);
  if (count < most16 && bytes < most32 && offset < most32) return end;
  const end64 = Buffer.alloc(56 + 20);
  end64.writeUInt32LE(end64Signature, 0);
  end64.writeBigUInt64LE(44n, 4); // of the record behind this field
  end64.writeUInt16LE(madeOnUnix | zip64Version, 12);
  end64.writeUInt16LE(zip64Version, 14);
  end64.writeBigUInt64LE(BigInt(count), 24);
  end64.writeBigUInt64LE(BigInt(count), 32);
  end64.writeBigUInt64LE(BigInt(bytes), 40);
  end64.writeBigUInt64LE(BigInt(offset), 48);
  end64.writeUInt32LE(end64LocatorSignature, 56);
  end64.writeBigUInt64LE(BigInt(offset + bytes), 64);
  end64.writeUInt32LE(1, 72);
  return Buffer.concat([end64, end]);
}

/** Opens a new zip (PKWARE's APPNOTE 6.3: 4.3.7, 4.3.12 to 4.3.16, 4.5.3). Names are ASCII. */
export async function createZipFile(file: string): Promise<ZipFile> {
  const handle = await open(file, 'wx+');
  const entries: Entry[] = [];
  const entryOf = new Map<ZipRoom, Entry>();
  let end = 0;

  function begin(nameLength: number, bytes: number, isLarge: boolean): Entry {
    const entry = { name: ' '.repeat(nameLength), headOffset: end, bytes, crc32: 0, is64: isLarge || bytes >= most32 };
    entries.push(entry);
    end += localBytes + nameLength + (entry.is64 ? extra64Bytes : 0);
    return entry;
  }

  return {
    handle,
    get bytes() {
      return end;
    },
    reserve(nameLength, bytes) {
      const entry = begin(nameLength, bytes, false);
      const room = { handle, offsetBytes: end, bytes };
      entryOf.set(room, entry);
      end += bytes;
      return room;
    },
    async settle(room, name, sum) {
      const entry = entryOf.get(room);
      if (entry?.name.length !== name.length) throw new Error('The entry has another name than it was given room for.');
      Object.assign(entry, { name, crc32: sum });
      entryOf.delete(room);
      await writeAll(handle, localHead(entry), entry.headOffset);
    },
    async append(name, chunks, { isLarge = false, signal } = {}) {
      const entry = begin(name.length, 0, isLarge);
      entry.name = name;
      for (const chunk of chunks) {
        throwIfCancelled(signal);
        await writeAll(handle, chunk, end);
        entry.crc32 = crc32(chunk, entry.crc32);
        entry.bytes += chunk.length;
        end += chunk.length;
      }
      if (entry.bytes >= most32 && !isLarge) throw new Error('The entry is larger than it was said to be.');
      await writeAll(handle, localHead(entry), entry.headOffset);
    },
    async finish() {
      if (entryOf.size > 0) throw new Error('An entry of the zip has no name yet.');
      const heads = Buffer.concat(entries.map(centralHead));
      await writeAll(handle, Buffer.concat([heads, endRecords(entries.length, heads.length, end)]), end);
      await handle.sync();
      return (await handle.stat()).size;
    },
    close: () => handle.close(),
  };
}
