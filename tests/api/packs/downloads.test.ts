import { createHash } from 'node:crypto';
import http from 'node:http';
import type { AddressInfo } from 'node:net';
import request from 'supertest';
import type { PackDetail } from '@/lib/contracts/packs';
import { createPacksService } from '@/server/features/packs/service';
import { createPackJobs, type PackJobs } from '@/server/packs/jobs';
import { createRenderThread } from '@/server/packs/renderThread';
import { openBench } from '../../helpers/documents';
import { createBench, makePack } from '../../helpers/packCalls';
import { startTestServer, type Client, type TestServer } from '../../helpers/testServer';
import { createReleased, documentOf, withdrawing } from '../../helpers/waveformCalls';

jest.setTimeout(60_000);

let server: TestServer;
let operator: Client;
let reviewer: Client;
let pack: PackDetail;

async function prepare(repeats: number): Promise<void> {
  server = await startTestServer();
  operator = await server.as('operator');
  reviewer = await server.as('reviewer');
  const benchId = (await createBench(await server.as('admin'), openBench())).benchId;
  const document = documentOf('Down load', 1, { timing: { mode: 'loop', repeats, gapSamples: 0, padSamples: 0 } });
  const { revisionId } = await createReleased(await server.as('author'), reviewer, document);
  pack = await makePack(operator, revisionId, benchId);
}
afterEach(() => server.close());

const address = () => `/api/v1/packs/${pack.packId}/file`;
const asBytes = (test: request.Test) =>
  test.buffer(true).parse((response, done) => {
    const parts: Buffer[] = [];
    response.on('data', (part: Buffer) => parts.push(part));
    response.on('end', () => done(null, Buffer.concat(parts)));
  });

test('the whole, a part, the head alone, and nothing new', async () => {
  await prepare(1);
  const whole = await asBytes(operator.get(address())).expect(200);
  const bytes = whole.body as Buffer;
  const digest = createHash('sha256').update(bytes).digest();
  expect(`sha256:${digest.toString('hex')}`).toBe(pack.fileDigest);
  expect(whole.headers).toMatchObject({
    'content-type': 'application/zip',
    'content-disposition': `attachment; filename="${pack.fileName}"`,
    'content-length': String(pack.fileBytes),
    'cache-control': 'private, no-cache',
    'x-content-type-options': 'nosniff',
    'accept-ranges': 'bytes',
    etag: `"${digest.toString('hex')}"`,
    'repr-digest': `sha-256=:${digest.toString('base64')}:`,
  });
  const etag = whole.headers.etag as string;
  const part = await asBytes(operator.get(address()).set('Range', 'bytes=100-199')).expect(206);
  expect((part.body as Buffer).equals(bytes.subarray(100, 200))).toBe(true);
  expect(part.headers['content-range']).toBe(`bytes 100-199/${bytes.length}`);
  const rest = await asBytes(operator.get(address()).set('Range', 'bytes=500-').set('If-Range', etag)).expect(206);
  expect((rest.body as Buffer).equals(bytes.subarray(500))).toBe(true);
  await asBytes(operator.get(address()).set('Range', 'bytes=500-').set('If-Range', '"other"')).expect(200);
  await operator.get(address()).set('If-None-Match', etag).expect(304);
  const outside = await operator.get(address()).set('Range', `bytes=${bytes.length}-`).expect(416);
  expect(outside.body.code).toBe('bad_range');
  const head = await request(server.app)
    .head(address())
    .set('Cookie', cookieOf(operator))
    .set('Host', 'combwright.test');
  expect([head.status, head.headers['content-length']]).toEqual([200, String(pack.fileBytes)]);
  // Two times the whole; parts from further on, heads and what the browser had already are no uses.
  const acts = (await (await server.as('admin')).get('/api/v1/audit').expect(200)).body.acts as { act: string }[];
  expect(acts.filter((row) => row.act === 'pack.downloaded')).toHaveLength(2);
});

test('a withdrawn edition answers 409 with the reason: whole, part, head and If-None-Match', async () => {
  await prepare(1);
  const etag = (await operator.get(address()).expect(200)).headers.etag as string;
  await withdrawing(reviewer, pack.waveformId, 1, 'Burns inputs.').expect(200);
  for (const headers of [
    {},
    { Range: 'bytes=0-9' },
    { 'If-None-Match': etag },
    { 'If-Range': etag, Range: 'bytes=5-' },
  ]) {
    const answer = await operator.get(address()).set(headers).expect(409);
    expect(answer.body).toMatchObject({ code: 'edition_withdrawn', detail: 'Edition 1 was withdrawn: Burns inputs.' });
    expect(answer.headers.etag).not.toBe(etag);
    expect(answer.headers['content-disposition']).toBeUndefined();
  }
  const head = await request(server.app)
    .head(address())
    .set('Cookie', cookieOf(operator))
    .set('Host', 'combwright.test');
  expect(head.status).toBe(409);
  const shown = (await operator.get(`/api/v1/packs/${pack.packId}`).expect(200)).body as PackDetail;
  expect(shown).toMatchObject({ state: 'withdrawn', withdrawn: { reason: 'Burns inputs.' } });
  expect(shown.cautions[9]!.text).toContain('Withdrawn, edition 1: do not use it');
});

test('a withdrawal while the file is looked for still refuses it', async () => {
  await prepare(1);
  const found = createPackJobs(server.deps, createRenderThread(server.deps.config.buildDir));
  const slow: PackJobs = {
    ...found,
    async findFile(stored) {
      await withdrawing(reviewer, pack.waveformId, 1, 'Too late.').expect(200);
      return found.findFile(stored);
    },
  };
  await expect(createPacksService(server.deps, slow).file(server.actor('operator'), pack.packId)).rejects.toMatchObject(
    {
      code: 'edition_withdrawn',
      message: 'Edition 1 was withdrawn: Too late.',
    },
  );
});

test('rights are asked at each request', async () => {
  await prepare(1);
  expect((await (await server.as('anonymous')).get(address()).expect(401)).body.code).toBe('sign_in_needed');
  await (await server.as('nobody')).get(address()).expect(404);
});

function cookieOf(client: Client): string {
  return (client.get('/') as unknown as { header: Record<string, string> }).header.Cookie!;
}

/** A real connection that takes its time. */
function slowDownload(
  port: number,
): Promise<{ received: () => number; ended: Promise<'whole' | 'broken'>; resume: () => void }> {
  return new Promise((resolve, reject) => {
    const headers = { Cookie: cookieOf(operator), Host: 'combwright.test' };
    http
      .get({ port, path: address(), headers }, (response) => {
        let received = 0;
        response.pause();
        response.on('data', (part: Buffer) => (received += part.length));
        const ended = new Promise<'whole' | 'broken'>((done) => {
          response.on('end', () => done(received === pack.fileBytes ? 'whole' : 'broken'));
          response.on('error', () => done('broken'));
          response.on('aborted', () => done('broken'));
        });
        resolve({ received: () => received, ended, resume: () => response.resume() });
      })
      .on('error', reject);
  });
}

test('a withdrawal cuts running downloads; one that breaks off leaves the server whole', async () => {
  await prepare(20_000);
  const listening = server.app.listen(0);
  const { port } = listening.address() as AddressInfo;
  try {
    const first = await slowDownload(port);
    await withdrawing(reviewer, pack.waveformId, 1).expect(200);
    first.resume();
    expect(await first.ended).toBe('broken');
    expect(first.received()).toBeLessThan(pack.fileBytes);
    await operator.get('/api/health').expect(200);
  } finally {
    listening.closeAllConnections();
    await new Promise((resolve) => listening.close(resolve));
  }
});
