import { mkdtempSync, readdirSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import path from 'node:path';
import type { BenchContent } from '@/lib/synth';
import { sidedness } from '@/server/cli/sidedness';
import { verifyPack } from '@/server/packs/verifyPack';
import { openBench } from '../../../helpers/documents';

let folder: string;
beforeEach(() => (folder = mkdtempSync(path.join(tmpdir(), 'sidedness-'))));
afterEach(() => rmSync(folder, { recursive: true, force: true }));

function run(overrides: Partial<BenchContent>) {
  const bench = path.join(folder, 'bench.json');
  writeFileSync(bench, JSON.stringify(openBench(overrides)));
  const out = path.join(folder, 'out.zip');
  const options = {
    signal: new AbortController().signal,
    threads: { file: 'unused: too short for threads', count: 1 },
  };
  return sidedness({ bench, out, json: false }, options);
}

test('makes a proven pack of one profile and says what to see', async () => {
  const outcome = await run({ layout: 'split', word: 'int8', bits: 8, leastSamples: 100 });
  expect(outcome).toMatchObject({ exitCode: 0, errors: [] });
  expect(outcome.lines.filter((line) => line.startsWith('vector '))).toHaveLength(2);
  expect(outcome.lines.at(-1)).toContain('On an analyser the tone stands 2 MHz above the carrier.');
  expect(await verifyPack(path.join(folder, 'out.zip'))).toMatchObject({ ok: true });
});

test('a profile without room for it is refused with its place, and nothing is left', async () => {
  const outcome = await run({ mostSamples: 15 });
  expect(outcome.exitCode).toBe(1);
  expect(outcome.errors.join(' ')).toContain('/content/mostSamples');
  expect(readdirSync(folder)).toEqual(['bench.json']);
});
