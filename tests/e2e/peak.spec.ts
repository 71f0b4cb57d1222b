import type { Page } from '@playwright/test';
import { createWaveform } from '@/lib/contracts/waveforms';
import { paLadder } from '@/lib/document/demoDocuments';
import { ask } from './support/api.ts';
import { expectAccessible } from './support/axe.ts';
import { drawnDocument, expectMeasured, live } from './support/table.ts';
import { expect, test } from './support/test.ts';

/** What a way reached; a way that is tried anew has no figure for a moment. */
async function figureOf(page: Page, name: RegExp): Promise<number> {
  let label = '';
  await expect(async () => {
    label = (await page.getByRole('radio', { name }).getAttribute('aria-label'))!;
    expect(label).toMatch(/\. \d+\.\d+ dB,/);
  }).toPass({ timeout: 10_000 });
  return Number(/\. (\d+\.\d+) dB,/.exec(label)![1]);
}

test('a peak is lowered: tried side by side, shown before it is applied, undone like any edit', async ({
  as,
  baseURL,
}, info) => {
  const page = await as('Ines Okoro');
  const document = paLadder();
  const body = { ...document, about: { ...document.about, title: 'Peak test' } };
  const { waveformId } = await ask(page.context().request, baseURL!, createWaveform, { query: {}, body });
  await page.goto(`/waveforms/${waveformId}`);
  await expectMeasured(page);
  const before = await drawnDocument(page);
  const beforeDb = (await live(page))!.paprDb!;

  if (info.project.name === 'phone') {
    await page.getByRole('button', { name: 'More' }).first().click();
    await page.getByRole('button', { name: 'Lower the peak' }).click();
  } else {
    await page.getByRole('application', { name: /^Grid,/ }).focus();
    await page.keyboard.press('l');
  }
  const clip = page.getByRole('radio', { name: /^Clip and filter\. \d/ });
  await expect(clip).toBeVisible({ timeout: 15_000 });
  await clip.click();
  const reached = await figureOf(page, /^Clip and filter/);
  expect(reached).toBeLessThan(beforeDb);
  // shown on the table, and no part of the document yet
  await expect.poll(async () => (await live(page))!.paprDb!.toFixed(2), { timeout: 10_000 }).toBe(reached.toFixed(2));
  expect(await drawnDocument(page)).toEqual(before);
  await expectAccessible(page, 'lower the peak');

  await page.getByRole('button', { name: 'Apply clip and filter' }).click();
  const { peakReduction } = (await drawnDocument(page)).content;
  expect(peakReduction).toEqual({ kind: 'clipAndFilter', targetPaprDb: 8.4, iterations: 4 });
  await expect(page.getByRole('dialog')).toHaveCount(0);
  await page.getByRole('application', { name: /^Grid,/ }).focus();
  await page.keyboard.press('Control+z');
  expect(await drawnDocument(page)).toEqual(before);
});
