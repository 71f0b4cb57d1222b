import { startTestServer, TEST_PASSWORD, type Client, type TestServer } from '../../helpers/testServer';

const DAY_MS = 24 * 3_600_000;
let server: TestServer;
let admin: Client;

beforeEach(async () => {
  server = await startTestServer();
  admin = await server.as('admin');
});
afterEach(() => server.close());

const pathOf = (key: Parameters<TestServer['personId']>[0], rest = '') =>
  `/api/v1/people/${server.personId(key)}${rest}`;
const tokenOf = (link: { url: string }) => link.url.split('#')[1] ?? '';
const useLink = (token: string, body: object = {}) =>
  server.clientOf(null).post('/api/v1/auth/links/use', { token, password: 'a fresh long password', ...body });

describe('inviting', () => {
  const invite = (body: object = {}) =>
    admin.post('/api/v1/people', {
      name: 'Petra Plum',
      email: 'Petra@Example.org',
      roles: ['operator', 'author'],
      ...body,
    });

  it('adds a person and shows the link once', async () => {
    const answer = await invite();
    expect(answer.status).toBe(201);
    expect(answer.body.person).toMatchObject({
      name: 'Petra Plum',
      email: 'petra@example.org',
      roles: ['author', 'operator'],
      hasJoined: false,
    });
    expect(answer.body.link.url).toMatch(/^http:\/\/combwright\.test\/accept-invitation#[\w-]{43}$/);
    const token = tokenOf(answer.body.link);
    for (const table of ['one_time_links', 'audit']) {
      expect(JSON.stringify(server.store.sqlite.prepare(`select * from ${table}`).all())).not.toContain(token);
    }
    expect(JSON.stringify(server.logLines)).not.toContain(token);
    expect(JSON.stringify((await admin.get('/api/v1/people')).body)).not.toContain(token);
  });

  it('lets the person join once, with a name of their own', async () => {
    const token = tokenOf((await invite()).body.link);
    const look = await server.clientOf(null).post('/api/v1/auth/links/look', { token });
    expect(look.body).toMatchObject({
      kind: 'invite',
      madeBy: 'Alan Admin',
      roles: ['author', 'operator'],
      email: 'petra@example.org',
    });
    const joined = await useLink(token, { name: 'Petra P.' });
    expect(joined.body).toMatchObject({ name: 'Petra P.', roles: ['author', 'operator'] });
    const again = await useLink(token);
    expect(again.status).toBe(404);
    expect(again.body.detail).toBe('This link was used or is too old. Ask for a new one.');
    const signIn = await server
      .clientOf(null)
      .post('/api/v1/auth/sign-in', { email: 'petra@example.org', password: 'a fresh long password' });
    expect(signIn.status).toBe(200);
  });

  it('ends after seven days', async () => {
    const token = tokenOf((await invite()).body.link);
    server.clock.advance(7 * DAY_MS);
    expect((await useLink(token)).status).toBe(404);
  });

  it('ends when it is sent again or taken back', async () => {
    const { person, link } = (await invite()).body as { person: { personId: string }; link: { url: string } };
    const links = `/api/v1/people/${person.personId}/links`;
    const second = (await admin.post(links)).body as { url: string; kind: string };
    expect(second.kind).toBe('invite');
    expect((await useLink(tokenOf(link))).status).toBe(404);
    expect((await admin.delete(links)).status).toBe(200);
    expect((await useLink(tokenOf(second))).status).toBe(404);
  });

  it('refuses an address that is here already', async () => {
    const answer = await invite({ email: 'author@example.org' });
    expect(answer.status).toBe(422);
    expect(answer.body.issues).toEqual([
      { pointer: '/email', message: 'This address is in the team already.', code: 'taken' },
    ]);
  });
});

describe('a reset', () => {
  it('works for 30 minutes, once, and ends all sessions', async () => {
    const theirs = await server.as('author');
    const link = (await admin.post(pathOf('author', '/links'))).body as { url: string; kind: string };
    expect(link.kind).toBe('reset');
    expect(link.url).toContain('/reset-password#');
    expect((await useLink(tokenOf(link), { name: 'Not Renamed' })).body.name).toBe('Ada Author');
    expect((await theirs.get('/api/v1/account/sessions')).status).toBe(401);
    expect((await useLink(tokenOf(link))).status).toBe(404);

    const late = (await admin.post(pathOf('author', '/links'))).body as { url: string };
    server.clock.advance(30 * 60_000);
    expect((await useLink(tokenOf(late))).status).toBe(404);
  });
});

describe('roles', () => {
  const setRoles = (key: 'author' | 'admin' | 'otherAuthor', roles: string[]) =>
    admin.put(pathOf(key, '/roles'), { roles });

  it('are set at once and end the sessions of the person', async () => {
    const theirs = await server.as('author');
    const answer = await setRoles('author', ['reviewer', 'author']);
    expect(answer.body.roles).toEqual(['author', 'reviewer']);
    expect((await theirs.get('/api/v1/account/sessions')).status).toBe(401);
  });

  it('that did not change end nothing', async () => {
    const theirs = await server.as('author');
    expect((await setRoles('author', ['author'])).status).toBe(200);
    expect((await theirs.get('/api/v1/account/sessions')).status).toBe(200);
  });

  it('of yourself leave the session in hand', async () => {
    const elsewhere = await server.as('admin');
    expect((await setRoles('admin', ['admin', 'reviewer'])).status).toBe(200);
    expect((await admin.get('/api/v1/people')).status).toBe(200);
    expect((await elsewhere.get('/api/v1/people')).status).toBe(401);
  });

  it('keep one admin who can sign in', async () => {
    const refused = await setRoles('admin', ['author']);
    expect(refused.status).toBe(409);
    expect(refused.body).toMatchObject({ code: 'state_conflict', detail: 'There must be one admin: yours stays.' });
    expect((await admin.get('/api/v1/people')).status).toBe(200);
    // An invitation that nobody took up does not count.
    await admin.post('/api/v1/people', { name: 'Later', email: 'later@example.org', roles: ['admin'] });
    expect((await setRoles('admin', [])).status).toBe(409);
    await setRoles('otherAuthor', ['admin']);
    expect((await setRoles('admin', [])).status).toBe(200);
    expect((await admin.get('/api/v1/people')).status).toBe(404);
  });

  it('must be known', async () => {
    expect((await setRoles('author', ['owner'])).body.issues[0]).toMatchObject({ pointer: '/roles/0' });
  });
});

describe("a person's sessions", () => {
  it('are seen and ended by an admin', async () => {
    const theirs = await server.as('operator');
    await server.as('operator');
    expect((await admin.get(pathOf('operator', '/sessions'))).body.sessions).toHaveLength(2);
    const list = (await admin.get('/api/v1/people')).body.people as { name: string; sessionCount: number }[];
    expect(list.find((person) => person.name === 'Olga Operator')?.sessionCount).toBe(2);
    expect((await admin.delete(pathOf('operator', '/sessions'))).body).toEqual({ endedCount: 2 });
    expect((await theirs.get('/api/v1/account/sessions')).status).toBe(401);
  });
});

describe('the audit list', () => {
  it('says who did what to whom, newest first, in pages and by filter', async () => {
    await admin.put(pathOf('author', '/roles'), { roles: ['author', 'operator'] });
    await admin.post(pathOf('author', '/links'));
    server.clock.advance(DAY_MS);
    await server.clientOf(null).post('/api/v1/auth/sign-in', { email: 'author@example.org', password: TEST_PASSWORD });
    admin = await server.as('admin');
    const all = (await admin.get('/api/v1/audit')).body as {
      acts: { act: string; seq: number }[];
      knownActs: string[];
    };
    expect(all.acts.map((act) => act.act)).toEqual(['session.begun', 'person.resetLinkMade', 'person.rolesSet']);
    expect(all.acts[2]).toMatchObject({
      person: { name: 'Alan Admin' },
      objectLabel: 'Ada Author',
      detail: { before: ['author'], after: ['author', 'operator'] },
    });
    expect(all.knownActs).toEqual(['person.resetLinkMade', 'person.rolesSet', 'session.begun']);

    const acts = async (query: string) =>
      ((await admin.get(`/api/v1/audit?${query}`)).body as typeof all).acts.map((act) => act.act);
    expect(await acts('act=person')).toEqual(['person.resetLinkMade', 'person.rolesSet']);
    expect(await acts('act=session.begun')).toEqual(['session.begun']);
    expect(await acts(`personId=${server.personId('author')}`)).toEqual(['session.begun']);
    expect(await acts(`fromMs=${server.clock.nowMs() - 1000}`)).toEqual(['session.begun']);
    expect(await acts(`toMs=${server.clock.nowMs() - 1000}`)).toEqual(['person.resetLinkMade', 'person.rolesSet']);

    const first = (await admin.get('/api/v1/audit?limit=2')).body as { nextBefore: number };
    expect(await acts(`limit=2&before=${first.nextBefore}`)).toEqual(['person.rolesSet']);
    expect((await admin.get('/api/v1/audit?limit=2000')).body.issues[0].pointer).toBe('/query/limit');
  });
});
