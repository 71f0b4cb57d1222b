import { mkdtempSync, readFileSync, rmSync } from 'node:fs';
import { open } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import path from 'node:path';
import { createSentValues, type PeakReduction } from '@/lib/synth';
import { makePack } from '@/server/packs/makePack';
import { verifyPack } from '@/server/packs/verifyPack';
import { readZipEntries } from '@/server/packs/zipReader';
import { openBench, smallDocument } from '../../../helpers/documents';

let folder: string;
beforeEach(() => (folder = mkdtempSync(path.join(tmpdir(), 'reduced-'))));
afterEach(() => rmSync(folder, { recursive: true, force: true }));

async function packOf(peakReduction: PeakReduction) {
  const document = smallDocument({ peakReduction });
  const file = path.join(folder, 'pack.zip');
  const result = await makePack({
    document,
    profile: openBench(),
    state: 'draft',
    tmpFolder: folder,
    outFile: () => file,
  });
  if (!result.ok) throw new Error(result.message);
  return { document, file, manifest: result.pack.manifest };
}

async function entryOf(file: string, name: string): Promise<Buffer> {
  const handle = await open(file, 'r');
  const entry = (await readZipEntries(handle)).find((one) => one.name === name)!;
  await handle.close();
  return readFileSync(file).subarray(entry.offsetBytes, entry.offsetBytes + entry.bytes);
}

test('a pack of a lowered peak lists what was meant and what was sent, says its cost, and is proven against what was sent', async () => {
  const { document, file, manifest } = await packOf({ kind: 'clipAndFilter', targetPaprDb: 4, iterations: 3 });
  expect(manifest.peakReduction).toMatchObject({ kind: 'clipAndFilter', targetPaprDb: 4 });
  const { reachedPaprDb, passes, evmDb, evmGainFittedDb, meanPowerChangeDb } = manifest.peakReduction!;
  expect(passes).toBeGreaterThan(0);
  expect(reachedPaprDb).toBeGreaterThan(3.9);
  expect(evmDb!).toBeGreaterThan(-50);
  expect(evmGainFittedDb!).toBeLessThanOrEqual(evmDb!);
  expect(meanPowerChangeDb).toBeLessThan(0);
  expect(manifest.proof.wordsDifferent).toBe(0);
  expect(manifest.proof.evmDb!).toBeLessThan(-80);
  expect(manifest.proof.recipe.cells).toContain('as they are sent after peak reduction');
  expect(manifest.files.map(({ role }) => role)).toContain('referenceSent');

  const values = createSentValues(document.content);
  const { fftSize } = document.content;
  const meant = new Float64Array(2 * fftSize);
  const sent = new Float64Array(2 * fftSize);
  values.meant.write(0, 0, meant);
  values.write(0, 0, sent);
  const listed = (all: Float64Array) => {
    const cells = Array.from({ length: fftSize }, (_, p) => p).filter((p) => values.cells[p] !== 0);
    return cells.flatMap((p) => [Math.fround(all[2 * p]!), Math.fround(all[2 * p + 1]!)]);
  };
  for (const [name, all] of [
    ['reference.cf32', meant],
    ['reference-sent.cf32', sent],
  ] as const) {
    const bytes = await entryOf(file, name);
    const expected = listed(all);
    expect(expected.map((_, i) => bytes.readFloatLE(4 * i))).toEqual(expected);
  }
  const readme = (await entryOf(file, 'README.txt')).toString('utf8');
  expect(readme).toContain("np.fromfile('reference-sent.cf32', '<c8')");
  expect(await verifyPack(file)).toMatchObject({ ok: true });
});

test('a target that nothing reaches changes no value: one reference', async () => {
  const { manifest, file } = await packOf({ kind: 'clipAndFilter', targetPaprDb: 20, iterations: 3 });
  expect(manifest.peakReduction).toMatchObject({ passes: 0, evmDb: null, meanPowerChangeDb: 0 });
  expect(manifest.files.map(({ role }) => role)).not.toContain('referenceSent');
  expect(await verifyPack(file)).toMatchObject({ ok: true });
});
