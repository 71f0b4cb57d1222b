import { createBench } from '@/lib/contracts/benches';
import { createWaveform } from '@/lib/contracts/waveforms';
import { exampleDocuments } from '@/lib/document/examples/exampleDocuments';
import type { BenchContent } from '@/lib/synth';
import { openBench, smallDocument } from '../helpers/documents.ts';
import { ask, signIn } from './support/api.ts';
import { makeWholePack } from './support/packs.ts';
import { expectMeasured, expectSaved, paint } from './support/table.ts';
import { expect, test } from './support/test.ts';

// The worker that shows the waveform renders the very words that the server's pack holds: one engine, the same bits.
const benches: Record<string, Partial<BenchContent>> = {
  '16 bit, low byte first': {},
  '12 bit, left-aligned, high byte first': { bits: 12, align: 'left', byteOrder: 'big' },
};

test('what was painted by hand has the digest of its pack, for each word', async ({ page, context, as, baseURL }) => {
  const mira = await as('Mira Sand');
  await signIn(context.request, baseURL!, 'Ines Okoro');
  const { waveformId } = await ask(context.request, baseURL!, createWaveform, { query: {}, body: smallDocument() });
  await page.goto(`/waveforms/${waveformId}`);
  await expectMeasured(page);
  await page
    .getByRole('group', { name: 'Tray' })
    .getByRole('button', { name: /^Pilots/ })
    .click();
  await paint(page, { symbol: 1, subcarrier: -4 }, { symbol: 3, subcarrier: 4 }, false);
  await expectSaved(page);
  for (const [name, layout] of Object.entries(benches)) {
    const profile = openBench(layout);
    const { benchId } = await ask(mira.context().request, baseURL!, createBench, {
      body: { ...profile, about: { ...profile.about, name: `Vector digest, ${name}` } },
    });
    const { shown, revisionId } = await page.evaluate(
      async (content) => ({
        shown: await window.__combwrightTable!.digest(content),
        revisionId: window.__combwrightTable!.revisionId(),
      }),
      profile.content,
    );
    const pack = await makeWholePack(context.request, baseURL!, revisionId, benchId);
    expect(`sha256:${shown.sha256}`, name).toBe(pack.vectorDigest);
    expect(shown.bytes).toBe(pack.samples * 4);
    expect(pack.state).toBe('draft');
  }
});

test('so have the example documents', async ({ page, context, as, baseURL }) => {
  test.setTimeout(120_000);
  const mira = await as('Mira Sand');
  const profile = openBench({ markers: { count: 4, packing: 'bytes', leastSamples: 1, stepSamples: 1 } });
  const { benchId } = await ask(mira.context().request, baseURL!, createBench, {
    body: { ...profile, about: { ...profile.about, name: 'Vector digest, examples' } },
  });
  await signIn(context.request, baseURL!, 'Ines Okoro');
  for (const { exampleId, build } of exampleDocuments) {
    const { waveformId, head } = await ask(context.request, baseURL!, createWaveform, { query: {}, body: build() });
    await page.goto(`/waveforms/${waveformId}`);
    await expectMeasured(page);
    const shown = await page.evaluate((content) => window.__combwrightTable!.digest(content), profile.content);
    const pack = await makeWholePack(context.request, baseURL!, head!.revisionId, benchId);
    expect(`sha256:${shown.sha256}`, exampleId).toBe(pack.vectorDigest);
  }
});
