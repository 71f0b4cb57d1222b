// Runs every check and test, then closes with "N passed, N failed" alone on a line. A failing step does not hide the others.
import { spawn, spawnSync } from 'node:child_process';
import { mkdirSync, readFileSync, rmSync } from 'node:fs';
import path from 'node:path';

process.chdir(path.resolve(import.meta.dirname, '..'));
const results = 'test-results';
rmSync(results, { recursive: true, force: true });
mkdirSync(results, { recursive: true });
let passed = 0;
let failed = 0;

function step(title, command, args, env = {}) {
  console.log(`\n== ${title}`);
  const began = Date.now();
  const { status } = spawnSync(command, args, { stdio: 'inherit', env: { ...process.env, ...env } });
  console.log(`== ${title}: ${status === 0 ? 'passed' : 'failed'} in ${((Date.now() - began) / 1000).toFixed(0)} s`);
  return status === 0;
}
/** A step beside others: its words are printed together when it has ended. */
function stepAside(title, command, args) {
  const began = Date.now();
  const words = [];
  const child = spawn(command, args, { stdio: ['ignore', 'pipe', 'pipe'] });
  for (const stream of [child.stdout, child.stderr]) stream.on('data', (chunk) => words.push(chunk));
  return new Promise((resolve) => {
    child.on('error', (error) => {
      words.push(Buffer.from(`${error.message}\n`));
      resolve(false);
    });
    child.on('close', (status) => resolve(status === 0));
  }).then((ok) => {
    console.log(`\n== ${title}\n${Buffer.concat(words)}`.trimEnd());
    console.log(`== ${title}: ${ok ? 'passed' : 'failed'} in ${((Date.now() - began) / 1000).toFixed(0)} s`);
    return ok;
  });
}
function count(ok, counts) {
  if (!counts) {
    if (ok) passed++;
    else failed++;
    return;
  }
  passed += counts.passed;
  failed += counts.failed;
  if (!ok && counts.failed === 0) failed++; // a suite that did not even start
}
function read(file, pick) {
  try {
    return pick(JSON.parse(readFileSync(path.join(results, file), 'utf8')));
  } catch {
    return null;
  }
}

// The longest check beside the others: each takes one core.
const check = (name) => stepAside(name, 'npm', ['run', '--silent', name]);
const linted = check('lint');
for (const name of ['format', 'typecheck', 'deps', 'dead']) count(await check(name));
count(await linted);

const jestOk = step('unit, property, golden, api, visual', 'node_modules/.bin/jest', [
  '--maxWorkers=2',
  '--json',
  `--outputFile=${results}/jest.json`,
]);
count(
  jestOk,
  read('jest.json', (r) => ({ passed: r.numPassedTests, failed: r.numFailedTests + r.numRuntimeErrorTestSuites })) ?? {
    passed: 0,
    failed: 1,
  },
);

const browserOk = step('browser', 'node_modules/.bin/playwright', ['test', '--reporter=list,json'], {
  PLAYWRIGHT_JSON_OUTPUT_FILE: `${results}/browser.json`,
});
count(
  browserOk,
  read('browser.json', (r) => ({ passed: r.stats.expected + r.stats.flaky, failed: r.stats.unexpected })) ?? {
    passed: 0,
    failed: 1,
  },
);

console.log(`\n${passed} passed, ${failed} failed`);
process.exit(failed === 0 ? 0 : 1);
