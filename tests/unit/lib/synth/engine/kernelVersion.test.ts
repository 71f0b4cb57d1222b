import { createHash } from 'node:crypto';
import { readdirSync, readFileSync } from 'node:fs';
import path from 'node:path';
import { createSampleEngine, type EngineExports } from '@/lib/synth';
import { kernelVersion } from '@/lib/synth/engine/sampleEngine';
import { openTestEngine } from '../../../../helpers/sampleEngine';

const folder = path.resolve(__dirname, '../../../../../lib/synth/assembly');

/** The sources without comments and blanks, in the order of their names. */
function sourcesDigest(): string {
  const hash = createHash('sha256');
  for (const name of readdirSync(folder)
    .filter((file) => file.endsWith('.ts'))
    .sort())
    hash.update(readFileSync(path.join(folder, name), 'utf8').replaceAll(/\/\*[^]*?\*\/|\/\/[^\n]*|\s/g, ''));
  return hash.digest('hex').slice(0, 16);
}

test('a change of the kernel raises its version', () => {
  // Where this fails: raise kernelVersion and builtVersion if a call or its meaning changed, then renew the digest.
  expect({ kernelVersion, sources: sourcesDigest() }).toEqual({ kernelVersion: 1, sources: 'b5a92d9967d7d25c' });
});

test('a module of another version is refused, before it computes anything', () => {
  const other = { builtVersion: () => kernelVersion + 1 } as unknown as EngineExports;
  expect(() => createSampleEngine(() => other)).toThrow('was built for version 2, not 1');
  expect(() => createSampleEngine(() => ({}) as unknown as EngineExports)).toThrow('was built for version 0, not 1');
  expect(() => openTestEngine()).not.toThrow();
});
