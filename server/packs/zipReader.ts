import type { FileHandle } from 'node:fs/promises';
import { PackError } from './packError.ts';

export interface ZipEntry {
  name: string;
  /** Where the stored bytes begin in the file. */
  offsetBytes: number;
  bytes: number;
  crc32: number;
}

const endSignature = 0x06054b50;
const end64Signature = 0x06064b50;
const end64LocatorSignature = 0x07064b50;
const centralSignature = 0x02014b50;
const localSignature = 0x04034b50;
const endBytes = 22;
const centralHeadBytes = 46;
const localHeadBytes = 30;
/** A pack has at most 8 payloads and a dozen other entries; more is not one of ours. */
const mostEntries = 64;
const mostDirectoryBytes = 1 << 16;

const damaged = (what: string) => new PackError('invalid', `This is not a pack: ${what}.`);

/**
 * Lists the stored entries of a zip by its central directory (APPNOTE 4.3, with ZIP64). Only what a pack may hold is
 * taken: stored, not encrypted, plain names, inside the file and not overlapping.
 */
export async function readZipEntries(handle: FileHandle): Promise<ZipEntry[]> {
  const size = (await handle.stat()).size;
  if (size < endBytes) throw damaged('it is too short for a zip');
  // A pack has no zip comment, so the end record is the last thing in the file.
  const end = await readExactly(handle, size - endBytes, endBytes);
  if (end.readUInt32LE(0) !== endSignature || end.readUInt16LE(20) !== 0) throw damaged('its end record is missing');
  let count = end.readUInt16LE(10);
  let directoryBytes = end.readUInt32LE(12);
  let directoryOffset = end.readUInt32LE(16);
  if (count === 0xffff || directoryBytes === 0xffffffff || directoryOffset === 0xffffffff) {
    if (size < endBytes + 20 + 56) throw damaged('its end record is missing');
    const locator = await readExactly(handle, size - endBytes - 20, 20);
    if (locator.readUInt32LE(0) !== end64LocatorSignature) throw damaged('its ZIP64 locator is missing');
    const at = toNumber(locator.readBigUInt64LE(8));
    if (at > size - 56) throw damaged('its ZIP64 record lies outside the file');
    const end64 = await readExactly(handle, at, 56);
    if (end64.readUInt32LE(0) !== end64Signature) throw damaged('its ZIP64 record is missing');
    count = toNumber(end64.readBigUInt64LE(32));
    directoryBytes = toNumber(end64.readBigUInt64LE(40));
    directoryOffset = toNumber(end64.readBigUInt64LE(48));
  }
  if (count > mostEntries || directoryBytes > mostDirectoryBytes) throw damaged('it has too many entries');
  if (directoryOffset + directoryBytes > size) throw damaged('its directory lies outside the file');
  const directory = await readExactly(handle, directoryOffset, directoryBytes);
  const entries: ZipEntry[] = [];
  let at = 0;
  let freeFrom = 0;
  for (let i = 0; i < count; i++) {
    if (at + centralHeadBytes > directory.length || directory.readUInt32LE(at) !== centralSignature)
      throw damaged('its directory is broken');
    const nameBytes = directory.readUInt16LE(at + 28);
    const extraBytes = directory.readUInt16LE(at + 30);
    const next = at + centralHeadBytes + nameBytes + extraBytes + directory.readUInt16LE(at + 32);
    if (next > directory.length) throw damaged('its directory is broken');
    const name = directory.toString('latin1', at + centralHeadBytes, at + centralHeadBytes + nameBytes);
    if (!/^[A-Za-z0-9][A-Za-z0-9._-]*$/.test(name) || entries.some((e) => e.name === name))
      throw damaged('an entry has a name that packs never use');
    if (directory.readUInt16LE(at + 10) !== 0 || (directory.readUInt16LE(at + 8) & 1) !== 0)
      throw damaged(`${name} is not stored`);
    const extra = directory.subarray(at + centralHeadBytes + nameBytes, at + centralHeadBytes + nameBytes + extraBytes);
    const { bytes, localOffset } = sizes(directory, at, extra, name);
    if (localOffset < freeFrom || localOffset + localHeadBytes > directoryOffset)
      throw damaged(`${name} lies outside the file`);
    const local = await readExactly(handle, localOffset, localHeadBytes);
    if (local.readUInt32LE(0) !== localSignature) throw damaged(`${name} has no header`);
    const offsetBytes = localOffset + localHeadBytes + local.readUInt16LE(26) + local.readUInt16LE(28);
    if (offsetBytes + bytes > directoryOffset) throw damaged(`${name} lies outside the file`);
    freeFrom = offsetBytes + bytes;
    entries.push({ name, offsetBytes, bytes, crc32: directory.readUInt32LE(at + 16) });
    at = next;
  }
  return entries;
}

/** Sizes and place of an entry, from the ZIP64 extra field where the short fields say so (APPNOTE 4.5.3). */
function sizes(directory: Buffer, at: number, extra: Buffer, name: string): { bytes: number; localOffset: number } {
  let compressed = directory.readUInt32LE(at + 20);
  let bytes = directory.readUInt32LE(at + 24);
  let localOffset = directory.readUInt32LE(at + 42);
  for (let e = 0; e + 4 <= extra.length;) {
    const length = extra.readUInt16LE(e + 2);
    if (extra.readUInt16LE(e) === 1) {
      let field = e + 4;
      const end = Math.min(extra.length, field + length);
      const take = (short: number): number => {
        if (short !== 0xffffffff) return short;
        if (field + 8 > end) throw damaged(`${name} has no size`);
        field += 8;
        return toNumber(extra.readBigUInt64LE(field - 8));
      };
      bytes = take(bytes);
      compressed = take(compressed);
      localOffset = take(localOffset);
    }
    e += 4 + length;
  }
  if (compressed !== bytes) throw damaged(`${name} is not stored`);
  return { bytes, localOffset };
}

function toNumber(value: bigint): number {
  if (value > BigInt(Number.MAX_SAFE_INTEGER)) throw damaged('a size is impossible');
  return Number(value);
}

async function readExactly(handle: FileHandle, offset: number, bytes: number): Promise<Buffer> {
  const buffer = Buffer.alloc(bytes);
  let done = 0;
  while (done < bytes) {
    const { bytesRead } = await handle.read(buffer, done, bytes - done, offset + done);
    if (bytesRead === 0) throw damaged('it ends early');
    done += bytesRead;
  }
  return buffer;
}

/** The whole of a small entry; the limit keeps a hostile zip from filling the memory. */
export async function readSmallEntry(handle: FileHandle, entry: ZipEntry, mostBytes: number): Promise<Buffer> {
  if (entry.bytes > mostBytes) throw damaged(`${entry.name} is too large`);
  return readExactly(handle, entry.offsetBytes, entry.bytes);
}
