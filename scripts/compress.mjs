// Compresses what the server sends as it is: brotli beside each script, style, font, image and wasm file.
import { readFileSync, readdirSync, writeFileSync } from 'node:fs';
import path from 'node:path';
import { brotliCompressSync, constants } from 'node:zlib';

const dir = process.argv[2] ?? 'dist';
for (const name of readdirSync(dir, { recursive: true })) {
  const file = path.join(dir, name);
  if (!/\.(js|css|wasm|ttf|svg|html|json)$/.test(file)) continue;
  const bytes = readFileSync(file);
  if (bytes.length < 1024) continue;
  const quality = bytes.length > 4_000_000 ? 8 : 9;
  writeFileSync(`${file}.br`, brotliCompressSync(bytes, { params: { [constants.BROTLI_PARAM_QUALITY]: quality } }));
}
