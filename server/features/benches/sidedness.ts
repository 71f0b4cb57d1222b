import { mkdtemp, readFile, rm } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import path from 'node:path';
import { sidednessOf } from '@/lib/document/sidedness';
import { deriveFigures, type BenchProfile } from '@/lib/synth';
import { makePack } from '../../packs/makePack.ts';
import { DomainError } from '../../problem.ts';

/** Made while somebody waits, so not the longest ones: those come from the command line. */
const mostSamples = 2 ** 22;

/** A profile's sidedness pack, whole in memory: sixteen samples, or as many of them as the profile's shortest file has. */
export async function sidednessPack(profile: BenchProfile): Promise<{ fileName: string; bytes: Buffer }> {
  const made = sidednessOf(profile);
  if (!made.ok)
    throw new DomainError('limit_missed', {
      detail: made.issue.message,
      issues: [{ ...made.issue, code: 'limit_missed' }],
    });
  const { document } = made.value;
  if (deriveFigures(document.content).fileSamples > mostSamples)
    throw new DomainError('too_large', 'This profile’s shortest file is too long to wait for: use the command line.');
  const folder = await mkdtemp(path.join(tmpdir(), 'combwright-sidedness-'));
  try {
    const file = path.join(folder, 'pack.zip');
    const result = await makePack({ document, profile, state: 'draft', tmpFolder: folder, outFile: () => file });
    if (!result.ok) {
      if (result.code !== 'limit_missed') throw new Error(result.message);
      const issues = result.issues.map(({ pointer, message }) => ({ pointer, message, code: 'limit_missed' }));
      throw new DomainError('limit_missed', { detail: result.message, issues });
    }
    return { fileName: result.pack.fileName, bytes: await readFile(file) };
  } finally {
    await rm(folder, { recursive: true, force: true });
  }
}
