import { existsSync, mkdtempSync, readdirSync, readFileSync, rmSync, writeFileSync } from 'node:fs';
import { open } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import path from 'node:path';
import type { BenchProfile, WaveformContent, WaveformDocument } from '@/lib/synth';
import { makePack, requireProof, scaleOf } from '@/server/packs/makePack';
import { measureRendering } from '@/server/packs/measureRendering';
import type { PackProgress, PackRequest, PackState } from '@/server/packs/packTypes';
import { openPool } from '@/server/packs/pool/workPool';
import { verifyPack } from '@/server/packs/verifyPack';
import { proveVector } from '@/server/packs/vectorProof';
import { writeVector } from '@/server/packs/vectorWriter';
import { openBench, smallDocument } from '../../../helpers/documents';

let folder: string;
beforeEach(() => (folder = mkdtempSync(path.join(tmpdir(), 'make-'))));
afterEach(() => rmSync(folder, { recursive: true, force: true }));

const make = (document: WaveformDocument, profile: BenchProfile = openBench(), more: Partial<PackRequest> = {}) =>
  makePack({
    document,
    profile,
    state: 'draft',
    tmpFolder: folder,
    outFile: () => path.join(folder, 'pack.zip'),
    ...more,
  });

const withIntent = (document: WaveformDocument): WaveformDocument => ({
  ...document,
  intent: { outputRmsDbm: -12, lossDb: 10, devicePeakLimitDbm: 0, deviceMeanLimitDbm: null, levelToleranceDb: 1 },
});

/** 100 symbols of PN data: 4800 data cells. */
const manyCells = (overrides: Partial<WaveformContent> = {}) =>
  smallDocument({
    symbolCount: 100,
    grid: { rows: smallDocument().content.grid.rows, rowOfSymbol: new Array<number>(100).fill(0) },
    ...overrides,
  });

test('equal inputs give equal bytes, whenever they are made and however the document was written', async () => {
  const document = withIntent(smallDocument());
  const first = await make(document, openBench(), { outFile: () => path.join(folder, 'a.zip') });
  await new Promise((resolve) => setTimeout(resolve, 2100)); // a zip's clock counts in two seconds
  const turned = JSON.parse(JSON.stringify(document, Object.keys(document).reverse().concat(allKeys(document))));
  const second = await make(turned as WaveformDocument, openBench(), { outFile: () => path.join(folder, 'b.zip') });
  expect(first.ok && second.ok).toBe(true);
  expect(readFileSync(path.join(folder, 'a.zip')).equals(readFileSync(path.join(folder, 'b.zip')))).toBe(true);
  expect(readdirSync(folder).sort()).toEqual(['a.zip', 'b.zip']);
});

function allKeys(value: unknown): string[] {
  if (typeof value !== 'object' || value === null) return [];
  return Object.entries(value).flatMap(([key, inner]) => [...allKeys(inner), key]);
}

test('what goes into the key goes into the pack: state, profile, title, content', async () => {
  const seen = new Map<string, string>();
  const states: PackState[] = ['draft', 1, 2];
  for (const state of states) seen.set(String(state), await keyOf(smallDocument(), openBench(), state));
  seen.set(
    'title',
    await keyOf({ ...smallDocument(), about: { ...smallDocument().about, title: 'Other' } }, openBench()),
  );
  seen.set(
    'notes',
    await keyOf({ ...smallDocument(), about: { ...smallDocument().about, notes: 'Other' } }, openBench()),
  );
  seen.set('intent', await keyOf(withIntent(smallDocument()), openBench()));
  seen.set('bench notes', await keyOf(smallDocument(), { ...openBench(), about: { name: 'x', notes: 'y' } }));
  expect(new Set(seen.values()).size).toBe(seen.size);
});

async function keyOf(document: WaveformDocument, profile: BenchProfile, state: PackState = 'draft') {
  const result = await make(document, profile, { state });
  if (!result.ok) throw new Error(result.message);
  return result.pack.manifest.packKey;
}

// th.sqnr.ofdm: the noise of rounding is white over the transform's bins. A component errs by 1/12 LSB², a sample by 1/6; the cells of a
// transform of M·N points scaled by 1/(M·√N) see it divided by M. EVM² = (1/6)/(scale²·M) over the mean power of the cells.
test.each([1, 2])('the EVM read back is what 16 bits allow, within 1 dB (oversampling %i)', async (oversampling) => {
  const result = await make(manyCells({ oversampling }));
  if (!result.ok) throw new Error(result.message);
  const { proof, word, levels } = result.pack.manifest;
  expect(proof.cells).toBeGreaterThanOrEqual(1000);
  expect(levels.saturatedComponents).toBe(0);
  const theoryDb = 10 * Math.log10(1 / 6 / word.scaleLsbPerUnit ** 2 / oversampling);
  expect(Math.abs(proof.evmDb! - theoryDb)).toBeLessThan(1);
  expect(proof.wordsDifferent).toBe(0);
});

test('floats are read back to −140 dB and better', async () => {
  const result = await make(manyCells(), openBench({ word: 'float32' }));
  if (!result.ok) throw new Error(result.message);
  expect(result.pack.manifest.proof.evmDb).toBeLessThanOrEqual(-140);
});

test('a pack that cannot be is refused with its place, and nothing is left', async () => {
  const nothing = await make(smallDocument({ grid: { rows: [[64, 0]], rowOfSymbol: [0, 0, 0, 0] } }));
  expect(nothing).toMatchObject({ ok: false, code: 'invalid', message: expect.stringContaining('Nothing is painted') });
  const split = await make(smallDocument(), openBench({ layout: 'split', container: 'wav', byteOrder: 'big' }));
  expect(split).toMatchObject({
    code: 'limit_missed',
    issues: [
      { where: 'bench', pointer: '/content/layout' },
      { where: 'bench', pointer: '/content/byteOrder' },
    ],
  });
  const long = await make(smallDocument(), openBench({ mostSamples: 100 }));
  expect(long).toMatchObject({ code: 'limit_missed', issues: [{ where: 'bench', pointer: '/content/mostSamples' }] });
  const marked = await make(
    smallDocument({ markers: [{ name: 'Frame', at: 'file', symbol: null, offsetSamples: 0, lengthSamples: 8 }] }),
  );
  expect(marked).toMatchObject({ code: 'limit_missed', issues: [{ pointer: '/content/markers' }] });
  expect(readdirSync(folder)).toEqual([]);
});

test('samples that saturate are counted and shown where the level refers to the RMS, never hidden', async () => {
  const result = await make(manyCells({ level: { reference: 'rms', headroomDb: 3 } }));
  if (!result.ok) throw new Error(result.message);
  const { levels } = result.pack.manifest;
  expect(levels.saturatedComponents).toBeGreaterThan(0);
  expect(levels.saturatedSamples).toBeLessThanOrEqual(levels.saturatedComponents);
  const file = readFileSync(path.join(folder, 'pack.zip')).toString('latin1');
  expect(file).toContain(`${levels.saturatedSamples} samples pass full scale`); // level card and README
});

test('a level that may be meant is said in manifest and card, in the fit’s own words, and refuses nothing', async () => {
  const of = withIntent(manyCells({ level: { reference: 'componentPeak', headroomDb: 0 }, frequencyOffsetHz: 1234 }));
  const result = await make(of);
  if (!result.ok) throw new Error(result.message);
  const said = result.pack.manifest.safety.slice(1 + 11);
  expect(said).toEqual(result.pack.notices);
  expect(said).toEqual([
    expect.stringMatching(/^Seam: The frequency offset makes /),
    expect.stringMatching(/^Headroom: .+ above full scale; full scale is the limit\.$/),
  ]);
  const file = readFileSync(path.join(folder, 'pack.zip')).toString('utf8');
  for (const words of said) expect(file).toContain(`  ${words}\n`); // the level card has lines
});

test('progress runs over four steps and never back', async () => {
  const seen: PackProgress[] = [];
  await make(manyCells(), openBench(), { onProgress: (progress) => seen.push({ ...progress }) });
  expect([...new Set(seen.map(({ step }) => step))]).toEqual(['rendering', 'quantizing', 'readingBack', 'writing']);
  for (let i = 1; i < seen.length; i++) expect(seen[i]!.doneRatio).toBeGreaterThanOrEqual(seen[i - 1]!.doneRatio);
  expect(seen.at(-1)!.doneRatio).toBe(1);
});

test.each(['rendering', 'quantizing', 'readingBack', 'writing'] as const)(
  'cancelled while %s, nothing was kept',
  async (step) => {
    const stop = new AbortController();
    const result = await make(manyCells(), openBench(), {
      signal: stop.signal,
      onProgress: (progress) => progress.step === step && stop.abort(),
    });
    expect(result).toEqual({ ok: false, code: 'cancelled', message: 'Cancelled. Nothing was kept.', issues: [] });
    expect(readdirSync(folder)).toEqual([]);
  },
);

test('a pack is not offered when a word was damaged on the disk', async () => {
  const { content } = manyCells();
  const bench = openBench();
  const pool = openPool(content, bench.content);
  const measure = await measureRendering(pool, content);
  const scale = scaleOf(manyCells(), bench, measure);
  const handle = await open(path.join(folder, 'vector'), 'wx+');
  const place = async () => ({ handle, offsetBytes: 0, bytes: (await handle.stat()).size });
  await writeVector(pool, content, bench.content, scale, [await place()]);
  const prove = async () => {
    const proof = await proveVector(pool, content, bench.content, scale, [await place()]);
    return () => requireProof(proof, measure.stats.samples);
  };
  expect(await prove()).not.toThrow();
  await handle.write(Buffer.from([0xff]), 0, 1, 4000);
  expect(await prove()).toThrow(/Not offered: 1 of \d+ words differ from a second rendering\./);
  await handle.truncate(4000);
  expect(await prove()).toThrow('Not offered: the file has 1000 samples instead of');
  await handle.close();
});

test('verify finds any byte that changed', async () => {
  const result = await make(withIntent(smallDocument()));
  if (!result.ok) throw new Error(result.message);
  const { file, manifest, vectorName } = result.pack;
  expect(await verifyPack(file)).toMatchObject({ ok: true, verified: { madeAgain: true } });
  const whole = readFileSync(file);
  const text = whole.toString('latin1');
  const places: [string, number, string][] = [
    ['vector', text.indexOf(vectorName) + vectorName.length + 40, `/${vectorName}`],
    ['card', text.lastIndexOf('Output off while'), '/level-card.txt'],
    ['reader', text.indexOf('import json'), '/README.txt'],
    ['manifest', text.indexOf('"evmDb": -') + 10, '/manifest.json'],
  ];
  for (const [, at, pointer] of places) {
    const changed = Buffer.from(whole);
    changed[at] = changed[at] === 0x39 ? 0x38 : changed[at]! ^ 1;
    writeFileSync(file, changed);
    const found = await verifyPack(file);
    expect(found).toMatchObject({ ok: false });
    expect(!found.ok && found.issues.map((issue) => issue.pointer)).toContain(pointer);
  }
  expect(manifest.files).toHaveLength(9);
  expect(existsSync(path.join(folder, 'nothing'))).toBe(false);
  expect(await verifyPack(path.join(folder, 'nothing'))).toMatchObject({ ok: false, code: 'io_failed' });
  expect(await verifyPack(folder)).toMatchObject({ ok: false });
});
