import { defineConfig } from '@playwright/test';
const port = Number(process.env.E2E_PORT ?? 3199);
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
export default defineConfig({
  testDir: './tests/e2e',
  workers: 1,
  timeout: 20_000,
  reporter: [['list']],
  use: {
    baseURL: `http://localhost:${port}`,
    launchOptions: { executablePath: process.env.CHROMIUM ?? '/usr/bin/chromium', args: chromiumArgs },
    trace: 'retain-on-failure',
  },
  projects: [
    {
      name: 'phone',
      use: { viewport: { width: 390, height: 844 }, hasTouch: true, isMobile: true, deviceScaleFactor: 2 },
    },
    { name: 'desktop', use: { viewport: { width: 1440, height: 900 } } },
  ],
  webServer: {
    command: 'node build/server.mjs',
    url: `http://localhost:${port}/api/health`,
    env: { PORT: String(port), DATA_DIR: 'test-results-data', WEB_DIR: process.env.WEB_DIR ?? 'dist' },
    reuseExistingServer: false,
    timeout: 60_000,
  },
});
