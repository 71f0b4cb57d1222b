import { gzipSync } from 'node:zlib';
import path from 'node:path';
import { writeFileSync } from 'node:fs';
import { createBodyWorker } from '@/server/http/bodyWorker';
import { ORIGIN, startTestServer, type Client, type TestServer } from '../../helpers/testServer';

const MIB = 2 ** 20;
let server: TestServer;
let author: Client;

beforeAll(async () => {
  server = await startTestServer();
  author = await server.as('author');
});
afterAll(() => server.close());

const create = () => author.post('/api/v1/waveforms').set('Content-Type', 'application/json');
/** Bytes as they are: supertest would serialize an object. */
const send = (bytes: Buffer) =>
  create()
    .serialize((value: unknown) => value as string)
    .send(bytes);
const sendGzip = (bytes: Buffer) =>
  create()
    .set('Content-Encoding', 'gzip')
    .serialize((value: unknown) => value as string)
    .send(gzipSync(bytes));

describe('a body', () => {
  it.each([
    ['no JSON', '{"format": '],
    ['no UTF-8', Buffer.from([0x22, 0xff, 0x22])],
    ['nothing', ''],
  ])('that is %s is malformed', async (_name, text) => {
    const answer = await send(Buffer.from(text));
    expect(answer.status).toBe(400);
    expect(answer.body.code).toBe('malformed');
  });

  it('nested very deep is refused before a parser goes down', async () => {
    const answer = await send(Buffer.from('['.repeat(100_000)));
    expect(answer.body).toMatchObject({ status: 400, detail: 'The body is nested deeper than 16 levels.' });
  });

  it.each([
    ['NaN', '{"content":{"level":{"headroomDb":NaN}}}', '/content/level/headroomDb', /no NaN/],
    ['a key that stands twice', '{"format":"x","format":"combwright.waveform"}', '/format', /stands twice/],
    ['half a document', '{"format":"combwright.waveform",', '', /is not JSON/],
  ])('with %s says where and why', async (_name, text, pointer, words) => {
    const answer = await send(Buffer.from(text));
    expect(answer.body).toMatchObject({ status: 400, code: 'malformed', issues: [{ pointer }] });
    expect(answer.body.detail).toMatch(words);
  });

  it('of another type is refused', async () => {
    const answer = await author.post('/api/v1/waveforms').set('Content-Type', 'text/plain').send('{}');
    expect(answer.body.code).toBe('wrong_type');
    const brotli = await create().set('Content-Encoding', 'br').send('{}');
    expect(brotli.body.code).toBe('wrong_type');
  });

  it('that says gzip and is not is malformed', async () => {
    const answer = await create().set('Content-Encoding', 'gzip').send('{"a": 1}');
    expect(answer.body.code).toBe('malformed');
  });

  it('in gzip is read', async () => {
    const answer = await sendGzip(Buffer.from('{"format": "something"}'));
    expect(answer.status).toBe(422);
    expect(answer.body.code).toBe('invalid');
  });

  it('of 33 MiB is too large, by its length and by its bytes', async () => {
    const answer = await send(Buffer.alloc(33 * MIB, 0x20));
    expect(answer.body).toMatchObject({ code: 'too_large', detail: 'A body here has at most 32 MiB.' });
  });

  it('that inflates past the limit is stopped there', async () => {
    const member = gzipSync(Buffer.alloc(16 * MIB, 0x20)); // members of a gzip stream simply follow each other (RFC 1952, 2.2)
    const zipped = Buffer.concat(Array.from({ length: 64 }, () => member));
    expect(zipped.length).toBeLessThan(2 * MIB);
    const before = process.memoryUsage().rss;
    const answer = await create()
      .set('Content-Encoding', 'gzip')
      .serialize((value: unknown) => value as string)
      .send(zipped);
    expect(answer.body.code).toBe('too_large');
    expect(process.memoryUsage().rss - before).toBeLessThan(200 * MIB);
  });

  it('of a small endpoint has a small limit', async () => {
    const answer = await author.patch('/api/v1/account', { name: 'x'.repeat(300 * 1024) });
    expect(answer.body).toMatchObject({ code: 'too_large', detail: 'A body here has at most 256 KiB.' });
  });

  it('says in words what a schema without words of its own refuses', async () => {
    const found = await author.get(`/api/v1/waveforms?state=lost&find=${'a'.repeat(300)}`);
    expect(found.body.issues).toEqual([
      {
        pointer: '/query/state',
        message: 'must be one of "draft", "inReview", "released", "withdrawn"',
        code: 'invalid',
      },
      { pointer: '/query/find', message: expect.stringMatching(/^must have at most \d+ characters$/), code: 'invalid' },
    ]);
    const named = await author.patch('/api/v1/account', { name: 3, role: 'admin' });
    expect(named.body.issues).toEqual([
      { pointer: '/name', message: 'must be text', code: 'invalid' },
      { pointer: '/role', message: 'is no key of this version', code: 'invalid' },
    ]);
  });

  it('of a stranger is not even read', async () => {
    const answer = await server
      .clientOf(null)
      .post('/api/v1/waveforms')
      .set('Content-Type', 'application/json')
      .send('no JSON');
    expect(answer.status).toBe(401);
  });

  it('above 256 KiB is checked in a thread, with the same words', async () => {
    const answer = await sendGzip(Buffer.from(JSON.stringify({ format: 'something', filler: 'x'.repeat(MIB) })));
    expect(answer.status).toBe(422);
    expect(answer.body.issues.length).toBeGreaterThan(0);
  });

  it('of 2^21 wrong runs is refused in time, with at most 50 issues', async () => {
    const row = `[${'-1,70000,'.repeat(2 ** 21 / 64)}1,1]`;
    const rows = Array.from({ length: 64 }, () => row).join();
    const text = `{"format":"combwright.waveform","version":1,"about":{"title":"T","notes":"","basedOn":null},"content":{"grid":{"rows":[${rows}],"rowOfSymbol":[0]}}}`;
    const answer = await sendGzip(Buffer.from(text));
    expect(answer.status).toBe(422);
    expect(answer.body.issues.length).toBeLessThanOrEqual(50);
  });
});

describe('the checking thread', () => {
  const bytes = () => new Uint8Array(new ArrayBuffer(8));
  const threadOf = (source: string, timeMs = 5000) => {
    writeFileSync(path.join(server.dataDir, 'body.worker.mjs'), source);
    return createBodyWorker(server.dataDir, { timeMs, memoryMb: 64 });
  };

  it('is ended after its limit', async () => {
    // The thread itself would never answer.
    await expect(threadOf('for (;;);', 300)('createWaveform', bytes())).rejects.toMatchObject({
      code: 'too_large',
      message: 'The body takes longer than 0.3 s to check.',
    });
  });

  it('that takes too much memory is too large, and hurts nobody', async () => {
    const check = createBodyWorker(server.dataDir, { timeMs: 30_000, memoryMb: 32 });
    writeFileSync(
      path.join(server.dataDir, 'body.worker.mjs'),
      'const a = []; for (;;) a.push(new Array(1000).fill({}));',
    );
    await expect(check('createWaveform', bytes())).rejects.toMatchObject({ code: 'too_large' });
  }, 40_000);

  it('that fails is our mistake', async () => {
    await expect(threadOf('throw new Error("broken")')('createWaveform', bytes())).rejects.toThrow('broken');
    await expect(threadOf('')('createWaveform', bytes())).rejects.toThrow('without an answer');
  });

  it('does two at a time and lets the others wait their turn', async () => {
    const check = threadOf(
      "import { parentPort } from 'node:worker_threads'; setTimeout(() => parentPort.postMessage({ ok: true, value: 1 }), 50);",
    );
    const answers = await Promise.all(Array.from({ length: 6 }, () => check('createWaveform', bytes())));
    expect(answers).toHaveLength(6);
    await expect(Promise.all(Array.from({ length: 20 }, () => check('createWaveform', bytes())))).rejects.toMatchObject(
      { code: 'too_many' },
    );
  });
});

it('an answer carries its request id, and the log line too', async () => {
  const answer = await author.get('/api/v1/nowhere').set('Origin', ORIGIN);
  const requestId = answer.headers['x-request-id'];
  expect(answer.body).toMatchObject({ code: 'not_found', instance: `urn:combwright:request:${requestId}` });
  expect(server.logLines.find((line) => line.requestId === requestId)).toMatchObject({
    method: 'GET',
    path: '/api/v1/nowhere',
    status: 404,
  });
});
