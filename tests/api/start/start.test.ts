import { mkdtempSync, renameSync, rmSync, writeFileSync } from 'node:fs';
import net from 'node:net';
import os from 'node:os';
import path from 'node:path';
import Database from 'better-sqlite3';
import { openDatabase } from '@/db/openDatabase';
import { insertInstallation } from '@/server/features/auth/installationRepo';
import { killSpawned, spawnServer } from '../../helpers/spawnServer';

// Processes start in half a second here; the whole machine is shared.
jest.setTimeout(60_000);
let dir: string;

beforeEach(() => {
  dir = mkdtempSync(path.join(os.tmpdir(), 'combwright-start-'));
});
afterEach(() => {
  killSpawned();
  rmSync(dir, { recursive: true, force: true });
});

const post = (address: string, url: string, body: object) =>
  fetch(address + url, {
    method: 'POST',
    headers: { 'Content-Type': 'application/json', Origin: address },
    body: JSON.stringify(body),
  });

describe('a start', () => {
  it('in an empty directory asks for the first administrator, with a code that no log holds', async () => {
    const server = spawnServer({ DATA_DIR: dir });
    const address = await server.ready;
    await fetch(`${address}/api/v1/session`);
    const code = /with this code: (\S+)/.exec(server.out())?.[1] ?? '';
    const account = { name: 'Fay First', email: 'fay@example.org', password: 'a long enough password' };
    expect((await post(address, '/api/v1/auth/first-run', { code, ...account })).status).toBe(200);
    expect(server.err()).not.toContain(code);
    expect(server.err()).toContain('"requestId"');
    server.process.kill('SIGTERM');
    expect(await server.exitCode).toBe(0);

    const again = spawnServer({ DATA_DIR: dir });
    await again.ready;
    expect(again.out()).not.toContain('code');
  });

  it('makes a new code each time until one was used', async () => {
    const codes: string[] = [];
    for (let i = 0; i < 2; i += 1) {
      const server = spawnServer({ DATA_DIR: dir });
      await server.ready;
      while (!server.out().includes('code: ')) await new Promise((resolve) => setTimeout(resolve, 20));
      codes.push(server.out().split('code: ')[1] ?? '');
      server.process.kill('SIGTERM');
      await server.exitCode;
    }
    expect(codes[0]).not.toBe(codes[1]);
  });

  it('on a directory in use is refused with a sentence; a killed holder holds nothing', async () => {
    const first = spawnServer({ DATA_DIR: dir });
    await first.ready;
    const second = spawnServer({ DATA_DIR: dir });
    expect(await second.exitCode).toBe(1);
    expect(second.err().trim()).toBe(
      `Another server uses ${dir} already. Stop it first, or set DATA_DIR to another directory.`,
    );
    first.process.kill('SIGKILL');
    await first.exitCode;
    await expect(spawnServer({ DATA_DIR: dir }).ready).resolves.toContain('http://127.0.0.1:');
  });

  it.each([
    ['a file', '', /file is a file, not a directory\. Set DATA_DIR to another directory\.$/],
    ['a damaged database', 'combwright.db', /^A database in .* cannot be read: it is damaged or no database\. /],
    ['a damaged lock', 'lock.db', /^A database in .* cannot be read/],
  ])('on %s is refused with a sentence, without a stack', async (_name, file, words) => {
    const place = path.join(dir, file === '' ? 'file' : file);
    writeFileSync(place, 'no database at all, and longer than the head of one '.repeat(20));
    const server = spawnServer({ DATA_DIR: file === '' ? place : dir });
    expect(await server.exitCode).toBe(1);
    expect(server.err().trim()).toMatch(words);
    expect(server.err()).not.toMatch(/\n\s+at /);
  });

  it('without a page says so', async () => {
    const server = spawnServer({ DATA_DIR: dir, WEB_DIR: path.join(dir, 'none') });
    await server.ready;
    while (!server.out().includes('code: ')) await new Promise((resolve) => setTimeout(resolve, 20));
    expect(server.out()).toContain(`The page is not in ${path.join(dir, 'none')}`);
  });

  it('on a taken port says so', async () => {
    const taken = net.createServer().listen(0, '127.0.0.1');
    await new Promise((resolve) => taken.once('listening', resolve));
    const { port } = taken.address() as net.AddressInfo;
    const server = spawnServer({ DATA_DIR: dir, PORT: String(port) });
    expect(await server.exitCode).toBe(1);
    expect(server.err().trim()).toBe(`Port ${port} is taken already. Set PORT to another one.`);
    taken.close();
  });

  it.each([
    [{ PORT: 'many' }, 'The settings are not right. PORT: is not a number'],
    [
      { PUBLIC_URL: 'waveforms.example.org' },
      'The settings are not right. PUBLIC_URL: is not an http or https address',
    ],
    [{ PUBLIC_URL: 'https://example.org/waveforms' }, 'The settings are not right. PUBLIC_URL: must not have a path'],
  ])('with %j is refused', async (env, words) => {
    const server = spawnServer({ DATA_DIR: dir, ...env });
    expect(await server.exitCode).toBe(1);
    expect(server.err().trim()).toBe(words);
  });
});

describe('a demo', () => {
  it('is five people, three waveforms in three states, two benches and one proven pack; once', async () => {
    const first = spawnServer({ DATA_DIR: dir, DEMO: 'yes' });
    await first.ready;
    first.process.kill('SIGTERM');
    expect(await first.exitCode).toBe(0);
    const second = spawnServer({ DATA_DIR: dir, DEMO: 'yes' });
    await second.ready;
    second.process.kill('SIGTERM');
    await second.exitCode;

    const db = new Database(path.join(dir, 'combwright.db'), { readonly: true });
    const all = (sql: string) => db.prepare(sql).raw().all().flat();
    expect(all('select count(*) from users')).toEqual([5]);
    expect(all('select state from pack_jobs')).toEqual(['done']);
    expect(all('select file_name from packs')).toEqual([expect.stringMatching(/-e1-[0-9a-f]{8}\.zip$/)]);
    expect(all('select count(*) from bench_profiles')).toEqual([2]);
    expect(all('select title from waveforms').length).toBe(3);
    expect(all('select state from revision_states order by seq')).toEqual(['inReview', 'inReview', 'released']);
    expect(all('select count(*) from sessions')).toEqual([0]);
    db.close();
  });

  it.each([
    ['another HOST', { HOST: '0.0.0.0' }, /listens on 127\.0\.0\.1 only, not on 0\.0\.0\.0/],
    ['production', { NODE_ENV: 'production' }, /not for production/],
  ])('is refused with %s, before and after it was made', async (_name, env, words) => {
    const before = spawnServer({ DATA_DIR: dir, DEMO: 'yes', ...env });
    expect(await before.exitCode).toBe(1);
    expect(before.err()).toMatch(words);
    // Nothing was made by the refused start; now it is a demo.
    const store = openDatabase(path.join(dir, 'combwright.db'));
    store.write((tx) => insertInstallation(tx, 'demo', 1));
    store.close();
    // DEMO says what an empty directory becomes, not what this one is.
    const after = spawnServer({ DATA_DIR: dir, DEMO: 'no', ...env });
    expect(await after.exitCode).toBe(1);
    expect(after.err()).toMatch(words);
  });
});

describe('the end', () => {
  it.each(['SIGTERM', 'SIGINT'] as const)(
    'comes within 5 s of %s, even with a request that never ends',
    async (signal) => {
      const server = spawnServer({ DATA_DIR: dir });
      const address = new URL(await server.ready);
      const socket = net.connect(Number(address.port), '127.0.0.1');
      socket.on('error', () => undefined);
      socket.write(
        'POST /api/v1/auth/sign-in HTTP/1.1\r\nHost: localhost\r\nContent-Length: 100\r\nContent-Type: application/json\r\n\r\n{',
      );
      await new Promise((resolve) => setTimeout(resolve, 200));
      server.process.kill(signal);
      // The server's own watch ends it after 4.9 s with code 1, so 0 says that it was done before that.
      expect(await server.exitCode).toBe(0);
      socket.destroy();
    },
  );

  it('comes when the database file vanishes: the request is refused, the reason said', async () => {
    const server = spawnServer({ DATA_DIR: dir });
    const address = await server.ready;
    while (!server.out().includes('code: ')) await new Promise((resolve) => setTimeout(resolve, 20));
    const code = server.out().split('code: ')[1]?.trim();
    renameSync(path.join(dir, 'combwright.db'), path.join(dir, 'elsewhere.db'));
    const account = { name: 'Fay First', email: 'fay@example.org', password: 'a long enough password' };
    const answer = await post(address, '/api/v1/auth/first-run', { code, ...account });
    expect(answer.status).toBe(503);
    expect(await answer.json()).toMatchObject({ code: 'stopping' });
    expect(await server.exitCode).toBe(1);
    expect(server.err()).toContain('vanished or was replaced. The server stops');
  });
});
