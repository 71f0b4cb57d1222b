import { spawn, spawnSync } from 'node:child_process';
import {
  existsSync,
  mkdtempSync,
  readdirSync,
  readFileSync,
  rmSync,
  statSync,
  truncateSync,
  writeFileSync,
} from 'node:fs';
import { tmpdir } from 'node:os';
import path from 'node:path';
import type { BenchProfile, WaveformDocument } from '@/lib/synth';
import { openBench, smallDocument } from '../../../helpers/documents';

// The bundle that set-up makes: what a person runs.
const cli = path.resolve('build/cli.mjs');
jest.setTimeout(60_000);

let folder: string;
beforeEach(() => (folder = mkdtempSync(path.join(tmpdir(), 'cli-'))));
afterEach(() => rmSync(folder, { recursive: true, force: true }));

const run = (...args: string[]) => spawnSync('node', [cli, ...args], { cwd: folder, encoding: 'utf8' });

function write(name: string, value: unknown): string {
  writeFileSync(path.join(folder, name), typeof value === 'string' ? value : JSON.stringify(value));
  return name;
}
const inputs = (document: WaveformDocument = smallDocument(), profile: BenchProfile = openBench()) => [
  write('w.json', document),
  write('b.json', profile),
];
/** 6.4 million samples, 25 MB: long enough to be met at work. */
const longDocument = () => smallDocument({ timing: { mode: 'loop', repeats: 20_000, gapSamples: 0, padSamples: 0 } });
const noStack = /\n\s+at |\.m?[jt]s:\d+/;

test('render, verify, inspect: the way of a document to a proven pack', () => {
  const rendered = run('render', ...inputs(), '--out', 'pack.zip');
  expect([rendered.status, rendered.stderr]).toEqual([0, '']);
  expect(rendered.stdout).toMatch(/pack\.zip: \d+ bytes, a draft/);
  expect(rendered.stdout).toMatch(/640 words equal, EVM -\d+\.\d\d dB over \d+ cells/);
  const verified = run('verify', 'pack.zip');
  expect([verified.status, verified.stderr]).toEqual([0, '']);
  expect(verified.stdout).toContain('every other entry made again, byte for byte');
  const inspected = run('inspect', 'w.json');
  expect(inspected.status).toBe(0);
  expect(inspected.stdout).toContain('sample clock    20000000 Hz');
  expect(inspected.stdout).toMatch(/PAPR +\d+\.\d\d dB over the frame, interpolated 4 times/);
  expect(readdirSync(folder).sort()).toEqual(['b.json', 'pack.zip', 'w.json']);
});

test('fit: each check, what mends it, and the mended document fits', () => {
  const files = inputs(smallDocument(), openBench({ granularitySamples: 256, leastSamples: 256 }));
  const found = run('fit', ...files, '--out', 'mended.json');
  expect(found.status).toBe(0);
  expect(found.stdout).toMatch(/^Mended: Repeat the frame 4 times: 1280\. 960 samples more, 0 ppm\./);
  const before = run('fit', ...files);
  expect(before.status).toBe(1);
  expect(before.stderr).toMatch(/^A pack is refused: 320 samples are 1\.25 × the granularity of 256\./);
  expect(before.stdout).toMatch(/Length +misses +192 samples short/);
  expect(run('fit', 'mended.json', 'b.json').status).toBe(0);
  expect(run('fit', ...files, '--out', 'mended.json')).toMatchObject({ status: 1, stdout: '' });
  const json = JSON.parse(run('fit', ...files, '--json').stdout) as { ok: boolean; code: string; findings: unknown[] };
  expect(json).toMatchObject({ ok: false, code: 'limit_missed' });
  expect(json.findings).toHaveLength(13);
});

test('--json is one object, and without --out the pack has its own name', () => {
  const rendered = run('render', ...inputs(), '--json');
  const json = JSON.parse(rendered.stdout) as {
    ok: boolean;
    file: string;
    baseName: string;
    vector: { sha256: string };
  };
  expect(json.ok).toBe(true);
  expect(json.file).toBe(`small-test-waveform-draft-${json.vector.sha256.slice(0, 8)}.zip`);
  expect(existsSync(path.join(folder, json.file))).toBe(true);
  expect(JSON.parse(run('verify', json.file, '--json').stdout)).toMatchObject({
    ok: true,
    state: 'draft',
    madeAgain: true,
  });
  const figures = JSON.parse(run('inspect', 'w.json', '--json').stdout) as { figures: { sampleClock: string[] } };
  expect(figures.figures.sampleClock).toEqual(['20000000', '1']);
});

test('help and version end well, a wrong command line with 2', () => {
  expect(run('--help')).toMatchObject({ status: 0, stderr: '' });
  expect(run('--version').stdout).toMatch(/^combwright, synthesis \d+, pack \d+\n$/);
  for (const args of [
    [],
    ['paint'],
    ['render', 'only-one.json'],
    ['verify'],
    ['inspect', 'a', 'b'],
    ['inspect', 'a', '--oops'],
  ]) {
    const { status, stdout, stderr } = run(...args);
    expect([status, stdout]).toEqual([2, '']);
    expect(stderr).toContain('See combwright --help.');
    expect(stderr).not.toMatch(noStack);
  }
  expect(JSON.parse(run('paint', '--json').stdout)).toMatchObject({ ok: false, code: 'usage' });
});

const [document, bench] = ['w.json', 'b.json'];
test.each<[name: string, text: unknown, words: string]>([
  ['not JSON', '{"format": ', 'w.json is not a valid waveform document'],
  ['empty', '', 'w.json is not a valid waveform document'],
  ['another thing', { format: 'combwright.bench' }, 'w.json is not a valid waveform document'],
  ['an unknown key', { ...smallDocument(), extra: 1 }, 'document /extra: is no key of this version'],
  [
    'a size that is no size',
    { ...smallDocument(), content: { ...smallDocument().content, fftSize: -64 } },
    'document /content/fftSize',
  ],
  [
    'NaN spelled out',
    JSON.stringify(smallDocument()).replace('"headroomDb":1', '"headroomDb":NaN'),
    'is not a valid waveform document',
  ],
  ['too deep', `${'['.repeat(100_000)}`, 'is not a valid waveform document'],
  ['bytes that are no UTF-8', '\ufffd\u0000{', 'is not a valid waveform document'],
  ['a pointer with signs', { ...smallDocument(), 'a/b~c': 1 }, 'document /a~1b~0c'],
])('a document that is %s is refused with its place', (_name, text, words) => {
  write(document!, text);
  write(bench!, openBench());
  const { status, stdout, stderr } = run('render', document!, bench!, '--out', 'pack.zip');
  expect([status, stdout]).toEqual([1, '']);
  expect(stderr).toContain(words);
  expect(stderr).not.toMatch(noStack);
  expect(existsSync(path.join(folder, 'pack.zip'))).toBe(false);
  expect(readdirSync(folder).sort()).toEqual(['b.json', 'w.json']);
});

test('files that are not there, too large, folders, or the output itself', () => {
  inputs();
  expect(run('render', 'none.json', 'b.json').stderr).toBe('none.json: there is no such file.\n');
  expect(run('render', '.', 'b.json').stderr).toBe('.: it is a folder.\n');
  truncateSync(path.join(folder, write('huge.json', '')), 33 * 1024 * 1024);
  expect(run('render', 'huge.json', 'b.json').stderr).toContain(
    'huge.json: it has 34603008 bytes, the limit is 33554432.',
  );
  expect(run('render', 'w.json', 'b.json', '--out', 'w.json').stderr).toContain('w.json is one of the inputs');
  expect(JSON.parse(readFileSync(path.join(folder, 'w.json'), 'utf8'))).toEqual(smallDocument());
  expect(run('verify', 'none.zip')).toMatchObject({ status: 1, stderr: 'none.zip: there is no such file.\n' });
  expect(run('verify', 'w.json').stderr).toContain('This is not a pack');
  expect(run('inspect', 'b.json')).toMatchObject({ status: 1 });
});

test('limits and layouts that cannot be are said with their place, in JSON as well', () => {
  inputs(smallDocument(), openBench({ granularitySamples: 4096, byteOrder: 'big' }));
  const { status, stdout, stderr } = run('render', 'w.json', 'b.json', '--json');
  expect(status).toBe(1);
  expect(stderr).toContain('bench /content/granularitySamples');
  expect(JSON.parse(stdout)).toMatchObject({
    ok: false,
    code: 'limit_missed',
    issues: [{ where: 'bench', pointer: '/content/granularitySamples' }],
  });
  inputs(smallDocument(), openBench({ container: 'csv' }));
  expect(run('render', 'w.json', 'b.json').stderr).toContain('bench /content/word');
});

test('a disk that is full while rendering: a clear word, and nothing is left', () => {
  inputs(longDocument());
  // The shell's limit on a file's size refuses the write as a full disk does; its signal is ignored, so that the error is what arrives.
  const script = `trap '' XFSZ; ulimit -f 4000; exec node ${cli} render w.json b.json --out pack.zip`;
  const { status, stderr } = spawnSync('bash', ['-c', script], { cwd: folder, encoding: 'utf8' });
  expect(stderr).toBe('No room to write. Nothing was kept.\n');
  expect(status).toBe(1);
  expect(readdirSync(folder).sort()).toEqual(['b.json', 'w.json']);
});

test('a long vector takes no more memory than a short one: it passes in blocks', () => {
  const says = 'process.on("exit", () => process.stderr.write(String(process.resourceUsage().maxRSS)))';
  const mostMegabytes = (document: WaveformDocument) => {
    const { status, stderr } = spawnSync('node', [cli, 'render', ...inputs(document), '--out', 'pack.zip'], {
      cwd: folder,
      encoding: 'utf8',
      env: {
        ...process.env,
        NODE_OPTIONS: `--import ${JSON.stringify(`data:text/javascript,${encodeURIComponent(says)}`)}`,
      },
    });
    expect(status).toBe(0);
    return Number(stderr) / 1000;
  };
  const short = mostMegabytes(smallDocument());
  // 102 MB as complex doubles, 26 MB as words: either would show.
  const long = mostMegabytes(longDocument());
  expect(long).toBeLessThan(300);
  expect(long - short).toBeLessThan(60);
});

async function untilWorking(): Promise<void> {
  for (let tries = 0; tries < 2000; tries++) {
    const part = readdirSync(folder).find((name) => name.startsWith('.combwright-part-'));
    const file = part && path.join(folder, part, 'pack.zip');
    if (file && existsSync(file) && statSync(file).size > 0) return; // words are being written
    await new Promise((resolve) => setTimeout(resolve, 5));
  }
  throw new Error('It never began.');
}

const ended = (child: ReturnType<typeof spawn>) =>
  new Promise<number | null>((resolve) => child.once('exit', (code) => resolve(code)));

test('Ctrl-C keeps nothing; a killed one leaves its temporaries alone, and the next start clears them', async () => {
  inputs(longDocument());
  const start = () => {
    const child = spawn('node', [cli, 'render', 'w.json', 'b.json', '--out', 'pack.zip'], { cwd: folder });
    let said = '';
    child.stderr.on('data', (part: Buffer) => (said += part.toString()));
    return { child, said: () => said };
  };
  const cancelled = start();
  await untilWorking();
  cancelled.child.kill('SIGINT');
  expect(await ended(cancelled.child)).toBe(1);
  expect(cancelled.said()).toBe('Cancelled. Nothing was kept.\n');
  expect(readdirSync(folder).sort()).toEqual(['b.json', 'w.json']);

  const killed = start();
  await untilWorking();
  killed.child.kill('SIGKILL');
  await ended(killed.child);
  expect(existsSync(path.join(folder, 'pack.zip'))).toBe(false);
  expect(readdirSync(folder).filter((name) => name.startsWith('.combwright-part-'))).toHaveLength(1);
  inputs();
  expect(run('render', 'w.json', 'b.json', '--out', 'pack.zip').status).toBe(0);
  expect(readdirSync(folder).sort()).toEqual(['b.json', 'pack.zip', 'w.json']);
});

test('a pack whose bytes changed is not the same', () => {
  run('render', ...inputs(), '--out', 'pack.zip');
  const file = path.join(folder, 'pack.zip');
  const bytes = readFileSync(file);
  bytes[200] = bytes[200]! ^ 0x10;
  writeFileSync(file, bytes);
  const { status, stderr } = run('verify', 'pack.zip');
  expect(status).toBe(1);
  expect(stderr).toContain('Not the same: do not use this pack.');
  expect(stderr).toContain('has another SHA-256 than the manifest says');
  expect(stderr).toContain('1 of 640 words differ');
});
