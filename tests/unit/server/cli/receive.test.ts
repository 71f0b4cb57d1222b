import { spawnSync } from 'node:child_process';
import { existsSync, mkdtempSync, readFileSync, rmSync, truncateSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import path from 'node:path';
import { parseCommand } from '@/server/cli/arguments';
import { openBench } from '@/tests/helpers/documents';
import { documentOf } from '@/tests/helpers/bench';
import { ofdmContent } from '@/tests/helpers/captures';
import { pnStream } from '@/tests/helpers/content';

// The bundle that set-up makes: what a person runs.
const cli = path.resolve('build/cli.mjs');
jest.setTimeout(120_000);

let folder: string;
beforeAll(() => {
  folder = mkdtempSync(path.join(tmpdir(), 'receive-'));
  const content = ofdmContent(64, 26, 14, 16, { oversampling: 2 });
  const other = { ...content, streams: [pnStream(0, { source: { kind: 'gold', cInit: 5 } })] };
  writeFileSync(path.join(folder, 'own.json'), JSON.stringify(documentOf(content)));
  writeFileSync(path.join(folder, 'other.json'), JSON.stringify(documentOf(other)));
  writeFileSync(path.join(folder, 'bench.json'), JSON.stringify(openBench()));
  expect(run('render', 'own.json', 'bench.json', '--out', 'own.zip').status).toBe(0);
  expect(run('render', 'other.json', 'bench.json', '--out', 'other.zip').status).toBe(0);
});
afterAll(() => rmSync(folder, { recursive: true, force: true }));

const run = (...args: string[]) => spawnSync('node', [cli, ...args], { cwd: folder, encoding: 'utf8' });
const json = (result: { stdout: string }) => JSON.parse(result.stdout) as Record<string, never>;

test('a vector impaired with a seed and received again', () => {
  const impair = (out: string) =>
    run(
      'impair',
      'own.zip',
      '--out',
      out,
      '--seed',
      '9',
      '--snr',
      '30',
      '--offset',
      '-137.3',
      '--delay',
      '1234.4',
      '--samples',
      '6000',
    );
  const made = impair('a.sigmf-data');
  expect([made.status, made.stderr]).toEqual([0, '']);
  impair('b.sigmf-data');
  expect(readFileSync(path.join(folder, 'b.sigmf-data'))).toEqual(readFileSync(path.join(folder, 'a.sigmf-data')));
  const received = run('receive', 'a.sigmf-meta', 'own.zip', '--json');
  expect([received.status, received.stderr]).toEqual([0, '']);
  expect(json(received)).toMatchObject({
    ok: true,
    layout: '16-bit integers, little-endian, I and Q in turn',
    cause: null,
    result: { kind: 'measured', clockRatio: [1, 1], isPartFrame: false, symbols: 36 },
  });
  const { result } = json(received) as unknown as {
    result: { offsetHz: number; delaySamples: number; evm: { all: { db: number } } };
  };
  expect(result.offsetHz).toBeCloseTo(-137.3, 0);
  expect(result.delaySamples).toBeCloseTo(1234.4, 1);
  expect(Math.abs(result.evm.all.db + 30 + 10 * Math.log10(128 / 52))).toBeLessThan(0.4);
  const lines = run('receive', 'a.sigmf-data', 'own.zip', '--channel', 'pilots').stdout;
  expect(lines).toMatch(/EVM +\d[\d.]* %, −?-?3\d\.\d\d dB over the data cells/);
  expect(lines).toContain('from the pilots of');
});

test('another edition: exit 1, ρ, and which pack it looks like', () => {
  const unlike = run('receive', 'a.sigmf-data', 'other.zip', '--against', 'own.zip');
  expect([unlike.status, unlike.stdout]).toEqual([1, '']);
  expect(unlike.stderr).toMatch(/does not look like a draft of Test signal/);
  expect(unlike.stderr).toMatch(/ρ 0\.[012]\d+; it takes 0\.30/);
  expect(unlike.stderr).toMatch(/own\.zip: ρ (0\.9|1\.0)\d+/);
  expect(unlike.stderr).not.toMatch(/EVM \d/);
});

test('impair replaces no pack, leaves no stale metadata, says what it cut', () => {
  const before = readFileSync(path.join(folder, 'own.zip'));
  const same = run('impair', 'own.zip', '--out', './own.zip');
  expect([same.status, same.stderr]).toEqual([
    1,
    './own.zip: the capture would replace the pack. Give another name with --out.\n',
  ]);
  expect(readFileSync(path.join(folder, 'own.zip'))).toEqual(before);
  expect(run('impair', 'own.zip', '--out', 'c.sigmf-data', '--word', 'float32').stdout).toContain('c.sigmf-meta');
  expect(run('impair', 'own.zip', '--out', 'c.sigmf-data', '--bits', '12', '--left-aligned').status).toBe(0);
  expect(existsSync(path.join(folder, 'c.sigmf-meta'))).toBe(false);
  expect(run('receive', 'c.sigmf-data', 'own.zip').stdout).toContain('12-bit integers');
  expect(run('impair', 'own.zip', '--out', 'd.bin', '--samples', '1').stdout).toContain('d.bin: 1 sample at');
});

test('impair refuses a damaged pack and an offset that would come back elsewhere', () => {
  // the vector's entry is made shorter by what the zip's directory says of it
  const bytes = readFileSync(path.join(folder, 'own.zip'));
  const directory = bytes.indexOf(Buffer.from([0x50, 0x4b, 1, 2]));
  const size = bytes.readUInt32LE(directory + 24);
  bytes.writeUInt32LE(size - 400, directory + 20);
  bytes.writeUInt32LE(size - 400, directory + 24);
  writeFileSync(path.join(folder, 'short.zip'), bytes);
  const short = run('impair', 'short.zip', '--out', 'f.bin');
  expect([short.status, short.stdout]).toEqual([1, '']);
  expect(short.stderr).toMatch(
    /^short\.zip: the pack is damaged: its vector has \d+ samples, its manifest says \d+\.$/m,
  );
  const far = run('impair', 'own.zip', '--out', 'f.bin', '--offset', '960001');
  expect(far).toMatchObject({ status: 1, stdout: '' });
  expect(far.stderr).toContain("--offset 960001 Hz is beyond half of the capture's clock of 1920000 Hz");
  expect(existsSync(path.join(folder, 'f.bin'))).toBe(false);
});

test('what is wrong with a capture is said, and nothing that is not', () => {
  run('impair', 'own.zip', '--out', 'off.bin', '--clock-error', '60', '--samples', '6000');
  expect(run('receive', 'off.bin', 'own.zip').stdout).toMatch(
    /\+(59\.99|60\.0)\d* .*ppm: beyond the 20 ppm .*\(--clock\)/,
  );
  writeFileSync(path.join(folder, 'nan.bin'), Buffer.from(new Float32Array(8000).fill(NaN).buffer));
  expect(run('receive', 'nan.bin', 'own.zip', '--word', 'float32').stderr).toBe(
    'nan.bin: The capture holds values that are not numbers (NaN or infinite), the first in sample 0, counted from 0.\n',
  );
});

test('a place alone that looks alike is not called too little', () => {
  const example = (name: string): string => path.resolve('lib/document/examples', name);
  const burst = [example('burst-with-markers.combwright.json'), example('bench-b-16-bit.bench.json')];
  expect(run('render', ...burst, '--out', 'burst.zip').status).toBe(0);
  run('impair', 'burst.zip', '--out', 'e.bin', '--clock-error', '1000');
  const { status, stderr } = run('receive', 'e.bin', 'burst.zip');
  expect(status).toBe(1);
  expect(stderr).toMatch(/ρ 0\.\d+ at one place, but the symbols around it could not be followed/);
});

test('what cannot be read is said, exit 1', () => {
  writeFileSync(path.join(folder, 'huge.bin'), '');
  truncateSync(path.join(folder, 'huge.bin'), 2 ** 31 + 4); // a hole: it takes no room
  expect(run('receive', 'huge.bin', 'own.zip')).toMatchObject({
    status: 1,
    stderr: 'huge.bin: larger than 2 GB. Cut the capture.\n',
  });
  writeFileSync(path.join(folder, 'short.bin'), Buffer.from(new Int16Array(200).map((_, i) => 37 * i).buffer));
  expect(run('receive', 'short.bin', 'own.zip').stderr).toContain(
    "A symbol has 160 samples at the capture's clock; the capture has 100.",
  );
  expect(run('receive', 'none.bin', 'own.zip').stderr).toBe('none.bin: there is no such file.\n');
  expect(run('receive', 'a.sigmf-data', 'own.json').status).toBe(1);
  expect(run('receive', 'a.sigmf-data', 'own.zip', '--clock', '5000000').stderr).toContain('the nearest is');
});

test.each([
  [['receive', 'a'], 'receive takes a capture and a pack'],
  [['receive', 'a', 'b', '--channel', 'both'], '--channel is all or pilots'],
  [['receive', 'a', 'b', '--clock', 'fast'], '--clock is a number'],
  [['receive', 'a', 'b', '--word', 'int24'], '--word is int8, int16 or float32'],
  [['impair', 'a.zip'], 'impair needs --out'],
  [['impair', 'a.zip', '--out', 'b', '--tap', '-3:0'], '--tap begins with a delay of 0'],
  [['impair', 'a.zip', '--out', 'b', '--clock-ratio', '65/1'], '--clock-ratio is p/q'],
])('a wrong command line says why: %j', (argv, words) => {
  const parsed = parseCommand(argv);
  expect(parsed.ok).toBe(false);
  expect(!parsed.ok && parsed.message).toContain(words);
});

test('impairments are read with their signs', () => {
  const parsed = parseCommand([
    'impair',
    'a.zip',
    '--out',
    'b',
    '--gain',
    '-17.2',
    '--tap',
    '0',
    '--tap',
    '5:-6:40',
    '--imbalance',
    '0.5:-2',
    '--dc',
    '0.01:-0.02',
  ]);
  expect(parsed).toMatchObject({
    ok: true,
    command: {
      name: 'impair',
      impairments: {
        gainDb: -17.2,
        taps: [
          { delaySamples: 0, gainDb: 0, phaseDeg: 0 },
          { delaySamples: 5, gainDb: -6, phaseDeg: 40 },
        ],
        imbalanceDb: 0.5,
        imbalanceDeg: -2,
        dcI: 0.01,
        dcQ: -0.02,
      },
    },
  });
});

test.each([
  [['--word', 'int8', '--bits', '12'], '--word int8 has 8 bits'],
  [['--word', 'float32', '--offset-binary'], 'belong to integers'],
  [['--big-endian', '--little-endian'], 'exclude each other'],
])('words that contradict each other are refused: %j', (words, message) => {
  for (const command of [
    ['impair', 'a.zip', '--out', 'a.bin', ...words],
    ['receive', 'a.bin', 'a.zip', ...words],
  ])
    expect(parseCommand(command)).toMatchObject({ ok: false, message: expect.stringContaining(message) as string });
});
