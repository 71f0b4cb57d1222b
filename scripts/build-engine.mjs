// Compiles the sample engine (lib/synth/assembly) into public/wasm, which git ignores: the page fetches it, the server and the
// command line read it from the disk.
import { execFileSync } from 'node:child_process';
import { mkdirSync } from 'node:fs';
import { join, resolve } from 'node:path';

process.chdir(resolve(import.meta.dirname, '..'));
mkdirSync('public/wasm', { recursive: true });
execFileSync(
  process.execPath,
  [
    join('node_modules', 'assemblyscript', 'bin', 'asc.js'),
    'lib/synth/assembly/engine.ts',
    ...['--outFile', 'public/wasm/engine.wasm', '--optimizeLevel', '3', '--noAssert'],
    ...['--runtime', 'stub', '--use', 'abort=', '--enable', 'simd'],
  ],
  { stdio: 'inherit' },
);
