import Ajv2020 from 'ajv/dist/2020';
import { existsSync, readdirSync, readFileSync } from 'node:fs';
import path from 'node:path';
import { exampleDocuments } from '@/lib/document/examples/exampleDocuments';
import { generatedFiles } from '@/lib/document/generatedFiles';
import { parseBenchProfile, parseWaveformDocument } from '@/lib/document/parse';
import { openBench, smallDocument } from '@/tests/helpers/documents';

const files = generatedFiles();
const onDisk = (folder: string, ending: string) =>
  readdirSync(folder)
    .filter((name) => name.endsWith(ending))
    .map((name) => `${folder}/${name}`);

test.each(files.map(({ path: file, text }) => [file, text]))('%s is what npm run generate writes', (file, text) => {
  expect(existsSync(file)).toBe(true);
  expect(readFileSync(file, 'utf8')).toBe(text);
});

test('no generated file is left over', () => {
  const found = [...onDisk('lib/document/schemas', '.json'), ...onDisk('lib/document/examples', '.json')];
  expect(found.sort()).toEqual(files.map((file) => file.path).sort());
});

describe('the JSON Schemas', () => {
  const ajv = new Ajv2020({ strict: true, strictTuples: false, allowUnionTypes: true });
  const compiled = (name: string) =>
    ajv.compile(JSON.parse(readFileSync(`lib/document/schemas/${name}.schema.json`, 'utf8')) as object);
  const waveform = compiled('waveform');
  const bench = compiled('bench');
  const manifest = compiled('manifest');

  const examples = files.filter((file) => /\.(combwright|bench)\.json$/.test(file.path));
  test.each(examples.map(({ path: file }) => [path.basename(file), file]))('take %s', (_name, file) => {
    const isBench = file.endsWith('.bench.json');
    const value = JSON.parse(readFileSync(file, 'utf8')) as unknown;
    const validate = isBench ? bench : waveform;
    validate(value);
    expect(validate.errors).toBeNull();
    const parsed = isBench ? parseBenchProfile(value) : parseWaveformDocument(value);
    expect(parsed).toMatchObject({ ok: true });
  });

  test('refuse what the schemas of the code refuse: unknown keys, ranges, kinds', () => {
    expect(waveform({ ...smallDocument(), extra: 1 })).toBe(false);
    expect(waveform({ ...smallDocument(), version: 2 })).toBe(false);
    expect(waveform(smallDocument({ fftSize: 8 }))).toBe(false);
    expect(waveform(smallDocument({ prefixSamples: [-1] }))).toBe(false);
    expect(waveform(smallDocument({ grid: { rows: [[64]], rowOfSymbol: [0] } }))).toBe(false);
    expect(waveform(smallDocument({ tray: [] }))).toBe(false);
    expect(waveform(smallDocument({ peakReduction: { kind: 'other' } as never }))).toBe(false);
    expect(bench(openBench({ bits: 17 }))).toBe(false);
    expect(bench(openBench({ word: 'int24' as never }))).toBe(false);
    expect(manifest({ format: 'combwright.manifest', version: 1 })).toBe(false);
  });
});

describe('the example documents', () => {
  const all = exampleDocuments.map(({ build }) => build());

  test('are six, invented, and rendered by this version', () => {
    expect(all).toHaveLength(6);
    for (const document of all) {
      expect(document.about.notes).toMatch(/^Invented\./);
    }
  });

  test('hold one of each kind of thing between them', () => {
    const text = JSON.stringify(all);
    const kinds = [...'constant alternating pn gold zadoffChu newman schroeder listed pattern uploaded'.split(' ')];
    for (const kind of kinds) expect(text).toContain(`"kind":"${kind}"`);
    const inks = all.flatMap(({ content }) => content.tray);
    expect(new Set(inks.map(({ role }) => role))).toEqual(new Set(['null', 'data', 'pilot', 'tone', 'reserved']));
    const maps = inks.flatMap((ink) => (ink.role === 'data' ? [`${ink.value.constellation} ${ink.value.bitMap}`] : []));
    expect(new Set(maps).size).toBe(18);
    const contents = all.map(({ content }) => content);
    expect(new Set(contents.map(({ timing }) => timing.mode)).size).toBe(2);
    expect(new Set(contents.map(({ level }) => level.reference)).size).toBe(4);
    expect(new Set(contents.flatMap(({ markers }) => markers.map(({ at }) => at))).size).toBe(3);
    const fills = contents.flatMap(({ streams }) =>
      streams.map(({ fill, acrossRepeats }) => `${fill} ${acrossRepeats}`),
    );
    expect(new Set(fills).size).toBe(4);
  });
});
