import { verify } from '@node-rs/argon2';

import { startTestServer, TEST_PASSWORD, type TestServer } from '../../helpers/testServer';

// The real package, its calls counted.
jest.mock('@node-rs/argon2', () => {
  const real = jest.requireActual<typeof import('@node-rs/argon2')>('@node-rs/argon2');
  return { ...real, verify: jest.fn(real.verify) };
});

const TEN_MINUTES_MS = 600_000;
let server: TestServer;

beforeEach(async () => {
  jest.mocked(verify).mockClear();
  server = await startTestServer();
});
afterEach(() => server.close());

const signIn = (email: string, password: string) =>
  server.clientOf(null).post('/api/v1/auth/sign-in', { email, password });
const cookieOf = (answer: { headers: Record<string, unknown> }) =>
  String((answer.headers['set-cookie'] as string[])[0]);

describe('signing in', () => {
  it('answers the person and a cookie that no script reads', async () => {
    const answer = await signIn(' Author@Example.org ', TEST_PASSWORD);
    expect(answer.status).toBe(200);
    expect(answer.body).toMatchObject({ name: 'Ada Author', roles: ['author'] });
    const cookie = cookieOf(answer);
    expect(cookie).toMatch(/^combwright=[a-z0-9]{40}; /);
    expect(cookie).toContain('HttpOnly');
    expect(cookie).toContain('SameSite=Lax');
    expect(cookie).toContain('Path=/');
    expect(cookie).not.toContain('Secure');
  });

  it('keeps only the SHA-256 of the session id', async () => {
    const secret = cookieOf(await signIn('author@example.org', TEST_PASSWORD)).split(/[=;]/)[1] ?? '';
    const rows = server.store.sqlite.prepare('select * from sessions').all();
    expect(JSON.stringify(rows)).not.toContain(secret);
    expect(rows).toHaveLength(1);
    expect(JSON.stringify(server.logLines)).not.toContain(secret);
    expect(JSON.stringify(server.logLines)).not.toContain(TEST_PASSWORD);
  });

  it('gives a new id at each sign-in and ends the one the browser came with', async () => {
    const first = cookieOf(await signIn('author@example.org', TEST_PASSWORD)).split(';', 1)[0] ?? '';
    const again = await server
      .clientOf(first)
      .post('/api/v1/auth/sign-in', { email: 'author@example.org', password: TEST_PASSWORD });
    expect(cookieOf(again).split(';', 1)[0]).not.toBe(first);
    expect((await server.clientOf(first).get('/api/v1/session')).body.me).toBeNull();
  });

  it('answers the same for a wrong password and for nobody', async () => {
    const wrong = await signIn('author@example.org', 'not the password');
    const nobody = await signIn('nowhere@example.org', 'not the password');
    expect([wrong.status, nobody.status]).toEqual([401, 401]);
    const words = ({ instance: _instance, ...rest }: Record<string, unknown>) => rest;
    expect(words(wrong.body)).toEqual(words(nobody.body));
    expect(wrong.body).toMatchObject({ code: 'sign_in_refused', detail: 'E-mail or password is not right.' });
    expect(wrong.headers['content-type']).toContain('application/problem+json');
  });

  it('hashes for somebody unknown too, at the same cost, so that time tells nothing', async () => {
    const verified = jest.mocked(verify);
    const costOf = (hash: unknown) => String(hash).split('$', 4).join('$');
    await signIn('author@example.org', 'not the password');
    const known = verified.mock.calls.splice(0);
    await signIn('nowhere@example.org', 'not the password');
    const unknown = verified.mock.calls.splice(0);
    expect([known.length, unknown.length]).toEqual([1, 1]);
    expect(costOf(known[0]![0])).toMatch(/^\$argon2id\$v=\d+\$m=\d+,t=\d+,p=\d+$/);
    expect(costOf(unknown[0]![0])).toBe(costOf(known[0]![0]));
  });

  it('refuses the eleventh wrong try in ten minutes, and takes the next after that', async () => {
    for (let i = 0; i < 10; i += 1) expect((await signIn('author@example.org', 'wrong')).status).toBe(401);
    const refused = await signIn('author@example.org', TEST_PASSWORD);
    expect(refused.status).toBe(429);
    expect(refused.body).toMatchObject({ code: 'too_many', detail: 'Too many tries. Try again in 10 minutes.' });
    expect(refused.headers['retry-after']).toBe('600');
    server.clock.advance(TEN_MINUTES_MS + 1);
    expect((await signIn('author@example.org', TEST_PASSWORD)).status).toBe(200);
  });

  it('locks nobody out from another address', async () => {
    await server.close();
    server = await startTestServer({ config: { trustsProxy: true } });
    const from = (address: string, password: string) =>
      signIn('author@example.org', password).set('X-Forwarded-For', address);
    for (let i = 0; i < 11; i += 1) await from('198.51.100.7', 'wrong');
    expect((await from('198.51.100.7', TEST_PASSWORD)).status).toBe(429);
    expect((await from('198.51.100.8', TEST_PASSWORD)).status).toBe(200);
  });

  it('does not believe X-Forwarded-For without TRUST_PROXY', async () => {
    for (let i = 0; i < 11; i += 1)
      await signIn('author@example.org', 'wrong').set('X-Forwarded-For', `198.51.100.${i}`);
    expect((await signIn('author@example.org', TEST_PASSWORD)).status).toBe(429);
  });

  it('counts no try that succeeded', async () => {
    for (let i = 0; i < 11; i += 1) expect((await signIn('author@example.org', TEST_PASSWORD)).status).toBe(200);
  });

  it('sets Secure and __Host- where PUBLIC_URL is https', async () => {
    await server.close();
    server = await startTestServer({ config: { publicOrigin: 'https://waveforms.example.org' } });
    const answer = await signIn('author@example.org', TEST_PASSWORD).set('Origin', 'https://waveforms.example.org');
    expect(cookieOf(answer)).toMatch(/^__Host-combwright=/);
    expect(cookieOf(answer)).toContain('Secure');
  });
});

describe('the origin of a change', () => {
  it.each([
    ['another site', 'https://elsewhere.example'],
    ['no origin at all', ''],
    ['the word null', 'null'],
  ])('refuses %s', async (_name, origin) => {
    const test = server
      .clientOf(null)
      .post('/api/v1/auth/sign-in', { email: 'author@example.org', password: TEST_PASSWORD });
    const answer = await (origin ? test.set('Origin', origin) : test.unset('Origin'));
    expect(answer.status).toBe(403);
    expect(answer.body.code).toBe('origin_refused');
  });

  it("takes the request's own host where no PUBLIC_URL is set, and no forwarded one", async () => {
    await server.close();
    server = await startTestServer({ config: { publicOrigin: null } });
    const test = (origin: string) =>
      signIn('author@example.org', 'wrong').set('Host', 'bench.local:8080').set('Origin', origin);
    expect((await test('http://bench.local:8080')).status).toBe(401);
    expect((await test('http://evil.example').set('X-Forwarded-Host', 'evil.example')).status).toBe(403);
  });
});

describe('a session', () => {
  it('ends after 12 h without use, and lives on with use', async () => {
    const client = await server.as('author');
    const isIn = async () => (await client.get('/api/v1/session')).body.me !== null;
    server.clock.advance(11 * 3_600_000);
    expect(await isIn()).toBe(true);
    server.clock.advance(11 * 3_600_000);
    expect(await isIn()).toBe(true);
    server.clock.advance(12 * 3_600_000);
    expect(await isIn()).toBe(false);
  });

  it('ends after 30 days whatever its use', async () => {
    const client = await server.as('author');
    const isIn = async () => (await client.get('/api/v1/session')).body.me !== null;
    for (let hours = 0; hours < 30 * 24 - 10; hours += 10) {
      expect(await isIn()).toBe(true);
      server.clock.advance(10 * 3_600_000);
    }
    server.clock.advance(11 * 3_600_000);
    expect(await isIn()).toBe(false);
  });

  it('survives a clock that jumps back', async () => {
    const client = await server.as('author');
    server.clock.advance(-40 * 24 * 3_600_000);
    expect((await client.get('/api/v1/session')).body.me).toMatchObject({ name: 'Ada Author' });
  });

  it('is listed and ended by hand', async () => {
    const here = await server.as('author');
    const there = await server.as('author');
    const { sessions } = (await here.get('/api/v1/account/sessions')).body as {
      sessions: { sessionId: string; isThisOne: boolean }[];
    };
    expect(sessions).toHaveLength(2);
    const other = sessions.find((session) => !session.isThisOne);
    expect((await here.delete(`/api/v1/account/sessions/${other?.sessionId}`)).status).toBe(200);
    expect((await there.get('/api/v1/account/sessions')).status).toBe(401);
    expect((await here.delete(`/api/v1/account/sessions/${other?.sessionId}`)).status).toBe(404);
  });

  it('of another person cannot be ended', async () => {
    const mine = await server.as('author');
    const theirs = await server.as('otherAuthor');
    const { sessions } = (await theirs.get('/api/v1/account/sessions')).body as { sessions: { sessionId: string }[] };
    expect((await mine.delete(`/api/v1/account/sessions/${sessions[0]?.sessionId}`)).status).toBe(404);
    expect((await theirs.get('/api/v1/account/sessions')).status).toBe(200);
  });

  it('ends with sign-out', async () => {
    const client = await server.as('author');
    expect((await client.post('/api/v1/auth/sign-out')).status).toBe(200);
    expect((await client.get('/api/v1/account/sessions')).status).toBe(401);
  });
});

describe('the account', () => {
  it('changes the name', async () => {
    const client = await server.as('author');
    expect((await client.patch('/api/v1/account', { name: ' Ada B. ' })).body.name).toBe('Ada B.');
    const refused = await client.patch('/api/v1/account', { name: '' });
    expect(refused.status).toBe(422);
    expect(refused.body.issues).toEqual([{ pointer: '/name', message: 'must not be empty', code: 'invalid' }]);
  });

  it('changes the password and ends the other sessions', async () => {
    const here = await server.as('author');
    const there = await server.as('author');
    const change = (current: string) =>
      here.post('/api/v1/account/password', { current, next: 'another long password' });
    expect((await change('wrong')).body.issues[0].pointer).toBe('/current');
    expect((await change(TEST_PASSWORD)).status).toBe(200);
    expect((await there.get('/api/v1/account/sessions')).status).toBe(401);
    expect((await here.get('/api/v1/account/sessions')).body.sessions).toHaveLength(1);
    expect((await signIn('author@example.org', TEST_PASSWORD)).status).toBe(401);
    expect((await signIn('author@example.org', 'another long password')).status).toBe(200);
  });

  it('asks for 12 characters', async () => {
    const client = await server.as('author');
    const answer = await client.post('/api/v1/account/password', { current: TEST_PASSWORD, next: 'elevenchars' });
    expect(answer.body.issues).toEqual([{ pointer: '/next', message: '12 characters or more', code: 'invalid' }]);
  });
});
