import { packs } from '@/db/schema/packs';
import type { Bench, BenchItem } from '@/lib/contracts/benches';
import { profileFileDigest } from '@/lib/document/digest';
import type { BenchContent } from '@/lib/synth/index';
import { openBench } from '../../helpers/documents';
import { startTestServer, type Client, type TestServer } from '../../helpers/testServer';
import { createReleased, documentOf } from '../../helpers/waveformCalls';

let server: TestServer;
let admin: Client;
beforeEach(async () => {
  server = await startTestServer();
  admin = await server.as('admin');
});
afterEach(() => server.close());

const named = (name: string, overrides: Partial<BenchContent> = {}) => {
  const profile = openBench(overrides);
  return { ...profile, about: { ...profile.about, name } };
};

const create = async (name: string, overrides: Partial<BenchContent> = {}) =>
  (await admin.post('/api/v1/benches', named(name, overrides)).expect(201)).body as Bench;

const saving = (benchId: string, afterVersion: number, profile: object) =>
  admin.post(`/api/v1/benches/${benchId}/versions?afterVersion=${afterVersion}`, profile);

test('an admin makes a bench profile; everybody with a role reads it', async () => {
  const bench = await create('Bench B');
  expect(bench).toMatchObject({ name: 'Bench B', shown: { version: 1 }, warnings: [] });
  expect(bench.shown.profile).toEqual(named('Bench B'));
  await create('Bench A');
  for (const key of ['author', 'reviewer', 'operator', 'admin'] as const) {
    const client = await server.as(key);
    const list = (await client.get('/api/v1/benches').expect(200)).body.items as BenchItem[];
    expect(list.map((item) => item.name)).toEqual(['Bench A', 'Bench B']);
    await client.get(`/api/v1/benches/${bench.benchId}`).expect(200);
  }
});

test('each save is the next version; the ones before stay as they were', async () => {
  const bench = await create('Bench B');
  server.clock.advance(5000);
  const second = await saving(
    bench.benchId,
    1,
    named('Bench B2', { granularitySamples: 8, leastSamples: 8, mostSamples: 8e8 }),
  );
  expect(second.status).toBe(201);
  expect(second.body).toMatchObject({ name: 'Bench B2', shown: { version: 2 } });
  expect(second.body.versions.map((v: { version: number }) => v.version)).toEqual([2, 1]);
  expect(second.body.versions[0]).toMatchObject({ savedAtMs: server.clock.nowMs(), savedBy: { name: 'Alan Admin' } });
  const first = await admin.get(`/api/v1/benches/${bench.benchId}?version=1`).expect(200);
  expect(first.body).toMatchObject({ name: 'Bench B2', shown: { version: 1, profile: named('Bench B') } });
  expect(first.body.versions[1].profileDigest).toBe(profileFileDigest(named('Bench B')));
  await admin.get(`/api/v1/benches/${bench.benchId}?version=3`).expect(404);
});

test('an equal profile adds no version, a save after an old version is refused', async () => {
  const bench = await create('Bench B');
  const equal = await saving(bench.benchId, 1, named('Bench B')).expect(201);
  expect(equal.body.versions).toHaveLength(1);
  await saving(bench.benchId, 1, named('Bench B', { leastHeadroomDb: 1 })).expect(201);
  const late = await saving(bench.benchId, 1, named('Bench B', { leastHeadroomDb: 2 })).expect(409);
  expect(late.body).toMatchObject({ code: 'stale_revision', facts: { newest: { version: 2 } } });
});

test('a retry with the same key makes nothing twice', async () => {
  const send = () => admin.post('/api/v1/benches', named('Once')).set('Idempotency-Key', 'bench-once');
  const first = await send().expect(201);
  expect((await send().expect(201)).body.benchId).toBe(first.body.benchId);
  const next = () =>
    saving(first.body.benchId, 1, named('Once', { leastHeadroomDb: 1 })).set('Idempotency-Key', 'version-2');
  await next().expect(201);
  expect((await next().expect(201)).body.versions).toHaveLength(2);
});

test('a contradiction is saved and said; a wrong value is refused', async () => {
  const bench = await create('Odd', { granularitySamples: 4096, leastSamples: 5000, mostSamples: 409600 });
  expect(bench.warnings).toEqual([
    { pointer: '/content/leastSamples', message: 'Not a multiple of 4096: nothing that short loads.', use: 8192 },
  ]);
  const refused = await admin.post('/api/v1/benches', named('Wrong', { bits: 7 })).expect(422);
  expect(refused.body.issues[0].pointer).toBe('/content/bits');
});

test('a layout that no file can have is refused, each contradiction at its field', async () => {
  const body = openBench({ layout: 'split', container: 'wav', byteOrder: 'big' });
  const refused = (await admin.post('/api/v1/benches', body).expect(422)).body as { issues: { pointer: string }[] };
  expect(refused.issues.map(({ pointer }) => pointer)).toEqual(['/content/layout', '/content/byteOrder']);
});

test('the sidedness pack of a profile, in its layout', async () => {
  const swapped = await create('Swapped', { swapIq: true, layout: 'split', leastSamples: 64 });
  const answer = await admin
    .get(`/api/v1/benches/${swapped.benchId}/sidedness`)
    .responseType('blob')
    .expect(200)
    .expect('content-type', 'application/zip');
  expect(answer.headers['content-disposition']).toMatch(/^attachment; filename="sidedness-[a-z0-9-]+\.zip"$/);
  const text = (answer.body as Buffer).toString('latin1');
  expect(text).toContain('On an analyser the tone stands 2 MHz above the carrier.');
  expect(text).toContain('Sidedness check of a bench profile, no released waveform.');
  expect(text).not.toContain('Draft, not for the bench.');
  const short = await create('Short', { mostSamples: 15 });
  const refused = await admin.get(`/api/v1/benches/${short.benchId}/sidedness`).expect(422);
  expect(refused.body).toMatchObject({ code: 'limit_missed', issues: [{ pointer: '/content/mostSamples' }] });
});

test('a version counts the packs that were made for it', async () => {
  const bench = await create('Counted');
  const { revisionId } = await createReleased(
    await server.as('author'),
    await server.as('reviewer'),
    documentOf('Packed'),
  );
  const version = server.store.sqlite.prepare('select id from bench_profile_versions').get() as { id: string };
  server.store.write((tx) =>
    tx
      .insert(packs)
      .values({
        id: server.deps.newId(),
        packKey: 'aa',
        revisionId,
        profileVersionId: version.id,
        fileName: 'packed.zip',
        storedPath: 'packs/aa.zip',
        fileBytes: 1,
        fileSha256: 'bb',
        vectorSha256: 'cc',
        manifestJson: '{}',
        madeBy: server.personId('author'),
        madeAtMs: server.clock.nowMs(),
      })
      .run(),
  );
  await saving(bench.benchId, 1, named('Counted', { leastHeadroomDb: 1 })).expect(201);
  const shown = await admin.get(`/api/v1/benches/${bench.benchId}`).expect(200);
  expect(shown.body.versions.map((v: { packCount: number }) => v.packCount)).toEqual([0, 1]);
});

test('each version stands in the audit', async () => {
  const bench = await create('Audited');
  await saving(bench.benchId, 1, named('Audited', { leastHeadroomDb: 1 })).expect(201);
  const rows = server.store.sqlite
    .prepare("select act, object_label as label from audit where object_kind = 'bench'")
    .all();
  expect(rows).toEqual([
    { act: 'bench.created', label: 'Audited, version 1' },
    { act: 'bench.saved', label: 'Audited, version 2' },
  ]);
});
