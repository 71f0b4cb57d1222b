import { buildSync } from 'esbuild';
import { mkdtempSync, rmSync } from 'node:fs';
import os from 'node:os';
import path from 'node:path';
import { createAskFit } from '@/server/fit/fitThread';
import { openBench, smallDocument } from '@/tests/helpers/documents';

const buildDir = mkdtempSync(path.join(os.tmpdir(), 'combwright-fit-'));
beforeAll(() => {
  buildSync({
    entryPoints: ['server/fit/fit.worker.ts'],
    outfile: path.join(buildDir, 'fit.worker.mjs'),
    bundle: true,
    platform: 'node',
    format: 'esm',
    target: 'node20',
  });
});
afterAll(() => rmSync(buildDir, { recursive: true, force: true }));

const texts = {
  documentText: JSON.stringify(smallDocument()),
  profileJson: JSON.stringify(openBench({ granularitySamples: 256 })),
};

test('a large document is judged in a thread, with the answer that the server itself would give', async () => {
  const question = { kind: 'fit', ...texts, levels: null } as const;
  const inThread = await createAskFit(buildDir, 0)(question);
  expect(inThread).toEqual(await createAskFit(buildDir)(question));
  expect(inThread.findings.find(({ check }) => check === 'granularity')).toMatchObject({ verdict: 'misses' });
});

test('a pack is refused from there with the finding’s own words; questions wait for one another', async () => {
  const ask = createAskFit(buildDir, 0);
  const [fit, pack] = await Promise.all([
    ask({ kind: 'fit', ...texts, levels: null }),
    ask({ kind: 'pack', ...texts, state: 'draft' }),
  ]);
  const missed = fit.findings.filter(({ hard, verdict }) => hard && verdict === 'misses').map(({ words }) => words);
  expect(missed).not.toEqual([]);
  expect(pack.refusal).toMatchObject({ code: 'limit_missed', message: missed.join(' ') });
  expect(pack.bytes).toBeGreaterThan(0);
});

test('a question that fails in the thread is an error, and the next one is answered', async () => {
  const ask = createAskFit(buildDir, 0);
  await expect(ask({ kind: 'fit', ...texts, documentText: '{', levels: null })).rejects.toThrow();
  expect((await ask({ kind: 'fit', ...texts, levels: 'measuring' })).findings).toHaveLength(13);
});
