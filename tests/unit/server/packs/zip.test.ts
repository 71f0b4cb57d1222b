import { execFileSync } from 'node:child_process';
import { mkdtempSync, readFileSync, rmSync, writeFileSync } from 'node:fs';
import { open } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import path from 'node:path';
import { crc32 } from 'node:zlib';
import { readSmallEntry, readZipEntries } from '@/server/packs/zipReader';
import { writeZip } from '@/server/packs/zipWriter';

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

async function writeSample(name: string): Promise<string> {
  const large = path.join(folder, 'large.bin');
  writeFileSync(large, Buffer.alloc(3_000_001, 7));
  const file = path.join(folder, name);
  await writeZip(file, [
    { name: 'z-first.bin', from: large },
    { name: 'a-second.txt', from: () => [Buffer.from('sec'), Buffer.from('ond')] },
    { name: 'empty.bin', from: () => [] },
  ]);
  return file;
}

test('entries are stored in the given order and equal inputs give equal bytes', async () => {
  const first = await writeSample('one.zip');
  const bytes = readFileSync(first);
  rmSync(path.join(folder, 'large.bin'));
  const second = await writeSample('two.zip');
  expect(readFileSync(second).equals(bytes)).toBe(true);
  const entries = await listOf(first);
  expect(entries.map((e) => [e.name, e.bytes])).toEqual([
    ['z-first.bin', 3_000_001],
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
    ['a-second.txt', midnight, 0],
    ['empty.bin', midnight, 0],
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

test('an entry is made when it is its turn, and one that fails ends the writing', async () => {
  const made: string[] = [];
  function* chunks(name: string) {
    made.push(name);
    yield Buffer.from(name);
  }
  function* entries() {
    yield { name: 'a.bin', from: () => chunks('a') };
    made.push('between');
    yield { name: 'b.bin', from: () => chunks('b') };
  }
  await writeZip(path.join(folder, 'x.zip'), entries());
  expect(made).toEqual(['a', 'between', 'b']);
  function* failing(): Generator<Uint8Array> {
    throw new Error('not today');
  }
  await expect(writeZip(path.join(folder, 'y.zip'), [{ name: 'a.bin', from: failing }])).rejects.toThrow('not today');
});

test('a cancel ends the writing', async () => {
  const large = path.join(folder, 'large.bin');
  writeFileSync(large, Buffer.alloc(30_000_000));
  const stop = new AbortController();
  const writing = writeZip(path.join(folder, 'x.zip'), [{ name: 'large.bin', from: large }], {
    signal: stop.signal,
    onBytes: (bytes) => bytes > 0 && stop.abort(),
  });
  await expect(writing).rejects.toMatchObject({ code: 'ABORT_ERR' });
});
