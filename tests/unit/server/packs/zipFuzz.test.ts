import { mkdtempSync, readFileSync, rmSync, writeFileSync } from 'node:fs';
import { open } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import path from 'node:path';
import { crc32 } from 'node:zlib';
import type { Manifest } from '@/lib/document/manifestSchema';
import { makePack } from '@/server/packs/makePack';
import { verifyPack } from '@/server/packs/verifyPack';
import { readZipEntries } from '@/server/packs/zipReader';
import { openBench, smallDocument } from '@/tests/helpers/documents';
import { createFuzzWatch, expectNoHang, fuzzCount, mutateBytes } from '@/tests/helpers/fuzz';
import { mutateText, seededRandom } from '@/tests/helpers/mutateDocument';

jest.setTimeout(300_000);
const seed = 20260419;
const zips = fuzzCount(2_000);

let folder: string;
beforeAll(() => (folder = mkdtempSync(path.join(tmpdir(), 'fuzz-'))));
afterAll(() => rmSync(folder, { recursive: true, force: true }));

interface Entry {
  name: string;
  bytes: Uint8Array;
}

/** A zip of stored entries, after APPNOTE 4.3: local headers, central directory, end record; sums and sizes are right. */
function storedZip(entries: readonly Entry[]): Buffer {
  const parts: Buffer[] = [];
  const directory: Buffer[] = [];
  let offset = 0;
  for (const { name, bytes } of entries) {
    const common = Buffer.alloc(26);
    common.writeUInt16LE(20, 0);
    common.writeUInt16LE(0x21, 8); // 1980-01-01
    common.writeUInt32LE(crc32(bytes), 10);
    common.writeUInt32LE(bytes.length, 14);
    common.writeUInt32LE(bytes.length, 18);
    common.writeUInt16LE(name.length, 22);
    const local = Buffer.concat([Buffer.from('PK\x03\x04', 'latin1'), common, Buffer.from(name)]);
    const central = Buffer.alloc(16);
    central.writeUInt32LE(offset, 12);
    directory.push(
      Buffer.concat([
        Buffer.from('PK\x01\x02\x14\x00', 'latin1'),
        common.subarray(0, 26),
        central.subarray(2),
        Buffer.from(name),
      ]),
    );
    parts.push(local, Buffer.from(bytes));
    offset += local.length + bytes.length;
  }
  const list = Buffer.concat(directory);
  const end = Buffer.alloc(22);
  end.write('PK\x05\x06', 'latin1');
  end.writeUInt16LE(entries.length, 8);
  end.writeUInt16LE(entries.length, 10);
  end.writeUInt32LE(list.length, 12);
  end.writeUInt32LE(offset, 16);
  return Buffer.concat([...parts, list, end]);
}

async function entriesOf(file: string): Promise<Entry[]> {
  const bytes = readFileSync(file);
  const handle = await open(file, 'r');
  try {
    const listed = await readZipEntries(handle);
    return listed.map(({ name, offsetBytes, bytes: size }) => ({
      name,
      bytes: bytes.subarray(offsetBytes, offsetBytes + size),
    }));
  } finally {
    await handle.close();
  }
}

test(`${zips} mutated packs, seed ${seed}: each is refused in words, or is the pack it was`, async () => {
  const small = smallDocument({ symbolCount: 2, grid: { rows: [[20, 0, 20, 1, 24, 0]], rowOfSymbol: [0, 0] } });
  const made = await makePack({
    document: small,
    profile: openBench(),
    state: 1,
    tmpFolder: folder,
    outFile: () => path.join(folder, 'whole.zip'),
  });
  if (!made.ok) throw new Error(made.message);
  const whole = readFileSync(path.join(folder, 'whole.zip'));
  const entries = await entriesOf(path.join(folder, 'whole.zip'));
  const file = path.join(folder, 'mutant.zip');

  // a zip of another writer with the same entries is the same pack
  writeFileSync(file, storedZip(entries));
  const plain = await verifyPack(file);
  if (!plain.ok) throw new Error(`${plain.message} ${JSON.stringify(plain.issues)}`);
  const manifest: Manifest = plain.verified.manifest;

  const random = seededRandom(seed);
  const watch = createFuzzWatch(seed);
  let taken = 0;
  for (let at = 0; at < zips; at += 1) {
    let mutant: Uint8Array;
    if (random() < 0.6) mutant = mutateBytes(whole, random);
    else {
      // one entry changed, lost, doubled or moved, with sums that are right
      const changed = [...entries];
      const place = Math.floor(random() * changed.length);
      const { name, bytes } = changed[place]!;
      const way = random();
      if (way < 0.1) changed.splice(place, 1);
      else if (way < 0.2) changed.splice(Math.floor(random() * changed.length), 0, { name, bytes });
      else if (way < 0.3) changed.push(...changed.splice(place, 1));
      else if (/json$|meta$/.test(name) && way < 0.8)
        changed[place] = { name, bytes: Buffer.from(mutateText(Buffer.from(bytes).toString('utf8'), random)) };
      else changed[place] = { name, bytes: mutateBytes(bytes, random) };
      mutant = storedZip(changed);
    }
    writeFileSync(file, mutant);
    await watch.wait(at, async () => {
      const result = await verifyPack(file);
      if (!result.ok) {
        if (
          !/^(invalid|proof_failed|too_large|not_supported_yet|limit_missed)$/.test(result.code) ||
          result.message.length < 8
        )
          throw new Error(JSON.stringify(result));
        return;
      }
      // what was changed then is nothing that a reader takes anything from
      taken += 1;
      const now = await entriesOf(file);
      const isSame =
        now.length === entries.length &&
        entries.every(({ name, bytes }) => {
          const found = now.find((entry) => entry.name === name);
          return found !== undefined && Buffer.from(found.bytes).equals(Buffer.from(bytes));
        });
      if (!isSame || JSON.stringify(result.verified.manifest) !== JSON.stringify(manifest))
        throw new Error('a pack that is not the one that was made');
    });
  }
  expectNoHang(watch);
  expect(taken).toBeLessThan(zips / 5);
});
