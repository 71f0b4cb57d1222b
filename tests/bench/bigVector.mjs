// A big vector: its words and its whole pack beside writing as many bytes with their SHA-256, and beside its transforms alone. Every
// measure runs in a process of its own, the least of several interleaved rounds counts.
import { spawnSync } from 'node:child_process';
import { mkdirSync, rmSync } from 'node:fs';
import { join, resolve } from 'node:path';
import { build } from 'esbuild';

const says = 'process.on("exit", () => process.stderr.write(String(process.resourceUsage().maxRSS)))';
const sayMemory = { NODE_OPTIONS: `--import ${JSON.stringify(`data:text/javascript,${encodeURIComponent(says)}`)}` };

export async function measureBigVector({ megabytes, rounds, directory }) {
  const folder = join(directory, 'big');
  mkdirSync(folder);
  const bundle = join(directory, 'bigVector.mjs');
  const shared = { bundle: true, platform: 'node', format: 'esm', target: 'node20', logLevel: 'error' };
  await build({ entryPoints: ['tests/bench/bigVector.ts'], outfile: bundle, alias: { '@': '.' }, ...shared });
  spawnSync(process.execPath, ['scripts/build-server.mjs'], { stdio: 'inherit' });
  const threads = resolve('build/work.worker.mjs');
  const samples = String((megabytes * 1e6) / 4);

  const ask = (kind, way = 'new') => {
    const { stdout, stderr, status } = spawnSync(process.execPath, [bundle, kind, way, samples, folder, threads], {
      encoding: 'utf8',
    });
    if (status !== 0) throw new Error(stderr);
    return JSON.parse(stdout);
  };
  /** The command line, from its start to its end, with the most memory that it had. */
  const pack = (way) => {
    const made = ask('inputs', way);
    const start = performance.now();
    const { stderr, status } = spawnSync(
      process.execPath,
      [resolve('build/cli.mjs'), 'render', 'w.json', 'b.json', '--out', 'pack.zip'],
      { cwd: folder, encoding: 'utf8', env: { ...process.env, ...sayMemory } },
    );
    const ms = performance.now() - start;
    if (status !== 0) throw new Error(stderr);
    rmSync(join(folder, 'pack.zip'));
    return { ms, memoryMegabytes: Number(stderr) / 1000, ...made };
  };

  const least = {};
  const note = (name, found) => {
    for (const [key, value] of Object.entries(found)) {
      const place = `${name}.${key}`;
      least[place] = Math.min(least[place] ?? Infinity, value);
    }
  };
  let memoryMegabytes = 0;
  for (let round = 0; round < rounds; round++) {
    note('plain', ask('plain'));
    note('wordsCopied', ask('words', 'copied'));
    note('transforms', ask('transforms'));
    note('wordsNew', ask('words', 'new'));
    for (const [name, way] of [
      ['packCopied', 'copied'],
      ['packNew', 'new'],
    ]) {
      note('plain', ask('plain')); // a moment's peace is as likely here
      const made = pack(way);
      memoryMegabytes = Math.max(memoryMegabytes, made.memoryMegabytes);
      note(name, made);
    }
  }
  const ratio = (a, b) => Number((least[a] / least[b]).toFixed(2));
  return {
    megabytes: least['packNew.megabytes'],
    threads: least['wordsNew.threads'],
    // at least 0.5: the rate of the words over that of plain writing with SHA-256
    wordsCopiedRate: ratio('plain.ms', 'wordsCopied.ms'),
    // at most 1.5
    wordsNewOverTransforms: ratio('wordsNew.ms', 'transforms.ms'),
    // at most 6
    packCopiedOverPlain: ratio('packCopied.ms', 'plain.syncedMs'),
    packNewOverPlain: ratio('packNew.ms', 'plain.syncedMs'),
    // less than 300
    memoryMegabytes: Math.round(memoryMegabytes),
    leastMs: Object.fromEntries(
      Object.entries(least)
        .filter(([key]) => /ms$/i.test(key))
        .map(([key, ms]) => [key, Math.round(ms)]),
    ),
  };
}
