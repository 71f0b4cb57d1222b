import { createHash, randomBytes } from 'node:crypto';
import { mkdir, open, readdir, rename, rm } from 'node:fs/promises';
import { hostname } from 'node:os';
import path from 'node:path';

const hostMark = createHash('sha256').update(hostname()).digest('hex').slice(0, 8);
const prefix = '.combwright-part-';
const namePattern = new RegExp(`^\\${prefix}${hostMark}-(\\d+)-[0-9a-f]{12}$`);

/** A folder of one rendering. Its name carries host and process, so that the next start knows what a killed one left. */
export async function makeWorkFolder(inFolder: string): Promise<string> {
  const folder = path.join(inFolder, `${prefix}${hostMark}-${process.pid}-${randomBytes(6).toString('hex')}`);
  await mkdir(folder, { mode: 0o700 });
  return folder;
}

export async function removeWorkFolder(folder: string): Promise<void> {
  await rm(folder, { recursive: true, force: true, maxRetries: 3 });
}

function isRunning(pid: number): boolean {
  try {
    process.kill(pid, 0); // signal 0 only asks
    return true;
  } catch (error) {
    return (error as NodeJS.ErrnoException).code === 'EPERM';
  }
}

/**
 * Removes the folders that killed processes of this host left behind. `all` also takes those of living process ids: for a
 * folder that one process owns by a lock, where a number may since belong to somebody else.
 */
export async function sweepWorkFolders(inFolder: string, options: { all?: boolean } = {}): Promise<number> {
  let swept = 0;
  for (const name of await readdir(inFolder).catch(() => [])) {
    const match = namePattern.exec(name);
    if (!match) continue;
    if (!options.all && isRunning(Number(match[1]))) continue;
    await removeWorkFolder(path.join(inFolder, name));
    swept += 1;
  }
  return swept;
}

/** Moves a finished, flushed file to its name in one step, and flushes the folder so that the name survives a power cut. */
export async function publishFile(from: string, to: string): Promise<void> {
  await rename(from, to);
  const folder = await open(path.dirname(to), 'r');
  try {
    await folder.sync();
  } finally {
    await folder.close();
  }
}
