// Writes the files that are made from code: JSON Schemas, examples and the API's description.
// Run after a change of lib/document's schemas or of a contract.
import { mkdirSync, writeFileSync } from 'node:fs';
import path from 'node:path';
import { build } from 'esbuild';

async function load(entry) {
  const outfile = path.resolve('build', `generate-${path.basename(entry, '.ts')}.mjs`);
  await build({
    entryPoints: [entry],
    outfile,
    bundle: true,
    platform: 'node',
    target: 'node20',
    format: 'esm',
    packages: 'external',
    logLevel: 'warning',
  });
  return import(outfile);
}

function write(file) {
  mkdirSync(path.dirname(file.path), { recursive: true });
  writeFileSync(file.path, file.text);
  console.log(file.path);
}

const { generatedFiles } = await load('lib/document/generatedFiles.ts');
generatedFiles().forEach(write);

const { buildOpenApi } = await load('server/openapi.ts');
write({ path: 'openapi.json', text: `${JSON.stringify(buildOpenApi(), null, 2)}\n` });
