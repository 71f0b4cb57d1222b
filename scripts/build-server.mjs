// Bundles the server, its threads and the command line into build/. With --watch it serves while developing.
import { spawn } from 'node:child_process';
import { chmodSync } from 'node:fs';
import { build, context } from 'esbuild';

const options = {
  entryPoints: {
    server: 'server/main.ts',
    cli: 'server/cli/main.ts',
    'render.worker': 'server/packs/render.worker.ts',
    'work.worker': 'server/packs/pool/work.worker.ts',
    'body.worker': 'server/http/body.worker.ts',
    'fit.worker': 'server/fit/fit.worker.ts',
    'measure.worker': 'server/figures/measure.worker.ts',
  },
  outdir: process.env.BUILD_DIR ?? 'build',
  outExtension: { '.js': '.mjs' },
  bundle: true,
  platform: 'node',
  target: 'node20',
  format: 'esm',
  packages: 'external',
  sourcemap: true,
  banner: { js: '#!/usr/bin/env node' },
  logLevel: 'warning',
};
await build(options);
chmodSync(`${options.outdir}/cli.mjs`, 0o755);
if (process.argv.includes('--watch')) {
  await (await context(options)).watch();
  spawn(process.execPath, ['--watch', '--enable-source-maps', `${options.outdir}/server.mjs`], { stdio: 'inherit' });
}
