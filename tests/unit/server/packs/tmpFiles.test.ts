import { spawnSync } from 'node:child_process';
import { existsSync, mkdirSync, mkdtempSync, readdirSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import path from 'node:path';
import { makeWorkFolder, publishFile, sweepWorkFolders } from '@/server/packs/tmpFiles';

let folder: string;
beforeEach(() => (folder = mkdtempSync(path.join(tmpdir(), 'work-'))));
afterEach(() => rmSync(folder, { recursive: true, force: true }));

test('only what a dead process of this host left is swept', async () => {
  const own = await makeWorkFolder(folder);
  const ended = spawnSync('true').pid;
  const left = own.replace(`-${process.pid}-`, `-${ended}-`);
  mkdirSync(left);
  writeFileSync(path.join(left, 'vector'), 'x');
  const otherHost = path.join(folder, `.combwright-part-00000000-${ended}-0123456789ab`);
  mkdirSync(otherHost);
  mkdirSync(path.join(folder, 'mine'));
  expect(await sweepWorkFolders(folder)).toBe(1);
  expect(readdirSync(folder).sort()).toEqual([path.basename(otherHost), path.basename(own), 'mine'].sort());
  expect(await sweepWorkFolders(folder, { all: true })).toBe(1);
  expect(existsSync(own)).toBe(false);
  expect(await sweepWorkFolders(path.join(folder, 'not there'))).toBe(0);
});

test('a file is published under its name at once', async () => {
  writeFileSync(path.join(folder, 'part'), 'whole');
  await publishFile(path.join(folder, 'part'), path.join(folder, 'final'));
  expect(readdirSync(folder)).toEqual(['final']);
});
