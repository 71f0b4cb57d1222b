import { execFileSync } from 'node:child_process';
import { cpSync, mkdirSync } from 'node:fs';
import { createRequire } from 'node:module';
import { dirname } from 'node:path';
const require = createRequire(import.meta.url);
mkdirSync('public/wasm', { recursive: true });
const skia = dirname(require.resolve('@shopify/react-native-skia/package.json')); // so that .js and .wasm always match
cpSync(require.resolve('canvaskit-wasm/bin/full/canvaskit.wasm', { paths: [skia] }), 'public/canvaskit.wasm');
execFileSync('node_modules/.bin/asc', ['lib/synth/assembly/kernel.ts', '--outFile', 'public/wasm/kernel.wasm', '--optimizeLevel', '3',
  '--runtime', 'stub', '--enable', 'simd', '--use', 'abort=', '--noAssert'], { stdio: 'inherit' });
