import { execFileSync } from 'node:child_process';
import { mkdirSync, mkdtempSync, readFileSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import path from 'node:path';
import Ajv from 'ajv';
import { exampleDocuments } from '@/lib/document/examples/exampleDocuments';
import { exampleBenches } from '@/lib/document/examples/exampleBenches';
import { manifestSchema } from '@/lib/document/manifestSchema';
import type { BenchProfile, WaveformDocument } from '@/lib/synth';
import { makePack } from '@/server/packs/makePack';
import type { MadePack } from '@/server/packs/packTypes';
import { readerBegins, readerEnds } from '@/server/packs/readme';
import { openBench } from '../../helpers/documents';
import sigmf from '../../fixtures/sigmfCore.schema.json';

// The pack as programs read it that are not ours: unzip, Python's zipfile, NumPy and sox (Debian).
jest.setTimeout(120_000);

const python = '/usr/bin/python3';
let folder: string;
beforeAll(() => (folder = mkdtempSync(path.join(tmpdir(), 'packs-'))));
afterAll(() => rmSync(folder, { recursive: true, force: true }));

async function pack(document: WaveformDocument, profile: BenchProfile, name: string): Promise<MadePack> {
  const outFile = () => path.join(folder, `${name}.zip`);
  const result = await makePack({ document, profile, state: 3, tmpFolder: folder, outFile });
  if (!result.ok) throw new Error(`${result.message} ${JSON.stringify(result.issues)}`);
  return result.pack;
}

interface Found {
  bad: string | null;
  names: string[];
  listed: string[];
  dates: number[][];
  digestsWrong: string[];
  samples: number;
  first: number[];
  bitsWrong: string[];
  worstMap: number;
  mapped: number;
  markersWrong: number;
  rmsDbfs: number;
  activeRmsDbfs: number;
  dcI: number;
}

const words16 = openBench({
  word: 'int16',
  markers: { count: 4, packing: 'bytes', leastSamples: 1, stepSamples: 1 },
  fileName: { most: 31, extension: 'sigmf-data' },
});
const benches: [name: string, profile: BenchProfile][] = [
  ['16 bits, little-endian, markers', words16],
  [
    '12 bits to the left, big-endian',
    openBench({
      bits: 12,
      align: 'left',
      byteOrder: 'big',
      fileName: { most: 31, extension: 'bin' },
      markers: { count: 4, packing: 'bytes', leastSamples: 1, stepSamples: 1 },
    }),
  ],
  [
    'floats, big-endian',
    openBench({
      word: 'float32',
      byteOrder: 'big',
      markers: { count: 4, packing: 'bytes', leastSamples: 1, stepSamples: 1 },
    }),
  ],
];
const cases = exampleDocuments.flatMap(({ exampleId, build }) =>
  benches.map(([name, profile]) => [exampleId, name, build, profile] as const),
);

/** What the reader in README.txt prints, run in a folder where a stranger unzipped the pack. */
function runOwnReader(file: string, into: string): { evmDb: number; cells: number } {
  mkdirSync(into);
  execFileSync('unzip', ['-q', file, '-d', into]);
  const readme = readFileSync(path.join(into, 'README.txt'), 'utf8');
  const script = readme.slice(readme.indexOf(readerBegins), readme.indexOf(readerEnds));
  expect(script.trim().split('\n').length).toBeLessThanOrEqual(24); // about twenty lines
  writeFileSync(path.join(into, 'reader.py'), script);
  const said = execFileSync(python, ['reader.py'], { cwd: into, encoding: 'utf8' });
  const [, evmDb, cells] = /^EVM (\S+) dB over (\d+) cells$/.exec(said.trim())!;
  return { evmDb: Number(evmDb), cells: Number(cells) };
}

test.each(cases)('%s, %s', async (exampleId, benchName, build, profile) => {
  const name = `${exampleId}-${benchName.replace(/\W/g, '')}`;
  const made = await pack(build(), profile, name);
  const { manifest } = made;
  manifestSchema.parse(manifest);
  expect(Object.keys(manifest)).toEqual(
    'format version packKey state edition digests files clock samples word levels papr symbols ramp transform inks streams markers proof peakReduction safety'.split(
      ' ',
    ),
  );
  const text = execFileSync(python, [path.join(__dirname, 'readPack.py'), made.file], { encoding: 'utf8' });
  const found = JSON.parse(text) as Found;
  expect(found).toMatchObject({
    bad: null,
    dates: [[1980, 1, 1, 0, 0, 0]],
    digestsWrong: [],
    bitsWrong: [],
    markersWrong: 0,
    samples: manifest.samples.fileSamples,
    first: manifest.word.firstWords,
  });
  expect(found.names.filter((one) => one !== 'manifest.json')).toEqual(found.listed);
  expect(found.names.indexOf('manifest.json')).toBe(found.names.indexOf('document.combwright.json') - 1);
  expect(found.worstMap).toBeLessThan(1e-6); // single precision
  // rounding to words moves a level by far less than a hundredth of a dB here
  expect(found.rmsDbfs).toBeCloseTo(manifest.levels.fileRmsDbfs!, 2);
  expect(found.activeRmsDbfs).toBeCloseTo(manifest.levels.activeRmsDbfs!, 2);
  expect(found.dcI).toBeCloseTo(manifest.levels.dcI, 9);

  const own = runOwnReader(made.file, path.join(folder, `${name}.d`));
  expect(own.cells).toBeGreaterThan(0);
  if (profile.content.word === 'float32') {
    expect(manifest.proof.evmDb).toBeLessThanOrEqual(-140);
    expect(own.evmDb).toBeLessThanOrEqual(-137); // the reference is in single precision too: twice the error
  } else {
    // One repeat against all of them, reserved cells with it: near, not equal.
    expect(Math.abs(own.evmDb - manifest.proof.evmDb!)).toBeLessThan(2);
  }

  const meta = found.names.find((one) => one.endsWith('.sigmf-meta'))!;
  const metaText = readFileSync(path.join(folder, `${name}.d`, meta), 'utf8');
  const validate = new Ajv().compile(sigmf);
  expect(validate(JSON.parse(metaText)) || validate.errors).toBe(true);
  expect(JSON.parse(metaText).annotations).toHaveLength(manifest.samples.symbolCount);
  expect(made.fileName).toMatch(/^[a-z0-9-]+-e3-[0-9a-f]{8}\.zip$/);
});

/** sox as a reader of the vector: out of it comes what went in, in the other byte order. */
test.each([
  ['16 bits, little-endian', benches[0]![1], ['-e', 'signed-integer', '-b', '16'], 2],
  ['floats, big-endian', benches[2]![1], ['-e', 'floating-point', '-b', '32'], 4],
] as const)('sox reads %s', async (_name, profile, encoding, size) => {
  const made = await pack(exampleDocuments[0]!.build(), profile, `sox${size}`);
  const into = path.join(folder, `sox${size}.d`);
  mkdirSync(into);
  execFileSync('unzip', ['-q', made.file, '-d', into]);
  const vector = path.join(into, made.vectorName);
  const [own, other] = profile.content.byteOrder === 'little' ? ['-L', '-B'] : ['-B', '-L'];
  const shape = ['-t', 'raw', '-r', '48000', '-c', '2', ...encoding];
  const out = execFileSync('sox', ['-D', ...shape, own, vector, ...shape, other, '-'], { maxBuffer: 1 << 26 });
  const bytes = readFileSync(vector);
  if (size === 2) bytes.swap16();
  else bytes.swap32();
  if (size === 2) expect(out.equals(bytes)).toBe(true);
  else {
    // sox computes in 32-bit integers and rounds to single precision on its way out
    expect(out.length).toBe(bytes.length);
    for (let at = 0; at < out.length; at += 4)
      expect(Math.abs(out.readFloatLE(at) - bytes.readFloatLE(at))).toBeLessThanOrEqual(2 ** -24);
  }
});

test('the shipped example benches take the examples that keep their limits', async () => {
  const [twelve, sixteen] = exampleBenches.map(({ build }) => build());
  const results = await Promise.all(
    [twelve!, sixteen!].map((profile, i) =>
      makePack({
        document: exampleDocuments.find(({ exampleId }) => exampleId === 'pilot-comb')!.build(),
        profile,
        state: 'draft',
        tmpFolder: folder,
        outFile: () => path.join(folder, `shipped${i}.zip`),
      }),
    ),
  );
  for (const result of results) expect(result.ok || result.code).not.toBe('not_supported_yet');
});
