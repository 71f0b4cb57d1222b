import { readdirSync } from 'node:fs';
import path from 'node:path';
import type { PackJob } from '@/lib/contracts/packs';
import { signInAsInes } from '../../helpers/demoPerson';
import { openSmallDisk, type SmallDisk } from '../../helpers/smallDisk';
import { killSpawned, spawnServer } from '../../helpers/spawnServer';
import { documentOf } from '../../helpers/waveformCalls';

jest.setTimeout(60_000);

let disk: SmallDisk;
beforeEach(() => {
  disk = openSmallDisk(200);
});
afterEach(() => {
  killSpawned();
  disk.remove();
});

test('a disk that fills up while a pack is rendered: the job says why, nothing is kept or offered', async () => {
  const dataDir = path.join(disk.folder, 'data');
  const filesIn = (folder: string) => readdirSync(path.join(dataDir, folder));
  const server = spawnServer({ DATA_DIR: dataDir, DEMO: 'yes' }, disk.before);
  const ask = await signInAsInes(await server.ready);
  const before = { packs: filesIn('packs'), list: await ask('GET', '/packs') };

  // 51 MB of words: there is room for them when they are asked for.
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
  await until(() => job.doneRatio > 0.02 || job.state === 'failed');
  disk.fill();
  await until(() => ['done', 'failed', 'cancelled'].includes(job.state));
  expect(job).toMatchObject({
    state: 'failed',
    packId: null,
    problem: { code: 'no_room', detail: 'No room to write. Nothing was kept.' },
  });
  expect(filesIn('tmp')).toEqual([]);
  expect({ packs: filesIn('packs'), list: await ask('GET', '/packs') }).toEqual(before);
});
