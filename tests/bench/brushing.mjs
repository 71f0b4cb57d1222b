// Script time per painted frame while the brush moves over 2048 × 14 cells at 1440 × 900, in the real page and Chromium.
import { spawn } from 'node:child_process';
import { existsSync, mkdtempSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { chromium } from '@playwright/test';

const LIMIT_MS = 8.3;
const ROUNDS = 5;
const MOVES = 60;
const browserFlags = ['--no-sandbox', '--use-gl=angle', '--use-angle=swiftshader', '--enable-unsafe-swiftshader'];

const median = (values) => values.toSorted((a, b) => a - b)[values.length >> 1];

/** A server on a demo team of its own; resolves with its address. */
function startDemo(dataDir) {
  const child = spawn(process.execPath, ['build/server.mjs'], {
    env: { ...process.env, PORT: '0', DATA_DIR: dataDir, DEMO: 'yes', LOG_LEVEL: 'warn' },
    stdio: ['ignore', 'pipe', 'inherit'],
  });
  const address = new Promise((resolve, reject) => {
    let out = '';
    child.stdout.on('data', (chunk) => {
      out += chunk;
      const found = /is at (http\S+)/.exec(out)?.[1];
      if (found) resolve(found);
    });
    child.once('exit', (code) => reject(new Error(`The server ended with ${code}.`)));
  });
  return { child, address };
}

async function openTable(page, origin) {
  const ask = async (method, url, data) => {
    const answer = await page.request.fetch(`${origin}/api/v1${url}`, { method, headers: { Origin: origin }, data });
    return answer.json();
  };
  const { people } = await ask('GET', '/auth/demo-people');
  await ask('POST', '/auth/demo-sign-in', { personId: people.find(({ name }) => name === 'Ines Okoro').personId });
  const { items } = await ask('GET', '/waveforms');
  const ladder = items.find(({ title }) => title.startsWith('PA ladder'));
  // What is released cannot change: a copy is drawn on.
  const document = await ask('GET', `/revisions/${ladder.revisionId}/document`);
  const { waveformId } = await ask('POST', '/waveforms', document);
  await page.goto(`${origin}/waveforms/${waveformId}`);
  await page.waitForFunction(() => {
    const hook = window.__combwrightTable;
    return hook && hook.live()?.changeCount === hook.session().changeCount && hook.probe()?.frames > 0;
  });
}

/** One stroke over the whole grid: the script times of the frames painted meanwhile. */
async function brush(page, box) {
  const frames = () => page.evaluate(() => window.__combwrightTable.probe().frames);
  const first = await frames();
  await page.mouse.move(box.x + 40, box.y + 20);
  await page.mouse.down();
  for (let i = 0; i < MOVES; i++)
    await page.mouse.move(box.x + 40 + ((i * 37) % (box.width - 80)), box.y + 20 + ((i * 11) % (box.height - 40)));
  await page.mouse.up();
  return page.evaluate((from) => {
    const { frames: now, scriptMs } = window.__combwrightTable.probe();
    return scriptMs.slice(-(now - from));
  }, first);
}

/**
 * { medianMs, quietMs (the least disturbed round's), limitMs, ratio: limit over median (1 and more is within it), frames }, or null where
 * there is no Chromium.
 */
export async function measureBrushing() {
  const executablePath = process.env.CHROMIUM ?? '/usr/bin/chromium';
  if (!existsSync(executablePath)) return null;
  const dataDir = mkdtempSync(join(tmpdir(), 'combwright-brush-'));
  const { child, address } = startDemo(dataDir);
  const browser = await chromium.launch({ executablePath, args: browserFlags });
  try {
    const page = await browser.newPage({ viewport: { width: 1440, height: 900 } });
    await page.addInitScript(() => {
      if (location.protocol.startsWith('http')) localStorage.setItem('combwright.test', '1');
    });
    await openTable(page, await address);
    await page
      .getByRole('button', { name: /^16-QAM, / })
      .first()
      .click();
    const box = await page.getByRole('application', { name: /^Grid,/ }).boundingBox();
    await brush(page, box); // warm
    const rounds = [];
    for (let round = 0; round < ROUNDS; round++) rounds.push(await brush(page, box));
    const tidy = (value) => Number(value.toFixed(2));
    const medianMs = median(rounds.flat());
    const quietMs = Math.min(...rounds.map(median));
    const frames = rounds.flat().length;
    return {
      medianMs: tidy(medianMs),
      quietMs: tidy(quietMs),
      limitMs: LIMIT_MS,
      ratio: tidy(LIMIT_MS / medianMs),
      frames,
    };
  } finally {
    await browser.close();
    child.removeAllListeners('exit');
    child.kill('SIGTERM');
    await new Promise((resolve) => child.once('exit', resolve));
    rmSync(dataDir, { recursive: true, force: true });
  }
}
