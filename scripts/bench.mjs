// `npm run bench`: our rendering beside its peers, in interleaved rounds of one run. --json prints the ratios alone
// (peer's median time / ours: above 1 we are faster); --rounds n, --only W1,W2. Peers that are not installed are left out.
// BIG is a vector of --megabytes n (256) and its pack, the least of --big-rounds n (3).
import { spawn, spawnSync } from 'node:child_process';
import { mkdtempSync, rmSync } from 'node:fs';
import { availableParallelism, tmpdir } from 'node:os';
import { join } from 'node:path';
import { createInterface } from 'node:readline';
import { build } from 'esbuild';
import { measureBigVector } from '../tests/bench/bigVector.mjs';
import { measureBrushing } from '../tests/bench/brushing.mjs';

const options = process.argv.slice(2);
const valueOf = (name, other) => (options.includes(name) ? options[options.indexOf(name) + 1] : other);
const isJson = options.includes('--json');
const rounds = Number(valueOf('--rounds', '21'));
const WARM_UPS = 2;
const jobs = valueOf('--only', 'W1,W2,W3,BIG').split(',');
const directory = mkdtempSync(join(tmpdir(), 'combwright-bench-'));

/** A process that answers each line with one line of JSON. */
function openPeer(name, command, args) {
  const child = spawn(command, [...args, join(directory, `${name}.bin`)], { stdio: ['pipe', 'pipe', 'inherit'] });
  const lines = createInterface({ input: child.stdout })[Symbol.asyncIterator]();
  return {
    name,
    async ask(line) {
      child.stdin.write(`${line}\n`);
      const { value, done } = await lines.next();
      if (done) throw new Error(`${name} ended.`);
      return JSON.parse(value);
    },
    close: () => child.stdin.end(),
  };
}

function hasNumpy() {
  return spawnSync('/usr/bin/python3', ['-c', 'import numpy']).status === 0;
}

/** The C peer, where a compiler and FFTW 3 (Debian: gcc, libfftw3-dev) are there. */
function compileFftw() {
  const program = join(directory, 'fftwPeer');
  const args = ['-O3', '-march=native', '-o', program, 'tests/bench/peers/fftwPeer.c', '-lfftw3', '-lm'];
  return spawnSync('gcc', args, { stdio: 'ignore' }).status === 0 ? program : null;
}

const median = (values) => values.toSorted((a, b) => a - b)[values.length >> 1];

function agree(ours, theirs, job, name) {
  const isClose =
    Math.abs(ours.peak / theirs.peak - 1) < 1e-9 && Math.abs(ours.meanPower / theirs.meanPower - 1) < 1e-9;
  const isEqual = ours.firstWords.every((word, i) => Math.abs(word - theirs.firstWords[i]) <= 1);
  if (!isClose || !isEqual) {
    throw new Error(`${name} does other work in ${job}: ${JSON.stringify(ours)} ${JSON.stringify(theirs)}`);
  }
}

/** An edit of one symbol in a document of 14 and of 1024 symbols, in a process of its own: { shortMs, longMs, ratio ≤ 1.3 }. */
async function measureLiveEdit() {
  const bundle = join(directory, 'liveEdit.mjs');
  const contents =
    "import { runLiveEdit } from './tests/bench/liveEdit.ts'; console.log(JSON.stringify(runLiveEdit()));";
  const shared = { bundle: true, platform: 'node', format: 'esm', target: 'node20', alias: { '@': '.' } };
  await build({ stdin: { contents, resolveDir: '.' }, outfile: bundle, logLevel: 'error', ...shared });
  return JSON.parse(spawnSync(process.execPath, [bundle], { encoding: 'utf8' }).stdout);
}

try {
  const bundle = join(directory, 'engine.mjs');
  await build({
    entryPoints: ['tests/bench/engine.ts'],
    outfile: bundle,
    bundle: true,
    platform: 'node',
    format: 'esm',
    target: 'node20',
    alias: { '@': '.' },
    logLevel: 'error',
  });
  const engine = openPeer('engine', process.execPath, [bundle]);
  const peers = [];
  if (hasNumpy()) peers.push(openPeer('numpy', '/usr/bin/python3', ['tests/bench/peers/numpyPeer.py']));
  const fftw = compileFftw();
  if (fftw !== null) peers.push(openPeer('fftw', fftw, []));

  /**
   * Times of all in interleaved rounds: medians and least ones { engine, numpy, … } in ms; of a peer with several ways, its fastest.
   * The least of many is what a machine that does other work as well says best.
   */
  async function measure(job, mode, count) {
    const times = {};
    for (let round = -WARM_UPS; round < count; round++) {
      const ours = await engine.ask(job + mode);
      for (const peer of [engine, ...peers]) {
        const answer = peer === engine ? ours : await peer.ask(job + mode);
        agree(ours, answer, job, peer.name);
        for (const [way, ms] of Object.entries(answer.ways ?? { only: answer.ms })) {
          const list = ((times[peer.name] ??= {})[way] ??= []);
          if (round >= 0) list.push(ms);
        }
      }
    }
    const fastest = (of) =>
      Object.fromEntries(Object.entries(times).map(([name, ways]) => [name, Math.min(...Object.values(ways).map(of))]));
    return { medians: fastest(median), least: fastest((list) => Math.min(...list)) };
  }

  /** The engine on all cores, a process each at the same job: how many times as many jobs a second as one of them alone. */
  async function measureAllCores(job, count) {
    const cores = availableParallelism();
    const engines = [engine];
    while (engines.length < cores) engines.push(openPeer(`engine${engines.length}`, process.execPath, [bundle]));
    const alone = [];
    const together = [];
    for (let round = -WARM_UPS; round < count; round++) {
      const { ms } = await engine.ask(job);
      const all = await Promise.all(engines.map((one) => one.ask(job)));
      if (round < 0) continue;
      alone.push(ms);
      together.push(all.reduce((sum, answer) => sum + answer.ms, 0) / all.length);
    }
    for (const one of engines.slice(1)) one.close();
    return Number(((cores * median(alone)) / median(together)).toFixed(2));
  }

  const ratios = {};
  for (const job of jobs.filter((name) => name !== 'BIG')) {
    ratios[job] = {};
    for (const mode of ['', ' file']) {
      const { medians, least } = await measure(job, mode, job === 'W3' ? Math.ceil(rounds / 4) : rounds);
      for (const peer of peers) {
        const key = mode === '' ? peer.name : `${peer.name}WithFile`;
        ratios[job][key] = Number((medians[peer.name] / medians.engine).toFixed(2));
      }
      if (!isJson) {
        const line = Object.entries(medians).map(
          ([name, ms]) => `${name} ${ms.toFixed(2)} ms (least ${least[name].toFixed(2)})`,
        );
        console.log(`${job}${mode === '' ? '' : ' with file'}: ${line.join(', ')}`);
      }
    }
  }
  const allCores = { cores: availableParallelism() };
  for (const job of Object.keys(ratios)) allCores[job] = await measureAllCores(job, job === 'W3' ? 3 : rounds);
  for (const peer of [engine, ...peers]) peer.close();
  const liveEdit = await measureLiveEdit();
  const brushing = await measureBrushing();
  const big = jobs.includes('BIG')
    ? await measureBigVector({
        megabytes: Number(valueOf('--megabytes', '256')),
        rounds: Number(valueOf('--big-rounds', '3')),
        directory,
      })
    : null;
  console.log(JSON.stringify({ ratios, allCores, liveEdit, brushing, big }, null, isJson ? 0 : 2));
} finally {
  rmSync(directory, { recursive: true, force: true });
}
