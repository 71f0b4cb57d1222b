import { readFileSync } from 'node:fs';
import path from 'node:path';
import { build } from 'esbuild';
import type { BenchProfile, WaveformDocument } from '@/lib/synth';
import type { GoldenKind } from '../helpers/goldenOutputs.ts';
import { expect, test } from './support/test.ts';

// The same fixtures as tests/golden/lib/synth/digests.test.ts, there in Node, here in a worker of Chromium: the same bits in both.
const FIXTURES = path.resolve(import.meta.dirname, '../golden/fixtures');
const read = (name: string): unknown => JSON.parse(readFileSync(path.join(FIXTURES, name), 'utf8'));
const golden = read('digests.json') as { synthVersion: number; digests: Record<string, Record<GoldenKind, string>> };
const bench = (read('examples/int16.bench.json') as BenchProfile).content;
const WORKER = '/golden.worker.js';

test('golden digests are the same bits in a worker of the page', async ({ page }) => {
  const bundle = await build({
    entryPoints: [path.join(import.meta.dirname, 'support/goldenWorker.ts')],
    bundle: true,
    write: false,
    platform: 'browser',
    format: 'iife',
    alias: { '@': path.resolve(import.meta.dirname, '../..') },
  });
  const body = bundle.outputFiles[0]!.text;
  // Served from our own origin: the content security policy allows no other worker.
  await page.route(`**${WORKER}`, (route) => route.fulfill({ contentType: 'text/javascript', body }));
  await page.goto('/sign-in');
  for (const [name, digests] of Object.entries(golden.digests)) {
    const { content } = read(`examples/${name}.combwright.json`) as WaveformDocument;
    const answer = await page.evaluate(
      ({ address, ...data }) =>
        new Promise((resolve, reject) => {
          const worker = new Worker(address);
          worker.onmessage = (event) => resolve(event.data);
          worker.onerror = (event) => reject(new Error(event.message || 'the worker did not start'));
          worker.postMessage(data);
        }),
      { address: WORKER, content, bench, kinds: Object.keys(digests) },
    );
    expect.soft(answer, name).toEqual({ synthVersion: golden.synthVersion, digests });
  }
});
