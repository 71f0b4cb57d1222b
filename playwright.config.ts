import { defineConfig } from '@playwright/test';

const port = Number(process.env.E2E_PORT ?? 3199);
// Each run makes its own demo; E2E_DATA_DIR puts it elsewhere, e.g. where two runs share one checkout.
const dataDir = process.env.E2E_DATA_DIR ?? `test-results-data-${port}`;
const chromiumArgs = [
  '--headless',
  '--no-sandbox',
  '--disable-gpu',
  '--disable-quic',
  '--no-first-run',
  '--disable-background-networking',
  '--disable-component-update',
  '--disable-sync',
  // WebGL (CanvasKit needs it) in software: without these Chromium gives no WebGL context at all
  '--use-gl=angle',
  '--use-angle=swiftshader',
  '--enable-unsafe-swiftshader',
];

/** What does not hang on the size of the screen runs once. */
const sizeless = ['**/goldenDigests.spec.ts', '**/vectorDigest.spec.ts', '**/autosave.spec.ts'];

export default defineConfig({
  testDir: './tests/e2e',
  outputDir: process.env.E2E_OUTPUT_DIR ?? 'test-results/browser',
  workers: 1, // one server, one demo, two cores
  timeout: 60_000,
  expect: { timeout: 15_000 },
  reporter: [['list']],
  use: {
    baseURL: `http://localhost:${port}`,
    launchOptions: { executablePath: process.env.CHROMIUM ?? '/usr/bin/chromium', args: chromiumArgs },
    trace: 'retain-on-failure',
    timezoneId: 'UTC',
    locale: 'en-GB',
  },
  projects: [
    {
      name: 'phone',
      testIgnore: sizeless,
      use: { viewport: { width: 390, height: 844 }, hasTouch: true, isMobile: true, deviceScaleFactor: 2 },
    },
    {
      name: 'desktop',
      testIgnore: ['**/operatorSlow.spec.ts'], // a phone's page
      use: { viewport: { width: 1440, height: 900 } },
    },
  ],
  webServer: {
    // A directory of an earlier run would bring its waveforms along. The server says its address once the demo team is whole.
    command: `rm -rf '${dataDir}' && exec node --enable-source-maps build/server.mjs`,
    wait: { stdout: /Combwright is at/ },
    env: {
      PORT: String(port),
      DATA_DIR: dataDir,
      DEMO: 'yes',
      WEB_DIR: process.env.WEB_DIR ?? 'dist',
      LOG_LEVEL: 'warn',
    },
    reuseExistingServer: false,
    gracefulShutdown: { signal: 'SIGTERM', timeout: 8000 },
    timeout: 120_000,
  },
});
