import { envSchema, isLoopback, readConfig, settings, StartRefused } from '@/server/config';

const root = '/srv/combwright';

it('every setting that is read is documented, and no other', () => {
  expect(settings.map((setting) => setting.name).sort()).toEqual(Object.keys(envSchema.shape).sort());
});

it('without settings it is a demo on this machine', () => {
  expect(readConfig({}, root)).toMatchObject({
    port: 8080,
    host: '127.0.0.1',
    dataDir: `${root}/data-demo`,
    wantsDemo: true,
    publicOrigin: null,
    trustsProxy: false,
    packBytesMost: 8 * 2 ** 30,
    webDir: `${root}/dist`,
  });
});

it.each([
  ['production', { NODE_ENV: 'production' }, `${root}/data`, false],
  ['a directory of its own', { DATA_DIR: '/var/lib/combwright' }, '/var/lib/combwright', false],
  ['a demo asked for', { DATA_DIR: 'elsewhere', DEMO: 'yes' }, `${root}/elsewhere`, true],
  ['an empty value, as compose files leave it', { DATA_DIR: '', DEMO: '' }, `${root}/data-demo`, true],
])('with %s', (_name, env, dataDir, wantsDemo) => {
  expect(readConfig(env, root)).toMatchObject({ dataDir, wantsDemo });
});

it('takes the origin of PUBLIC_URL', () => {
  expect(readConfig({ PUBLIC_URL: 'https://Waves.example.org:443/' }, root).publicOrigin).toBe(
    'https://waves.example.org',
  );
});

it.each([
  [{ PORT: '70000' }],
  [{ PORT: '80.5' }],
  [{ PUBLIC_URL: 'ftp://example.org' }],
  [{ PUBLIC_URL: 'https://example.org/?a=1' }],
  [{ TRUST_PROXY: 'perhaps' }],
  [{ PACK_BYTES_MOST: '0' }],
  [{ RENDER_WORKERS: '0' }],
  [{ RENDER_WORKERS: 'all' }],
  [{ LOG_LEVEL: 'loud' }],
])('refuses %j', (env) => {
  expect(() => readConfig(env, root)).toThrow(StartRefused);
});

it('says in words what is wrong with a setting', () => {
  const words = (env: Record<string, string>) => {
    try {
      readConfig(env, root);
    } catch (error) {
      return (error as Error).message;
    }
    return null;
  };
  expect(words({ PORT: '99999', LOG_LEVEL: 'loud' })).toBe(
    'The settings are not right. PORT: must be at most 65535; LOG_LEVEL: must be one of "fatal", "error", "warn", "info", "debug", "silent"',
  );
  expect(words({ PORT: 'x' })).toBe('The settings are not right. PORT: is not a number');
});

it.each([
  ['127.0.0.1', true],
  ['127.9.9.9', true],
  ['localhost', true],
  ['::1', true],
  ['0.0.0.0', false],
  ['::', false],
  ['127.0.0.1.example', false],
  ['192.168.0.1', false],
])('%s is a loopback address: %s', (host, is) => {
  expect(isLoopback(host)).toBe(is);
});
