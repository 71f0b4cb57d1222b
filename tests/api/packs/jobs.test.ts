import { createHash } from 'node:crypto';
import { existsSync, mkdirSync, readdirSync, readFileSync, rmSync } from 'node:fs';
import path from 'node:path';
import { eq } from 'drizzle-orm';
import { packJobs, packs } from '@/db/schema/packs';
import type { PackJob } from '@/lib/contracts/packs';
import { createPackJobs } from '@/server/packs/jobs';
import { createRenderThread } from '@/server/packs/renderThread';
import { createPacksService } from '@/server/features/packs/service';
import { verifyPack } from '@/server/packs/verifyPack';
import { openBench } from '../../helpers/documents';
import { asking, createBench, makePack, showJob, showPack, untilJob } from '../../helpers/packCalls';
import { startTestServer, type Client, type TestServer, type TestServerOptions } from '../../helpers/testServer';
import { create, createReleased, documentOf, save, withdrawing } from '../../helpers/waveformCalls';

jest.setTimeout(60_000);

let server: TestServer;
let author: Client;
let reviewer: Client;
let operator: Client;
let admin: Client;
let benchId: string;

async function start(options?: TestServerOptions): Promise<void> {
  server = await startTestServer(options);
  author = await server.as('author');
  reviewer = await server.as('reviewer');
  operator = await server.as('operator');
  admin = await server.as('admin');
  benchId = (await createBench(admin, openBench())).benchId;
}
beforeEach(() => start());
afterEach(() => server.close());

/** Long enough to be caught at work: 51 MB. */
const long = (title: string) =>
  documentOf(title, 1, { timing: { mode: 'loop', repeats: 40_000, gapSamples: 0, padSamples: 0 } });
const isRendering = (job: PackJob) => job.state === 'running' && job.doneRatio > 0.02;
const workFolders = () => readdirSync(path.join(server.dataDir, 'tmp'));

test("an operator makes an edition's pack; what is stored is proven and named by its digests", async () => {
  const { revisionId } = await createReleased(author, reviewer, documentOf('PA ladder 20 MHz'));
  const pack = await makePack(operator, revisionId, benchId);
  expect(pack).toMatchObject({ title: 'PA ladder 20 MHz', state: 'released', editionNumber: 1, samples: 320 });
  expect(pack.fileName).toBe(`pa-ladder-20-mhz-e1-${pack.vectorDigest.slice(7, 15)}.zip`);
  expect(pack.evmDb).toBeLessThan(-80);
  expect(pack.cautions.map((point) => point.number)).toEqual([1, 2, 3, 4, 5, 6, 7, 8, 9, 10, 11]);
  expect(pack.cautions[9]!.text).toContain('Released, edition 1');
  expect(pack.cautions[9]!.text).toContain('Card fetched 2031-05-06 09:00 UTC');
  const [stored] = readdirSync(path.join(server.dataDir, 'packs'));
  const file = path.join(server.dataDir, 'packs', stored!);
  const digest = createHash('sha256').update(readFileSync(file)).digest('hex');
  expect(pack.fileDigest).toBe(`sha256:${digest}`);
  const verified = await verifyPack(file);
  expect(verified).toMatchObject({
    ok: true,
    verified: { madeAgain: true, manifest: { state: 'released', edition: 1 } },
  });
  expect(workFolders()).toEqual([]);
});

test("a draft's pack is its author's: made, listed, shown and fetched by nobody else", async () => {
  const { head } = await create(author, documentOf('Draft'));
  const revisionId = head!.revisionId;
  const pack = await makePack(author, revisionId, benchId);
  expect(pack).toMatchObject({ state: 'draft', editionNumber: null });
  expect(pack.fileName).toContain('-draft-');
  expect((pack.manifest.safety as string[])[0]).toBe('Draft, not for the bench.');
  const otherAuthor = await server.as('otherAuthor');
  expect((await asking(otherAuthor, revisionId, benchId).expect(403)).body).toMatchObject({
    code: 'action_forbidden',
    detail: expect.stringMatching(/^Only .+ may make a pack of this draft\.$/),
  });
  expect((await asking(reviewer, revisionId, benchId).expect(403)).body.code).toBe('action_forbidden');
  expect((await asking(operator, revisionId, benchId).expect(404)).body.code).toBe('not_found');
  for (const stranger of [otherAuthor, reviewer, operator, admin]) {
    await stranger.get(`/api/v1/packs/${pack.packId}`).expect(404);
    await stranger.get(`/api/v1/packs/${pack.packId}/file`).expect(404);
    expect((await stranger.get('/api/v1/packs').expect(200)).body.items).toEqual([]);
  }
  expect((await author.get('/api/v1/packs').expect(200)).body.items).toHaveLength(1);
});

test('an edition of the same content and its draft are two packs; equal inputs are rendered once', async () => {
  const document = documentOf('Twin');
  const first = await create(author, document);
  const second = await create(author, document);
  const one = await makePack(author, first.head!.revisionId, benchId);
  const asked = (await asking(author, second.head!.revisionId, benchId).expect(202)).body as PackJob;
  expect(asked.state).toBe('done'); // at once
  const two = await showPack(author, asked.packId!);
  expect(two.packId).not.toBe(one.packId);
  expect(two.fileDigest).toBe(one.fileDigest);
  expect(readdirSync(path.join(server.dataDir, 'packs'))).toHaveLength(1);
  // Asked again, it is the same row; with its file lost, it is made again and is the same.
  expect((await asking(author, first.head!.revisionId, benchId).expect(202)).body.packId).toBe(one.packId);
  rmSync(path.join(server.dataDir, 'packs'), { recursive: true });
  mkdirSync(path.join(server.dataDir, 'packs'));
  await author.get(`/api/v1/packs/${one.packId}/file`).expect(404);
  const again = await makePack(author, first.head!.revisionId, benchId);
  expect([again.packId, again.fileDigest]).toEqual([one.packId, one.fileDigest]);
  await author.get(`/api/v1/packs/${one.packId}/file`).expect(200);
});

test('a hard limit is refused before anything is rendered, in the words of the fit', async () => {
  const { head } = await create(author, documentOf('Limits'));
  const refuse = async (profile: ReturnType<typeof openBench>) => {
    const bench = await createBench(admin, profile);
    return (await asking(author, head!.revisionId, bench.benchId).expect(422)).body as {
      code: string;
      detail: string;
      issues: { pointer: string; message: string }[];
    };
  };
  const short = await refuse(openBench({ granularitySamples: 4096, leastSamples: 4096 }));
  expect(short.code).toBe('limit_missed');
  expect(short.detail).toContain('granularity of 4096');
  expect(short.issues.map((issue) => issue.pointer)).toContain('/content/granularitySamples');
  expect((await refuse(openBench({ modes: ['burst'] }))).detail).toContain(
    'The waveform is a loop; this bench plays burst.',
  );
  expect(server.store.db.select().from(packJobs).all()).toEqual([]);
});

test('too large, no room, too many: each is said before it starts', async () => {
  await server.close();
  await start({ config: { packBytesMost: 5_000_000 } });
  const { head } = await create(author, long('Large'));
  expect((await asking(author, head!.revisionId, benchId).expect(413)).body).toMatchObject({
    code: 'too_large',
    detail: expect.stringContaining('the limit here is 5.0 MB'),
  });
  const jobs = createPackJobs(server.deps, createRenderThread(server.deps.config.buildDir));
  const poor = createPacksService(server.deps, jobs, () => Promise.resolve(1_000_000));
  const small = await create(author, documentOf('Small'));
  const ask = { revisionId: small.head!.revisionId, benchId };
  await expect(poor.make(server.actor('author'), ask, { requestId: null, idempotencyKey: null })).rejects.toMatchObject(
    {
      code: 'no_room',
      message: expect.stringContaining('1.0 MB are free'),
    },
  );
});

test('at most three of a person wait; a cancelled one gives its place free', async () => {
  const { waveformId, head } = await create(author, long('Waits 0'));
  const running = (await asking(author, head!.revisionId, benchId).expect(202)).body as PackJob;
  await untilJob(author, running.jobId, isRendering);
  const waiting: PackJob[] = [];
  let parentId = head!.revisionId;
  for (let i = 1; i <= 4; i++) {
    parentId = (await save(author, waveformId, parentId, long(`Waits ${i}`))).revision.revisionId;
    const answer = await asking(author, parentId, benchId);
    if (i <= 3) waiting.push(answer.body as PackJob);
    else expect(answer.body).toMatchObject({ code: 'too_many' });
  }
  // Asked twice is asked once.
  expect((await asking(author, waiting[0]!.revisionId, benchId).expect(202)).body.jobId).toBe(waiting[0]!.jobId);
  expect(await showJob(author, waiting[1]!.jobId)).toMatchObject({ state: 'waiting', step: null });
  for (const { jobId } of [...waiting, running]) await author.post(`/api/v1/pack-jobs/${jobId}/cancel`).expect(200);
  for (const { jobId } of [...waiting, running]) {
    const job = await untilJob(author, jobId);
    expect(job).toMatchObject({
      state: 'cancelled',
      packId: null,
      problem: { code: 'cancelled', detail: 'Cancelled. Nothing was kept.' },
    });
  }
  expect(readdirSync(path.join(server.dataDir, 'packs'))).toEqual([]);
  expect(workFolders()).toEqual([]);
});

test('others may neither see nor cancel a job of a draft; an admin may cancel what an edition waits for', async () => {
  const draft = await create(author, long('Mine'));
  const mine = (await asking(author, draft.head!.revisionId, benchId).expect(202)).body as PackJob;
  await operator.get(`/api/v1/pack-jobs/${mine.jobId}`).expect(404);
  await admin.post(`/api/v1/pack-jobs/${mine.jobId}/cancel`).expect(404);
  expect((await operator.get('/api/v1/pack-jobs').expect(200)).body.items).toEqual([]);
  await author.post(`/api/v1/pack-jobs/${mine.jobId}/cancel`).expect(200);
  const { revisionId } = await createReleased(author, reviewer, long('Ours'));
  const ours = (await asking(operator, revisionId, benchId).expect(202)).body as PackJob;
  expect((await reviewer.get('/api/v1/pack-jobs').expect(200)).body.items).toHaveLength(1);
  expect((await reviewer.post(`/api/v1/pack-jobs/${ours.jobId}/cancel`).expect(403)).body.code).toBe(
    'action_forbidden',
  );
  await admin.post(`/api/v1/pack-jobs/${ours.jobId}/cancel`).expect(200);
  expect((await untilJob(operator, ours.jobId)).state).toBe('cancelled');
});

test('a retry with the same key is the same job', async () => {
  const { head } = await create(author, documentOf('Key'));
  const body = { revisionId: head!.revisionId, benchId };
  const once = (await author.post('/api/v1/packs', body).set('Idempotency-Key', 'key-00001').expect(202))
    .body as PackJob;
  await untilJob(author, once.jobId);
  const twice = (await author.post('/api/v1/packs', body).set('Idempotency-Key', 'key-00001').expect(202))
    .body as PackJob;
  expect(twice.jobId).toBe(once.jobId);
  expect(server.store.db.select().from(packJobs).all()).toHaveLength(1);
});

test('an edition that is withdrawn gets no pack, and one that was being made is not made known', async () => {
  const { waveformId, revisionId } = await createReleased(author, reviewer, long('Gone'));
  const job = (await asking(operator, revisionId, benchId).expect(202)).body as PackJob;
  await untilJob(operator, job.jobId, isRendering);
  await withdrawing(reviewer, waveformId, 1, 'It splatters.').expect(200);
  expect(await untilJob(operator, job.jobId)).toMatchObject({
    state: 'failed',
    problem: { code: 'edition_withdrawn', detail: 'Edition 1 was withdrawn: It splatters.' },
  });
  expect(server.store.db.select().from(packs).all()).toEqual([]);
  expect((await asking(operator, revisionId, benchId).expect(409)).body).toMatchObject({
    code: 'edition_withdrawn',
    detail: 'Edition 1 was withdrawn: It splatters.',
  });
});

test('a stop of the server keeps a job for the next start; a killed one starts anew once, then says it failed', async () => {
  const { head } = await create(author, long('Stop'));
  const job = (await asking(author, head!.revisionId, benchId).expect(202)).body as PackJob;
  await untilJob(author, job.jobId, isRendering);
  const stored = () => server.store.db.select().from(packJobs).where(eq(packJobs.id, job.jobId)).get();
  await server.lifecycle.stop();
  expect(stored()).toMatchObject({ state: 'waiting', starts: 0 });
  expect(workFolders()).toEqual([]);

  const restart = () => {
    const lifecycle = { isStopping: false, onStop: () => undefined, requestStop: () => undefined };
    return createPackJobs({ ...server.deps, lifecycle }, createRenderThread(server.deps.config.buildDir));
  };
  // What a killed server leaves: a row that says running, and its work folder.
  const left = path.join(server.dataDir, 'tmp', workFolderName());
  server.store.write((tx) => tx.update(packJobs).set({ state: 'running', starts: 1 }).run());
  mkdirSync(left);
  await restart().settled();
  expect(stored()).toMatchObject({ state: 'done', starts: 2 });
  expect(existsSync(left)).toBe(false);

  server.store.write((tx) => tx.update(packJobs).set({ state: 'running', starts: 2, packId: null }).run());
  await restart().settled();
  expect(stored()).toMatchObject({ state: 'failed', problemDetail: expect.stringContaining('broken off twice') });
});

function workFolderName(): string {
  const mark = createHash('sha256')
    .update(jest.requireActual<typeof import('node:os')>('node:os').hostname())
    .digest('hex');
  return `.combwright-part-${mark.slice(0, 8)}-999999-0123456789ab`;
}

test('a thread that ends without an answer fails the job, and the next one is made', async () => {
  const { head } = await create(author, documentOf('Thread'));
  let calls = 0;
  const rendering = createRenderThread(server.deps.config.buildDir);
  const flaky = createPackJobs(server.deps, {
    render: (...of) =>
      calls++ === 0 ? Promise.reject(new Error('out of memory at /secret')) : rendering.render(...of),
  });
  const service = createPacksService(server.deps, flaky);
  const ask = { revisionId: head!.revisionId, benchId };
  const sent = { requestId: null, idempotencyKey: null };
  const first = await service.make(server.actor('author'), ask, sent);
  await flaky.settled();
  expect(await showJob(author, first.jobId)).toMatchObject({
    state: 'failed',
    problem: { code: 'internal', detail: 'The rendering stopped unexpectedly. Nothing was kept.' },
  });
  const second = await service.make(server.actor('author'), ask, sent);
  await flaky.settled();
  expect((await showJob(author, second.jobId)).state).toBe('done');
});

test('a database that takes no writing at the end of a job leaves none running: it is made anew', async () => {
  const { head } = await create(author, documentOf('Full'));
  const rendering = createRenderThread(server.deps.config.buildDir);
  const { store } = server.deps;
  let isFull = false;
  const full = {
    ...server.deps,
    store: {
      ...store,
      write: <T>(act: Parameters<typeof store.write<T>>[0]): T => {
        if (isFull) throw new Error('database or disk is full');
        return store.write(act);
      },
    },
  };
  let renderings = 0;
  const jobs = createPackJobs(
    full,
    {
      render: (...of) => {
        isFull = ++renderings === 1;
        return rendering.render(...of);
      },
    },
    { retryMs: 20 },
  );
  const service = createPacksService(full, jobs);
  const sent = { requestId: null, idempotencyKey: null };
  const { jobId } = await service.make(server.actor('author'), { revisionId: head!.revisionId, benchId }, sent);
  await jobs.settled();
  expect(await showJob(author, jobId)).toMatchObject({ state: 'running' });
  isFull = false;
  expect(await untilJob(author, jobId)).toMatchObject({ state: 'done', startedAgain: true });
  expect(renderings).toBe(2);
});
