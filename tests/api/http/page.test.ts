import { mkdirSync, mkdtempSync, rmSync, writeFileSync } from 'node:fs';
import os from 'node:os';
import path from 'node:path';
import { brotliCompressSync } from 'node:zlib';
import request from 'supertest';
import { startTestServer, type TestServer } from '../../helpers/testServer';

let server: TestServer;
let webDir: string;
const SCRIPT = `console.log("${'page '.repeat(1000)}")`;

beforeAll(async () => {
  webDir = mkdtempSync(path.join(os.tmpdir(), 'combwright-web-'));
  mkdirSync(path.join(webDir, '_expo/static/js'), { recursive: true });
  writeFileSync(path.join(webDir, 'index.html'), '<!doctype html><title>Combwright</title>');
  writeFileSync(path.join(webDir, '_expo/static/js/entry-0f3a.js'), SCRIPT);
  writeFileSync(path.join(webDir, '_expo/static/js/entry-0f3a.js.br'), brotliCompressSync(SCRIPT));
  writeFileSync(path.join(webDir, 'plain.js'), SCRIPT);
  writeFileSync(path.join(webDir, 'engine.wasm'), 'not really');
  writeFileSync(path.join(webDir, 'engine.wasm.br'), brotliCompressSync('not really'));
  server = await startTestServer({ config: { webDir } });
});
afterAll(async () => {
  await server.close();
  rmSync(webDir, { recursive: true, force: true });
});

const get = (url: string) => request(server.app).get(url);

describe('the page', () => {
  it.each(['/', '/waveforms', '/waveforms/01J00000000000000000000000/review'])('is answered at %s', async (url) => {
    const answer = await get(url);
    expect(answer.text).toContain('<title>Combwright</title>');
    expect(answer.headers['cache-control']).toBe('no-cache');
  });

  it('keeps hashed files for ever, compressed beforehand', async () => {
    const answer = await get('/_expo/static/js/entry-0f3a.js')
      .set('Accept-Encoding', 'br, gzip')
      .buffer(true)
      .parse((_res, done) => done(null, ''));
    expect(answer.headers).toMatchObject({
      'cache-control': 'public, max-age=31536000, immutable',
      'content-encoding': 'br',
      'content-type': 'text/javascript; charset=utf-8',
    });
    expect(answer.headers.vary).toContain('Accept-Encoding');
  });

  it('is plain for who cannot read it, gzip where there is no other', async () => {
    const plain = await get('/_expo/static/js/entry-0f3a.js').set('Accept-Encoding', 'identity');
    expect(plain.headers['content-encoding']).toBeUndefined();
    expect(plain.text).toBe(SCRIPT);
    const gzip = await get('/plain.js').set('Accept-Encoding', 'gzip');
    expect(gzip.headers['content-encoding']).toBe('gzip');
    expect(gzip.headers['cache-control']).toBe('no-cache');
  });

  it('names the type of compressed WebAssembly', async () => {
    const answer = await get('/engine.wasm')
      .set('Accept-Encoding', 'br')
      .buffer(true)
      .parse((_res, done) => done(null, ''));
    expect(answer.headers).toMatchObject({ 'content-type': 'application/wasm', 'content-encoding': 'br' });
  });

  it.each(['/_expo/static/js/gone.js', '/..%2f..%2fpackage.json', '/%00.js', '/%zz.js'])(
    'has no file at %s',
    async (url) => {
      const answer = await get(url);
      expect([400, 403, 404]).toContain(answer.status);
      expect(answer.headers['content-type']).toContain('application/problem+json');
    },
  );
});

describe('headers', () => {
  it('let nothing in from elsewhere and no inline script run', async () => {
    const { headers } = await get('/');
    const policy = String(headers['content-security-policy']);
    expect(policy).toContain("script-src 'self' 'wasm-unsafe-eval';");
    expect(policy).toContain("style-src 'self' 'unsafe-inline'");
    expect(policy).toContain("worker-src 'self'");
    expect(policy).toContain("frame-ancestors 'none'");
    expect(policy).not.toContain('upgrade-insecure-requests');
    expect(headers['strict-transport-security']).toBeUndefined();
    expect(headers['x-content-type-options']).toBe('nosniff');
    expect(headers['x-powered-by']).toBeUndefined();
  });

  it('ask for https only where PUBLIC_URL is https', async () => {
    const secure = await startTestServer({ config: { webDir, publicOrigin: 'https://waveforms.example.org' } });
    expect((await request(secure.app).get('/')).headers['strict-transport-security']).toContain('max-age=');
    await secure.close();
  });
});

describe('the API', () => {
  it('says that it is well without a session', async () => {
    expect((await get('/api/health')).body).toEqual({ status: 'ok' });
  });

  it.each(['/api', '/api/v1/none', '/api/v2/session'])('has nothing at %s', async (url) => {
    const answer = await get(url);
    expect(answer.status).toBe(404);
    expect(answer.body.code).toBe('not_found');
  });

  it('hides what went wrong inside, and logs it with the request id', async () => {
    server.store.sqlite.exec('alter table users rename to users_gone');
    const answer = await server.clientOf('combwright=anything').get('/api/v1/session');
    server.store.sqlite.exec('alter table users_gone rename to users');
    expect(answer.status).toBe(500);
    expect(answer.body).toMatchObject({ code: 'internal', detail: 'The server failed.' });
    const line = server.logLines.find((entry) => entry.msg === 'request failed');
    expect(line).toMatchObject({ requestId: answer.headers['x-request-id'] });
    expect(JSON.stringify(line)).toContain('no such table');
    expect(answer.text).not.toContain('table');
  });
});
