// Writes tests/golden/fixtures/digests.json: SHA-256 of every output of the example documents, beside the synthVersion
// they belong to. Run it only where synthVersion was raised, and say why in the commit.
import { createHash } from 'node:crypto';
import { mkdtempSync, readFileSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { build } from 'esbuild';

const EXAMPLES = [
  ...['plain', 'mixed-1', 'mixed-2', 'mixed-3', 'mixed-4', 'mixed-5'],
  ...['peak-clip', 'peak-tones', 'peak-phases', 'peak-seed'],
];
const fixtures = 'tests/golden/fixtures';
const directory = mkdtempSync(join(tmpdir(), 'combwright-digests-'));
try {
  const outfile = join(directory, 'golden.mjs');
  const contents = "export * from './tests/helpers/goldenOutputs'; export { synthVersion } from '@/lib/synth';";
  await build({
    stdin: { contents, resolveDir: '.', loader: 'ts' },
    outfile,
    bundle: true,
    platform: 'node',
    format: 'esm',
    alias: { '@': '.' },
  });
  const { goldenBytes, synthVersion } = await import(outfile);
  const read = (name) => JSON.parse(readFileSync(join(fixtures, 'examples', name), 'utf8'));
  const bench = read('int16.bench.json').content;
  const digests = {};
  for (const name of EXAMPLES) {
    const { content } = read(`${name}.combwright.json`);
    digests[name] = {};
    for (const kind of ['float64', 'float32', 'int16']) {
      digests[name][kind] = createHash('sha256')
        .update(goldenBytes(content, bench, kind))
        .digest('hex');
    }
  }
  writeFileSync(join(fixtures, 'digests.json'), `${JSON.stringify({ synthVersion, digests }, null, 2)}\n`);
} finally {
  rmSync(directory, { recursive: true, force: true });
}
