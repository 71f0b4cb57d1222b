import request from 'supertest';
import { seedDemoPeople } from '@/server/features/demo/people';
import { startTestServer, type TestServer, type TestServerOptions } from '../../helpers/testServer';

let server: TestServer;
afterEach(() => server.close());

async function startDemo(options: TestServerOptions = {}) {
  server = await startTestServer({
    kind: 'demo',
    withPeople: false,
    ...options,
    config: { publicOrigin: null, ...options.config },
  });
  seedDemoPeople(server.deps);
}

const list = (host: string, headers: Record<string, string> = {}) =>
  request(server.app)
    .get('/api/v1/auth/demo-people')
    .set({ Host: host, ...headers });

describe('demo sign-in', () => {
  it.each(['localhost', 'localhost:8080', '127.0.0.1:8080', '[::1]:8080'])('offers five people at %s', async (host) => {
    await startDemo();
    const answer = await list(host);
    expect(
      (answer.body.people as { name: string; roles: string[] }[]).map((person) => [person.name, ...person.roles]),
    ).toEqual([
      ['Ines Okoro', 'author'],
      ['Mira Sand', 'reviewer', 'admin'],
      ['Tomas Vell', 'author', 'operator'],
      ['Jun Aldane', 'operator'],
      ['Nora Quist', 'reviewer'],
    ]);
  });

  it('signs in as the one chosen', async () => {
    await startDemo();
    const [ines] = (await list('localhost')).body.people as { personId: string }[];
    const signIn = (host: string) =>
      request(server.app)
        .post('/api/v1/auth/demo-sign-in')
        .set({ Host: host, Origin: `http://${host}` })
        .send({ personId: ines?.personId });
    const answer = await signIn('localhost');
    expect(answer.body).toMatchObject({ name: 'Ines Okoro', isDemo: true });
    expect((await signIn('rebound.example')).status).toBe(404);
  });

  it.each(['combwright.example', '192.168.1.5:8080', 'localhost.example', '127.0.0.1.example'])(
    'is not there at %s',
    async (host) => {
      await startDemo();
      expect((await list(host)).status).toBe(404);
    },
  );

  it('is not there behind a proxy', async () => {
    await startDemo();
    expect((await list('localhost', { 'X-Forwarded-For': '198.51.100.7' })).status).toBe(404);
  });

  it('is not there while listening elsewhere', async () => {
    await startDemo({ config: { host: '0.0.0.0' } });
    expect((await list('localhost')).status).toBe(404);
  });

  it('is not there in a real installation', async () => {
    await startDemo({ kind: 'team' });
    expect((await list('localhost')).status).toBe(404);
    const [anybody] = server.store.sqlite.prepare('select id from users').all() as { id: string }[];
    const answer = await request(server.app)
      .post('/api/v1/auth/demo-sign-in')
      .set({ Host: 'localhost', Origin: 'http://localhost' })
      .send({ personId: anybody?.id });
    expect(answer.status).toBe(404);
  });
});
