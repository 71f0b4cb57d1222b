import { spawnSync } from 'node:child_process';
import { mkdirSync, rmSync } from 'node:fs';
import path from 'node:path';
import { buildSync } from 'esbuild';
import type { SaveAnswer } from '@/lib/contracts/waveforms';
import type { KilledSaveOrder } from '../../helpers/killedSave';
import { startTestServer, type Client, type TestServer } from '../../helpers/testServer';
import { create, documentOf, open, saving, show } from '../../helpers/waveformCalls';

// Below node_modules, so that the bundle finds the packages that it leaves outside.
const folder = path.resolve(__dirname, `../../../node_modules/.cache/combwright-killed-${process.pid}`);
const script = path.join(folder, 'killedSave.mjs');

let server: TestServer;
let author: Client;
beforeAll(() => {
  mkdirSync(folder, { recursive: true });
  buildSync({
    entryPoints: ['tests/helpers/killedSave.ts'],
    outfile: script,
    bundle: true,
    platform: 'node',
    format: 'esm',
    target: 'node20',
    packages: 'external',
  });
});
afterAll(() => rmSync(folder, { recursive: true, force: true }));
beforeEach(async () => {
  server = await startTestServer();
  author = await server.as('author');
});
afterEach(() => server.close());

async function killWhileSaving(dieAt: KilledSaveOrder['dieAt']) {
  const { waveformId, head } = await create(author, documentOf('Killed'));
  const parentId = head!.revisionId;
  const key = `killed-${dieAt}`;
  const order: KilledSaveOrder = {
    dbFile: path.join(server.dataDir, 'combwright.db'),
    personId: server.personId('author'),
    waveformId,
    parentId,
    document: documentOf('Killed', 2),
    key,
    dieAt,
  };
  const ended = spawnSync(process.execPath, [script, JSON.stringify(order)], { encoding: 'utf8' });
  expect({ signal: ended.signal, stderr: ended.stderr }).toEqual({ signal: 'SIGKILL', stderr: '' });
  const retry = () => saving(author, waveformId, parentId, documentOf('Killed', 2)).set('Idempotency-Key', key);
  return { waveformId, parentId, retry };
}

const count = (table: string) =>
  (server.store.sqlite.prepare(`select count(*) as n from ${table}`).get() as { n: number }).n;

test('killed within the save: nothing of it is there, and the retry saves', async () => {
  const { waveformId, parentId, retry } = await killWhileSaving('insideTransaction');
  expect([count('revisions'), count('contents'), count('idempotency_keys')]).toEqual([1, 1, 0]);
  expect((await show(author, waveformId)).head!.revisionId).toBe(parentId);
  const saved = (await retry().expect(201)).body as SaveAnswer;
  expect(saved.revision.number).toBe(2);
  expect(server.store.sqlite.pragma('integrity_check', { simple: true })).toBe('ok');
});

test('killed between the save and its answer: it is there whole, and the retry answers it', async () => {
  const { waveformId, retry } = await killWhileSaving('beforeAnswer');
  const { head } = await show(author, waveformId);
  expect(head!.number).toBe(2);
  expect((await open(author, head!.revisionId)).document).toEqual(documentOf('Killed', 2));
  const saved = (await retry().expect(201)).body as SaveAnswer;
  expect(saved.revision.revisionId).toBe(head!.revisionId);
  expect(count('revisions')).toBe(2);
});
