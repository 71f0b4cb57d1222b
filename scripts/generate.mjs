// Writes the files that are made from code: JSON Schemas and examples. Run after a change of lib/document's schemas.
import { mkdirSync, writeFileSync } from 'node:fs';
import path from 'node:path';
import { build } from 'esbuild';

const bundled = await build({
  entryPoints: ['lib/document/generatedFiles.ts'],
  bundle: true,
  write: false,
  platform: 'node',
  target: 'node20',
  format: 'esm',
  logLevel: 'warning',
});
const { generatedFiles } = await import(
  `data:text/javascript;base64,${Buffer.from(bundled.outputFiles[0].contents).toString('base64')}`
);
for (const file of generatedFiles()) {
  mkdirSync(path.dirname(file.path), { recursive: true });
  writeFileSync(file.path, file.text);
  console.log(file.path);
}
