import { showRevision } from '@/lib/contracts/waveforms';
import {
  createImpairedCapture,
  createSynthesis,
  createWordWriter,
  deriveFigures,
  noImpairments,
  type BenchContent,
  type Impairments,
  type WaveformContent,
} from '@/lib/synth';
import { openBench } from '@/tests/helpers/documents';
import { ask, signIn } from './support/api.ts';
import { expectAccessible } from './support/axe.ts';
import { demoPack } from './support/demo.ts';
import { expect, test } from './support/test.ts';

/** A content's waveform as a receiver records it: 16-bit words, low byte first. */
function recording(content: WaveformContent, impairments: Partial<Impairments>, samples: number): Buffer {
  const synthesis = createSynthesis(content);
  const vector = new Float64Array(2 * synthesis.samples);
  for (let at = 0; at < synthesis.samples;) at += synthesis.read(vector.subarray(2 * at));
  const capture = createImpairedCapture(
    {
      source: {
        samples: synthesis.samples,
        read: (first, count, out) => out.set(vector.subarray(2 * first, 2 * (first + count))),
      },
      clockHz: deriveFigures(content).sampleClockHz,
      mode: content.timing.mode,
      meanPower: vector.reduce((sum, value) => sum + value * value, 0) / synthesis.samples,
      usedTurns: 0.4,
    },
    { ...noImpairments, seed: 11, ...impairments },
  );
  const data = new Float64Array(2 * samples);
  capture.read(samples, data);
  const bench: BenchContent = openBench().content;
  const bytes = new Uint8Array(4 * samples);
  createWordWriter(
    { ...bench, word: 'int16', bits: 16, align: 'right', byteOrder: 'little' },
    { scale: 2000, fullScale: 32767, referenceLevel: 1, isSilent: false },
  ).write(data, samples, bytes);
  return Buffer.from(bytes);
}

test('an operator reads a capture against its edition, on the device', async ({ page, context, baseURL }) => {
  await signIn(context.request, baseURL!, 'Jun Aldane');
  const pack = await demoPack(context.request, baseURL!);
  const { document } = await ask(context.request, baseURL!, showRevision, { params: { revisionId: pack.revisionId } });
  const placed = { snrDb: 34, frequencyOffsetHz: -512.5, delaySamples: 1536, gainDb: -3 };
  const sent: string[] = [];
  page.on('request', (request) => void (request.method() === 'GET' || sent.push(request.url())));
  await page.goto(`/packs/${pack.packId}`);
  await page.getByRole('link', { name: 'Add a capture' }).click();
  await expect(page.getByText('The capture stays on this device')).toBeVisible();
  await expectAccessible(page, 'before a file');

  const file = page.getByLabel('Capture file');
  await file.setInputFiles({
    name: 'loop.bin',
    mimeType: 'application/octet-stream',
    buffer: recording(document.content, placed, 64000),
  });
  await expect(page.getByText('From its bytes: 16-bit integers, little-endian, I and Q in turn.')).toBeVisible();
  await page.getByLabel(/EVM limit/).fill('5');
  await page.getByLabel(/EVM limit/).press('Enter');
  await expectAccessible(page, 'with a file');
  await page.getByRole('button', { name: 'Read the capture' }).click();
  await expect(page.getByText('EVM of the data cells')).toBeVisible({ timeout: 60_000 });
  await expect(page.getByText('meets 5.0', { exact: true })).toBeVisible();
  await expect(page.getByRole('button', { name: /^Frequency offset, −512\.\d Hz/ })).toBeVisible();
  await expect(page.getByRole('button', { name: /^Delay, 50 µs/ })).toBeVisible();
  await expect(page.getByText(/against the values sent\. One tap a subcarrier from all known cells/)).toBeVisible();
  await expect(page.getByText('Power in the null cells')).toBeVisible();
  await expectAccessible(page, 'the result');
  for (const name of ['Inks', 'Subcarriers', 'Constellation', 'Channel']) {
    const tab = page.getByRole('radio', { name });
    if (await tab.isVisible()) await tab.click();
    else await expect(page.getByRole('heading', { name })).toBeVisible();
  }
  await expect(page.getByText(/From all known cells\. 1 path/)).toBeVisible();
  expect(sent, 'nothing was sent').toEqual([]);
});

test('a capture that is not this edition has no EVM, and one that is too short is refused with both numbers', async ({
  page,
  context,
  baseURL,
}) => {
  await signIn(context.request, baseURL!, 'Jun Aldane');
  const pack = await demoPack(context.request, baseURL!);
  const { document } = await ask(context.request, baseURL!, showRevision, { params: { revisionId: pack.revisionId } });
  const streams = document.content.streams.map((stream) => ({
    ...stream,
    source: { kind: 'gold' as const, cInit: 4711 },
  }));
  await page.goto(`/packs/${pack.packId}/capture`);
  const file = page.getByLabel('Capture file');
  const choose = (name: string, buffer: Buffer) =>
    file.setInputFiles({ name, mimeType: 'application/octet-stream', buffer });
  await expect(page.getByText('The capture stays on this device')).toBeVisible();

  await choose('short.bin', recording(document.content, {}, 1000));
  await page.getByRole('button', { name: 'Read the capture' }).click();
  await expect(page.getByText(/A symbol has \d+ samples at the capture's clock; the capture has 1000\./)).toBeVisible();

  const silent = document.content.tray.map((ink) =>
    ink.role === 'data' || ink.role === 'null' ? ink : { ...ink, powerDb: -60 },
  );
  await choose('other.bin', recording({ ...document.content, streams, tray: silent }, { snrDb: 20 }, 40000));
  await page.getByRole('button', { name: 'Read the capture' }).click();
  await expect(page.getByText(/This does not look like edition \d/)).toBeVisible({ timeout: 60_000 });
  await expect(page.getByText(/No EVM is given below 0\.30/)).toBeVisible();
  await expect(page.getByText(/EVM of/)).toHaveCount(0);
  await expectAccessible(page, 'not recognised');
});
