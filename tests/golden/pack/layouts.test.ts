import { execFileSync } from 'node:child_process';
import { createHash } from 'node:crypto';
import { existsSync, mkdirSync, mkdtempSync, readFileSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import path from 'node:path';
import Ajv from 'ajv';
import { exampleDocuments } from '@/lib/document/examples/exampleDocuments';
import { markerBytes, type BenchContent } from '@/lib/synth';
import { makePack } from '@/server/packs/makePack';
import type { MadePack } from '@/server/packs/packTypes';
import { verifyPack } from '@/server/packs/verifyPack';
import { openBench } from '../../helpers/documents';
import { renderWords } from '../../helpers/renderWords';
import sigmf from '../../fixtures/sigmfCore.schema.json';

// Every kind of layout as a finished pack, read by programs that are not ours: NumPy, Python's csv and struct, sox (Debian).
jest.setTimeout(120_000);

const document = exampleDocuments.find(({ exampleId }) => exampleId === 'burst-with-markers')!.build();
const bytes = { count: document.content.markers.length, packing: 'bytes', leastSamples: 1, stepSamples: 1 } as const;
const lowBits = { ...bytes, packing: 'lowBits' } as const;
const int8 = { word: 'int8', bits: 8, align: 'right' } as const;
const float = { word: 'float32' } as const;
const offset = { numberFormat: 'offsetBinary' } as const;

/** Name, profile, SigMF's type or null, the extension. */
const layouts: [name: string, layout: Partial<BenchContent>, type: string | null][] = [
  ['int8', { ...int8 }, 'ci8'],
  ['int8-offset-split', { ...int8, ...offset, layout: 'split' }, null],
  ['int16-offset', { ...offset }, 'cu16_le'],
  ['int12-offset-right-big', { ...offset, bits: 12, byteOrder: 'big' }, null],
  ['int10-offset-left', { ...offset, bits: 10, align: 'left' }, 'cu16_le'],
  ['int16-swapped-negated', { swapIq: true, negateQ: true }, null],
  ['int14-low-bits', { bits: 14, align: 'left', markers: lowBits }, null],
  [
    'int14-low-bits-offset-big-split',
    { ...offset, bits: 14, align: 'left', byteOrder: 'big', layout: 'split', markers: lowBits },
    null,
  ],
  ['float-split-swapped', { ...float, layout: 'split', swapIq: true, byteOrder: 'big' }, null],
  ['wav-int16', { container: 'wav' }, 'ci16_le'],
  ['wav-int8', { ...int8, ...offset, container: 'wav' }, 'cu8'],
  ['wav-float', { ...float, container: 'wav' }, 'cf32_le'],
  ['npy-int16-big', { container: 'npy', byteOrder: 'big' }, 'ci16_be'],
  ['npy-complex', { ...float, container: 'npy' }, 'cf32_le'],
  ['npy-float-negated', { ...float, container: 'npy', negateQ: true }, null],
  ['npy-int8-offset-split', { ...int8, ...offset, container: 'npy', layout: 'split' }, null],
  ['csv', { ...float, container: 'csv' }, null],
  ['csv-split-swapped-negated', { ...float, container: 'csv', layout: 'split', swapIq: true, negateQ: true }, null],
];

interface Found {
  numpy: string;
  struct: string;
  samples: number;
  shapes: [string, number[]][];
  markers: string;
  vector: string;
  readerLines: number;
  said: string;
}

let folder: string;
const made = new Map<string, MadePack>();
const found = new Map<string, Found>();
const benchOf = (layout: Partial<BenchContent>) =>
  openBench({ markers: bytes, fileName: { most: 31, extension: 'iq' }, ...layout });

beforeAll(async () => {
  folder = mkdtempSync(path.join(tmpdir(), 'layouts-'));
  for (const [name, layout] of layouts) {
    const outFile = () => path.join(folder, `${name}.zip`);
    const result = await makePack({ document, profile: benchOf(layout), state: 7, tmpFolder: folder, outFile });
    if (!result.ok) throw new Error(`${name}: ${result.message} ${JSON.stringify(result.issues)}`);
    made.set(name, result.pack);
    mkdirSync(path.join(folder, name));
    execFileSync('unzip', ['-q', result.pack.file, '-d', path.join(folder, name)]);
  }
  const folders = layouts.map(([name]) => path.join(folder, name));
  const told = execFileSync('/usr/bin/python3', [path.join(__dirname, 'readLayouts.py'), ...folders], {
    encoding: 'utf8',
  });
  (JSON.parse(told) as Found[]).forEach((one, i) => found.set(layouts[i]![0], one));
});
afterAll(() => rmSync(folder, { recursive: true, force: true }));

const sha256 = (data: Uint8Array) => createHash('sha256').update(data).digest('hex');

test.each(layouts)('%s', async (name, layout, type) => {
  const profile = benchOf(layout);
  const { content } = profile;
  const pack = made.get(name)!;
  const read = found.get(name)!;
  // what every reader has to find: the same words in the plainest spelling
  const bits = content.word === 'float32' ? 'float32' : 'int16';
  const plain = openBench({ word: bits, bits: content.word === 'float32' ? 16 : content.bits }).content;
  const words = sha256(renderWords(document.content, plain).bytes);
  expect([read.numpy, read.struct]).toEqual([words, words]);
  expect(read.samples).toBe(pack.manifest.samples.fileSamples);
  expect([read.vector, pack.vectorSha256.slice(0, 8)]).toEqual([pack.vectorSha256, pack.baseName.slice(-8)]);
  expect(read.readerLines).toBeLessThanOrEqual(25);
  const evmDb = Number(/^EVM (\S+) dB/.exec(read.said)![1]);
  expect(evmDb).toBeLessThan(content.word === 'float32' ? -130 : -6 * content.bits + 18);

  const marks = new Uint8Array(read.samples);
  markerBytes(document.content).read(marks);
  const inWords = content.markers.packing === 'lowBits';
  expect(read.markers).toBe(sha256(inWords ? marks : new Uint8Array(read.samples)));
  expect(existsSync(path.join(folder, name, `${pack.baseName}-markers.bin`))).toBe(!inWords);

  const names = pack.manifest.files.map((file) => file.name);
  const endings = content.layout === 'split' ? ['-i', '-q'] : [''];
  expect(names.slice(0, endings.length)).toEqual(endings.map((ending) => `${pack.baseName}${ending}.iq`));
  const metaName = `${pack.baseName}.sigmf-meta`;
  const readme = readFileSync(path.join(folder, name, 'README.txt'), 'utf8');
  expect(readme.includes('no SigMF metadata: SigMF has no type for ')).toBe(type === null);
  expect(names.includes(metaName)).toBe(type !== null);
  if (type !== null) {
    const meta = JSON.parse(readFileSync(path.join(folder, name, metaName), 'utf8'));
    const validate = new Ajv().compile(sigmf);
    expect(validate(meta) || validate.errors).toBe(true);
    expect(meta.global).toMatchObject({ 'core:datatype': type, 'core:dataset': names[0] });
    const head =
      content.container === 'raw' ? undefined : content.container === 'npy' ? 128 : type[1] === 'f' ? 58 : 44;
    expect(meta.captures[0]['core:header_bytes']).toBe(head);
  }
  expect(await verifyPack(pack.file)).toMatchObject({ ok: true, verified: { madeAgain: true } });
});

test('shapes of .npy files', () => {
  const shapesOf = (name: string) => found.get(name)!.shapes;
  const n = found.get('npy-complex')!.samples;
  expect(shapesOf('npy-int16-big')).toEqual([['>i2', [n, 2]]]);
  expect(shapesOf('npy-complex')).toEqual([['complex64', [n]]]);
  expect(shapesOf('npy-float-negated')).toEqual([['float32', [n, 2]]]);
  expect(shapesOf('npy-int8-offset-split')).toEqual([
    ['uint8', [n]],
    ['uint8', [n]],
  ]);
});

test('CSV is text with a header line, dots and LF', () => {
  const textOf = (name: string, i: number) =>
    readFileSync(path.join(folder, name, made.get(name)!.manifest.files[i]!.name), 'latin1');
  expect(textOf('csv', 0)).toMatch(/^I,Q\n([+-]\d\.\d{8}e[+-]\d\d,[+-]\d\.\d{8}e[+-]\d\d\n)+$/);
  expect(textOf('csv-split-swapped-negated', 0)).toMatch(/^Q\n([+-]\d\.\d{8}e[+-]\d\d\n)+$/);
  expect(textOf('csv-split-swapped-negated', 1).slice(0, 2)).toBe('I\n');
});

/** sox takes everything it needs from the head: channels, words, clock. */
test.each([
  ['wav-int16', ['-e', 'signed-integer', '-b', '16'], 44],
  ['wav-int8', ['-e', 'unsigned-integer', '-b', '8'], 44],
  ['wav-float', ['-e', 'floating-point', '-b', '32'], 58],
] as const)('sox reads %s', (name, encoding, head) => {
  const pack = made.get(name)!;
  const file = path.join(folder, name, pack.vectorName);
  const wav = path.join(folder, `${name}.wav`);
  execFileSync('cp', [file, wav]);
  const info = (flag: string) => execFileSync('sox', ['--i', flag, wav], { encoding: 'utf8' }).trim();
  expect(['-c', '-s', '-r'].map((flag) => Number(info(flag)))).toEqual([
    2,
    found.get(name)!.samples,
    Math.round(pack.manifest.clock.sampleClockHz),
  ]);
  const out = execFileSync('sox', ['-D', wav, '-t', 'raw', ...encoding, '-L', '-'], { maxBuffer: 1 << 26 });
  const own = readFileSync(file).subarray(head);
  if (name !== 'wav-float') expect(out.equals(own)).toBe(true);
  else {
    expect(out.length).toBe(own.length);
    for (let at = 0; at < out.length; at += 4)
      expect(Math.abs(out.readFloatLE(at) - own.readFloatLE(at))).toBeLessThanOrEqual(2 ** -24);
  }
});
