import { prepareFirstRun } from '@/server/features/auth/installation';
import { startTestServer, type TestServer } from '../../helpers/testServer';

let server: TestServer;
let code: string;

beforeEach(async () => {
  server = await startTestServer({ withPeople: false });
  code = prepareFirstRun(server.deps) ?? '';
});
afterEach(() => server.close());

const firstRun = (given: string, email = 'first@example.org') =>
  server
    .clientOf(null)
    .post('/api/v1/auth/first-run', { code: given, name: 'Fay First', email, password: 'a long enough password' });

describe('the first administrator', () => {
  it('is made with the code, whatever its case and dashes, and signed in', async () => {
    expect(code).toMatch(/^([A-HJKMNP-TV-Z0-9]{4}-){4}[A-HJKMNP-TV-Z0-9]{4}$/); // 20 letters of 32: 100 bits
    const answer = await firstRun(` ${code.toLowerCase().replaceAll('-', ' ')}`);
    expect(answer.body).toMatchObject({ name: 'Fay First', roles: ['admin'] });
    expect(answer.headers['set-cookie']).toHaveLength(1);
  });

  it('leaves no way for a second one', async () => {
    await firstRun(code);
    expect((await firstRun(code, 'second@example.org')).status).toBe(404);
    expect((await server.clientOf(null).get('/api/v1/session')).body.installation.needsFirstRun).toBe(false);
    expect(prepareFirstRun(server.deps)).toBeNull();
  });

  it('is one of two who come at once', async () => {
    const answers = await Promise.all([firstRun(code, 'one@example.org'), firstRun(code, 'two@example.org')]);
    expect(answers.map((answer) => answer.status).sort()).toEqual([200, 404]);
  });

  it('does not come in with an older code', async () => {
    const older = code;
    code = prepareFirstRun(server.deps) ?? '';
    expect((await firstRun(older)).body.issues[0].pointer).toBe('/code');
    expect((await firstRun(code)).status).toBe(200);
  });

  it('has five tries a minute, whoever tries', async () => {
    for (let i = 0; i < 5; i += 1) expect((await firstRun('AAAA')).status).toBe(422);
    expect((await firstRun(code)).status).toBe(429);
    server.clock.advance(60_001);
    expect((await firstRun(code)).status).toBe(200);
  });

  it('keeps the code out of the table and the log', async () => {
    await firstRun(code);
    prepareFirstRun(server.deps);
    expect(JSON.stringify(server.store.sqlite.prepare('select * from installation').all())).not.toContain(code);
    expect(JSON.stringify(server.logLines)).not.toContain(code);
  });
});
