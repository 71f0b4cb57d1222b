import { gunzipSync } from 'node:zlib';
import { z } from 'zod';
import { addressOf, call } from '@/lib/client/apiClient';
import { defineEndpoint } from '@/lib/contracts/endpoint';

const rename = defineEndpoint({
  name: 'rename',
  method: 'PUT',
  path: '/things/:thingId/names/:number',
  access: 'signedIn',
  summary: 'For the test',
  params: z.object({ thingId: z.string(), number: z.coerce.number() }),
  query: z.object({ mine: z.boolean().optional(), find: z.string().optional() }),
  body: z.object({ name: z.string() }),
  response: z.object({ name: z.string() }),
});
const input = { params: { thingId: 'a/b', number: 3 }, query: {}, body: { name: 'n' } };

const asked: { url: string; init: RequestInit & { headers: Record<string, string> } }[] = [];
let answer: () => Response | Promise<Response>;
const realFetch = globalThis.fetch;

beforeEach(() => {
  asked.length = 0;
  globalThis.fetch = ((url: string, init: never) => {
    asked.push({ url, init });
    return Promise.resolve().then(answer);
  }) as never;
});
afterEach(() => void (globalThis.fetch = realFetch));

const json = (status: number, body: unknown) => new Response(JSON.stringify(body), { status });

it('builds the address from the contract', () => {
  expect(addressOf(rename, { params: input.params, query: { mine: true, find: 'ä b', none: undefined } })).toBe(
    '/api/v1/things/a%2Fb/names/3?mine=true&find=%C3%A4+b',
  );
  expect(() => addressOf(rename, { params: { thingId: 'a' } })).toThrow('needs the parameter number');
});

it('answers the value that the contract names', async () => {
  answer = () => json(200, { name: 'new', extra: 1 });
  expect(await call(rename, { ...input, idempotencyKey: 'key-12345' })).toEqual({ ok: true, value: { name: 'new' } });
  expect(asked[0]).toMatchObject({
    url: '/api/v1/things/a%2Fb/names/3',
    init: {
      method: 'PUT',
      credentials: 'same-origin',
      headers: { 'Idempotency-Key': 'key-12345', 'Content-Type': 'application/json' },
    },
  });
});

it('sends a large body in gzip', async () => {
  answer = () => json(200, { name: 'new' });
  await call(rename, { ...input, body: { name: 'x'.repeat(100_000) } });
  const { init } = asked[0] ?? {};
  expect(init?.headers['Content-Encoding']).toBe('gzip');
  const bytes = Buffer.from(await (init?.body as Blob).arrayBuffer());
  expect(bytes.length).toBeLessThan(10_000);
  expect(JSON.parse(gunzipSync(bytes).toString())).toEqual({ name: 'x'.repeat(100_000) });
});

it('hands a problem on', async () => {
  const problem = {
    type: 'urn:x',
    title: 'T',
    status: 409,
    detail: 'D',
    instance: 'i',
    code: 'state_conflict',
    facts: { state: 'released' },
  };
  answer = () => json(409, problem);
  expect(await call(rename, input)).toEqual({ ok: false, problem });
});

it('makes a problem of an answer that is none', async () => {
  answer = () => json(502, {});
  expect(await call(rename, input)).toMatchObject({ ok: false, problem: { code: 'internal', status: 502 } });
});

it.each([
  ['no connection', () => Promise.reject(new TypeError('failed to fetch'))],
  ['a page of somebody else', () => new Response('<html>', { status: 200 })],
])('answers null for %s', async (_name, given) => {
  answer = given;
  expect(await call(rename, input)).toEqual({ ok: false, problem: null });
});

it('takes nothing that breaks the contract for an answer, and says so', async () => {
  const said = jest.spyOn(console, 'error').mockImplementation(() => undefined);
  answer = () => json(200, { name: 5 });
  expect(await call(rename, input)).toEqual({ ok: false, problem: null });
  expect(said).toHaveBeenCalledTimes(1);
  said.mockRestore();
});

it('throws where the caller gave up', async () => {
  const stop = new AbortController();
  answer = () => {
    stop.abort();
    throw stop.signal.reason as Error;
  };
  await expect(call(rename, { ...input, signal: stop.signal })).rejects.toThrow();
});
