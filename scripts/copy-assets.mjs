// The drawing engine's module into public/, which git ignores there; from the package that draws, so that both always match.
import { cpSync, mkdirSync } from 'node:fs';
import { createRequire } from 'node:module';
import { dirname } from 'node:path';

const require = createRequire(import.meta.url);
mkdirSync('public', { recursive: true });
const skia = dirname(require.resolve('@shopify/react-native-skia/package.json'));
cpSync(require.resolve('canvaskit-wasm/bin/full/canvaskit.wasm', { paths: [skia] }), 'public/canvaskit.wasm');
