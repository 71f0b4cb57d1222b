// Makes a fresh clone ready; does nothing when all is up to date. Plain Node: runs before any package is there.
//   --test   also what the tests need (Chromium, NumPy, sox, unzip)     --bench  also the peers' compiler and FFTW
import { execFileSync } from 'node:child_process';
import { createHash } from 'node:crypto';
import {
  existsSync,
  mkdirSync,
  readFileSync,
  readdirSync,
  renameSync,
  rmSync,
  statSync,
  symlinkSync,
  writeFileSync,
} from 'node:fs';
import path from 'node:path';

const forTest = process.argv.includes('--test');
const forBench = process.argv.includes('--bench');
process.chdir(path.resolve(import.meta.dirname, '..'));
const env = { ...process.env, EXPO_OFFLINE: '1', EXPO_NO_TELEMETRY: '1', CI: '1', DEBIAN_FRONTEND: 'noninteractive' };
delete env.NODE_ENV;

function run(cmd, ...args) {
  console.log(`> ${cmd} ${args.join(' ')}`);
  execFileSync(cmd, args, { stdio: 'inherit', env });
}
function stop(...lines) {
  for (const line of lines) console.error(line);
  process.exit(1);
}
function hash(entries) {
  const h = createHash('sha256');
  const walk = (p) => {
    if (!existsSync(p)) return;
    if (statSync(p).isDirectory()) for (const n of readdirSync(p).sort()) walk(path.join(p, n));
    else h.update(p).update('\0').update(readFileSync(p)).update('\0');
  };
  entries.forEach(walk);
  return h.digest('hex');
}
const bin = (n) => path.join('node_modules', '.bin', n);
function once(stampFile, stamp, work) {
  if (existsSync(stampFile) && readFileSync(stampFile, 'utf8') === stamp) return;
  work();
  mkdirSync(path.dirname(stampFile), { recursive: true });
  writeFileSync(stampFile, stamp);
}
function has(command) {
  try {
    execFileSync(command, ['--version'], { stdio: 'ignore' });
    return true;
  } catch (error) {
    return error.code !== 'ENOENT';
  }
}

// 1. packages. Not package.json: a script edit is no reason for npm ci
once('node_modules/.stamp', hash(['package-lock.json', 'tools']) + process.version, () => {
  try {
    run('npm', 'ci', '--include=dev', '--no-audit', '--no-fund', '--loglevel=error');
  } catch {
    const missing = ['python3', 'make', 'g++'].filter((command) => !has(command));
    stop(
      '',
      'The packages were not installed; the reason stands above.',
      missing.length > 0
        ? `The database package is compiled here and needs python3, make and g++; missing: ${missing.join(', ')}.`
        : "The database package is compiled here; it also needs Node's headers.",
      'On Debian: apt-get install python3 make g++ libnode-dev',
      "Headers kept elsewhere: npm config set nodedir <folder that holds Node's include/node>",
    );
  }
});

// 2. the drawing engine's module into public/, which git ignores there
once('public/.stamp', hash(['scripts/copy-assets.mjs', 'package-lock.json']), () =>
  run('node', 'scripts/copy-assets.mjs'),
);

// the sample engine beside it, compiled from its source
once('public/wasm/.stamp', hash(['lib/synth/assembly', 'scripts/build-engine.mjs', 'package-lock.json']), () =>
  run('node', 'scripts/build-engine.mjs'),
);

// 3. web app: exported beside the old one, then swapped in
const web = [
  'app',
  'components',
  'lib',
  'assets',
  'public',
  'app.json',
  'babel.config.js',
  'metro.config.js',
  'tsconfig.json',
  'package-lock.json',
];
once('dist/.stamp', hash([...web, 'scripts/compress.mjs']), () => {
  run(bin('expo'), 'export', '--platform', 'web', '--output-dir', 'dist.next');
  run('node', 'scripts/compress.mjs', 'dist.next');
  rmSync('dist.old', { recursive: true, force: true });
  if (existsSync('dist')) renameSync('dist', 'dist.old'); // a server may be reading it
  renameSync('dist.next', 'dist');
  rmSync('dist.old', { recursive: true, force: true });
});

// 4. server, its threads and the command line (0.1 s: always); npx combwright runs build/cli.mjs
run('node', 'scripts/build-server.mjs');
if (!existsSync(bin('combwright'))) symlinkSync('../../build/cli.mjs', bin('combwright'));

// 5. what only the tests or the benches need
function debian(packages) {
  const missing = packages.filter(({ found }) => !found()).map(({ name }) => name);
  if (missing.length === 0) return;
  if (process.getuid?.() !== 0) {
    stop('', `Missing: ${missing.join(', ')}. On Debian: sudo apt-get install ${missing.join(' ')}`);
  }
  run('apt-get', 'update', '-qq');
  run('apt-get', 'install', '-y', '-qq', '--no-install-recommends', ...missing);
}
const hasNumpy = () => {
  try {
    execFileSync('/usr/bin/python3', ['-c', 'import numpy'], { stdio: 'ignore' });
    return true;
  } catch {
    return false;
  }
};
if (forTest) {
  const routes = readdirSync('app', { recursive: true }).sort().join('\n');
  once('.expo/types/.stamp', routes, () => run(bin('expo'), 'customize', 'tsconfig.json')); // typed routes
  debian([
    { name: 'chromium', found: () => existsSync(process.env.CHROMIUM ?? '/usr/bin/chromium') },
    { name: 'python3-numpy', found: hasNumpy },
    { name: 'sox', found: () => has('sox') },
    { name: 'unzip', found: () => has('unzip') },
  ]);
}
if (forBench) {
  debian([
    { name: 'python3-numpy', found: hasNumpy },
    { name: 'gcc', found: () => has('gcc') },
    { name: 'libfftw3-dev', found: () => existsSync('/usr/include/fftw3.h') },
  ]);
}
