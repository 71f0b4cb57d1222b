import { mkdtempSync, readdirSync, rmSync } from 'node:fs';
import os from 'node:os';
import path from 'node:path';
import type { PackDetail, PackJob } from '@/lib/contracts/packs';
import { signInAsInes } from '../../helpers/demoPerson';
import { killSpawned, spawnServer } from '../../helpers/spawnServer';
import { documentOf } from '../../helpers/waveformCalls';

jest.setTimeout(120_000);

let dataDir: string;
beforeEach(() => {
  dataDir = mkdtempSync(path.join(os.tmpdir(), 'combwright-killed-'));
});
afterEach(() => {
  killSpawned();
  rmSync(dataDir, { recursive: true, force: true });
});

test('a server killed while it renders: nothing half is offered, the next start makes the pack anew', async () => {
  const env = { DATA_DIR: dataDir, DEMO: 'yes' };
  const first = spawnServer(env);
  let ask = await signInAsInes(await first.ready);
  const before: { items: unknown[] } = await ask('GET', '/packs');
  // 51 MB of words: long enough to be met at work.
  const long = documentOf('Long', 1, { timing: { mode: 'loop', repeats: 40_000, gapSamples: 0, padSamples: 0 } });
  const waveform: { head: { revisionId: string } } = await ask('POST', '/waveforms', long);
  const { items }: { items: { benchId: string }[] } = await ask('GET', '/benches');
  const asked = { revisionId: waveform.head.revisionId, benchId: items[0]!.benchId };
  let job: PackJob = await ask('POST', '/packs', asked);
  const until = async (isReached: () => boolean) => {
    while (!isReached()) {
      await new Promise((resolve) => setTimeout(resolve, 20));
      job = await ask('GET', `/pack-jobs/${job.jobId}`);
    }
  };
  const hasEnded = () => ['done', 'failed', 'cancelled'].includes(job.state);
  await until(() => job.doneRatio > 0.02 || hasEnded());
  expect(job.state).toBe('running');
  first.process.kill('SIGKILL');
  await first.exitCode;
  expect(readdirSync(path.join(dataDir, 'packs'))).toHaveLength(before.items.length);

  const second = spawnServer(env);
  ask = await signInAsInes(await second.ready);
  job = await ask('GET', `/pack-jobs/${job.jobId}`);
  await until(() => job.startedAgain || hasEnded());
  expect(job.startedAgain).toBe(true);
  await until(hasEnded);
  expect(job).toMatchObject({ state: 'done', problem: null });
  const pack: PackDetail = await ask('GET', `/packs/${job.packId}`);
  expect(pack).toMatchObject({ title: 'Long', state: 'draft' });
  expect(readdirSync(path.join(dataDir, 'tmp'))).toEqual([]);
});
