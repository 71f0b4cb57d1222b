import { execFileSync } from 'node:child_process';
import { createWriteStream, mkdtempSync, readFileSync, rmSync, writeFileSync } from 'node:fs';
import { open } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import path from 'node:path';
import { pipeline } from 'node:stream/promises';
import { crc32 } from 'node:zlib';
import { ZipArchive } from 'archiver';
import { createZipFile, writeAll, type ZipFile } from '@/server/packs/zipFile';
import { readSmallEntry, readZipEntries } from '@/server/packs/zipReader';

let folder: string;
beforeEach(() => (folder = mkdtempSync(path.join(tmpdir(), 'zip-'))));
afterEach(() => rmSync(folder, { recursive: true, force: true }));

async function listOf(file: string) {
  const handle = await open(file, 'r');
  try {
    return await readZipEntries(handle);
  } finally {
    await handle.close();
  }
}

async function withZip(name: string, write: (zip: ZipFile) => Promise<void>): Promise<string> {
  const file = path.join(folder, name);
  const zip = await createZipFile(file);
  try {
    await write(zip);
    expect(await zip.finish()).toBe(readFileSync(file).length);
  } finally {
    await zip.close();
  }
  return file;
}

const large = Buffer.alloc(3_000_001, 7);

/** Two rooms whose bytes are there before their names, the second one's first; and two entries written in one go. */
const writeSample = (name: string): Promise<string> =>
  withZip(name, async (zip) => {
    const first = zip.reserve('z-first.bin'.length, large.length);
    const other = zip.reserve('other.bin'.length, 5);
    await writeAll(other.handle, Buffer.from('other'), other.offsetBytes);
    await writeAll(first.handle, large.subarray(1000), first.offsetBytes + 1000);
    await writeAll(first.handle, large.subarray(0, 1000), first.offsetBytes);
    await zip.settle(other, 'other.bin', crc32('other'));
    await zip.settle(first, 'z-first.bin', crc32(large));
    await zip.append('a-second.txt', [Buffer.from('sec'), Buffer.from('ond')]);
    await zip.append('empty.bin', [], { isLarge: true });
  });

test('entries are stored in the given order and equal inputs give equal bytes', async () => {
  const first = await writeSample('one.zip');
  const bytes = readFileSync(first);
  const second = await writeSample('two.zip');
  expect(readFileSync(second).equals(bytes)).toBe(true);
  const entries = await listOf(first);
  expect(entries.map((e) => [e.name, e.bytes])).toEqual([
    ['z-first.bin', 3_000_001],
    ['other.bin', 5],
    ['a-second.txt', 6],
    ['empty.bin', 0],
  ]);
  for (const entry of entries)
    expect(crc32(bytes.subarray(entry.offsetBytes, entry.offsetBytes + entry.bytes))).toBe(entry.crc32);
});

test('unzip and Python read it, with the date 1980-01-01', async () => {
  const file = await writeSample('one.zip');
  expect(execFileSync('unzip', ['-t', file], { encoding: 'utf8' })).toContain('No errors detected');
  const script = `import json, sys, zipfile
z = zipfile.ZipFile(sys.argv[1])
print(json.dumps([z.testzip(), [[i.filename, i.date_time, i.compress_type] for i in z.infolist()]]))`;
  const [bad, listed] = JSON.parse(execFileSync('/usr/bin/python3', ['-c', script, file], { encoding: 'utf8' })) as [
    null,
    unknown[],
  ];
  expect(bad).toBeNull();
  const midnight = [1980, 1, 1, 0, 0, 0];
  expect(listed).toEqual([
    ['z-first.bin', midnight, 0],
    ['other.bin', midnight, 0],
    ['a-second.txt', midnight, 0],
    ['empty.bin', midnight, 0],
  ]);
});

test('entries of 4 GiB and more, and those behind them, are found by Python and by our reader', async () => {
  // a file with a hole: nothing of the large entry is on the disk
  const file = path.join(folder, 'far.zip');
  const zip = await createZipFile(file);
  const huge = 2 ** 32 + 10;
  const room = zip.reserve('huge.bin'.length, huge);
  await writeAll(room.handle, Buffer.from('end'), room.offsetBytes + huge - 3);
  await zip.settle(room, 'huge.bin', 1);
  await zip.append('behind.txt', [Buffer.from('behind')]);
  await zip.finish();
  await zip.close();
  const script = `import json, sys, zipfile
z = zipfile.ZipFile(sys.argv[1])
print(json.dumps([[i.filename, i.file_size] for i in z.infolist()] + [z.read('behind.txt').decode()]))`;
  const listed = [['huge.bin', huge], ['behind.txt', 6], 'behind'];
  expect(JSON.parse(execFileSync('/usr/bin/python3', ['-c', script, file], { encoding: 'utf8' }))).toEqual(listed);
  expect((await listOf(file)).map((e) => [e.name, e.bytes])).toEqual(listed.slice(0, 2));
});

test('a name of another length, an entry without one, or one larger than said are mistakes', async () => {
  const zip = await createZipFile(path.join(folder, 'x.zip'));
  const room = zip.reserve(5, 0);
  await expect(zip.settle(room, 'longer', 0)).rejects.toThrow('another name');
  await expect(zip.finish()).rejects.toThrow('has no name yet');
  await zip.settle(room, 'a.bin', 0);
  await expect(zip.settle(room, 'a.bin', 0)).rejects.toThrow('another name');
  await zip.finish();
  await zip.close();
});

test('reads what a library writes', async () => {
  const file = path.join(folder, 'library.zip');
  const archive = new ZipArchive({ store: true });
  const written = pipeline(archive, createWriteStream(file));
  archive.append(Buffer.from('hello'), { name: 'a.bin' });
  archive.append(Buffer.from('there'), { name: 'b.bin' });
  await Promise.all([archive.finalize(), written]);
  expect((await listOf(file)).map((e) => [e.name, e.bytes])).toEqual([
    ['a.bin', 5],
    ['b.bin', 5],
  ]);
});

test('reads a ZIP64 archive that another program wrote', async () => {
  const file = path.join(folder, 'big.zip');
  const script = `import sys, zipfile
z = zipfile.ZipFile(sys.argv[1], 'w', zipfile.ZIP_STORED)
with z.open(zipfile.ZipInfo('a.bin'), 'w', force_zip64=True) as f: f.write(b'hello')
z.close()`;
  execFileSync('/usr/bin/python3', ['-c', script, file]);
  const handle = await open(file, 'r');
  const entries = await readZipEntries(handle);
  expect((await readSmallEntry(handle, entries[0]!, 100)).toString()).toBe('hello');
  await expect(readSmallEntry(handle, entries[0]!, 4)).rejects.toThrow('a.bin is too large');
  await handle.close();
});

test('refuses what a pack never is, in words', async () => {
  const file = path.join(folder, 'bad.zip');
  const refused = async (bytes: Uint8Array) => {
    writeFileSync(file, bytes);
    return listOf(file).then(
      () => 'taken',
      (error: Error) => error.message,
    );
  };
  expect(await refused(new Uint8Array(3))).toBe('This is not a pack: it is too short for a zip.');
  expect(await refused(new Uint8Array(500))).toBe('This is not a pack: its end record is missing.');
  const good = readFileSync(await writeSample('good.zip'));
  expect(await refused(good)).toBe('taken');
  expect(await refused(good.subarray(0, good.length - 30))).toContain('This is not a pack');
  const script = `import sys, zipfile
kind, name = sys.argv[2], sys.argv[3]
z = zipfile.ZipFile(sys.argv[1], 'w', zipfile.ZIP_DEFLATED if kind == 'deflated' else zipfile.ZIP_STORED)
z.writestr(name, b'x' * 100)
z.close()`;
  for (const [kind, name, words] of [
    ['deflated', 'a.bin', 'a.bin is not stored'],
    ['stored', '../a.bin', 'a name that packs never use'],
    ['stored', '/etc/x', 'a name that packs never use'],
  ] as const) {
    execFileSync('/usr/bin/python3', ['-c', script, file, kind, name]);
    expect(await refused(readFileSync(file))).toContain(words);
  }
  // Each byte of the directory changed: refused or read, never a hang or another kind of error.
  for (let at = good.length - 22 - 180; at < good.length; at++) {
    const changed = Buffer.from(good);
    changed[at] = changed[at]! ^ 0xff;
    const answer = await refused(changed);
    expect(answer === 'taken' || answer.startsWith('This is not a pack')).toBe(true);
  }
});

test('a cancel ends the writing between two chunks', async () => {
  const stop = new AbortController();
  function* chunks() {
    yield Buffer.from('one');
    stop.abort();
    yield Buffer.from('two');
  }
  const zip = await createZipFile(path.join(folder, 'x.zip'));
  await expect(zip.append('a.bin', chunks(), { signal: stop.signal })).rejects.toMatchObject({ code: 'cancelled' });
  await zip.close();
});
