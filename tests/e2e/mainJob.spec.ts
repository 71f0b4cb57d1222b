import { execFileSync } from 'node:child_process';
import { createHash } from 'node:crypto';
import { readFileSync, writeFileSync } from 'node:fs';
import type { Page, TestInfo } from '@playwright/test';
import { downloadPack, listPacks, showPack } from '@/lib/contracts/packs';
import { listPeople, setRoles } from '@/lib/contracts/people';
import { releaseRevision, showReview } from '@/lib/contracts/reviews';
import { showWaveform } from '@/lib/contracts/waveforms';
import { addressOf } from '@/lib/client/apiClient';
import type { Role } from '@/lib/contracts/common';
import { formatNumber } from '@/lib/drawing/quantities';
import { ask, send } from './support/api.ts';
import { expect, test } from './support/test.ts';
import { drawnDocument, expectMeasured, expectSaved, inkAt, live, paint } from './support/table.ts';

// From a preset to a proven file and its withdrawal, by everybody's own hands. One test hands its waveform to the next.
test.describe.configure({ mode: 'serial' });

const isPhone = (info: TestInfo) => info.project.name === 'phone';
const titleOf = (info: TestInfo) => `Main job on a ${info.project.name}`;
const sha256 = (bytes: Buffer) => createHash('sha256').update(bytes).digest('hex');
let waveformId = '';
let packId = '';

/** Undo and redo stand on the table, on a phone under More. */
async function press(page: Page, name: RegExp, info: TestInfo): Promise<void> {
  if (isPhone(info)) await page.getByRole('button', { name: 'More', exact: true }).click();
  await page.getByRole('button', { name }).click();
  if (isPhone(info)) await page.getByRole('button', { name: 'Close' }).click();
}

test('an author starts from a preset, paints, sees it, fits it and asks for a review', async ({ page }, info) => {
  test.setTimeout(150_000);
  await page.goto('/');
  await page.getByRole('button', { name: /Ines Okoro/ }).click();
  await expect(page).toHaveURL(/\/waveforms$/);
  await page.getByRole('button', { name: 'New waveform' }).click();
  await page.getByRole('radio', { name: /OFDM PHY at 20 MHz/ }).click();
  await page.getByRole('textbox', { name: 'Title of the new waveform' }).fill(titleOf(info));
  await page.getByRole('button', { name: 'Use this start' }).click();
  await expect(page).toHaveURL(/\/waveforms\/[0-9A-Z]{26}$/);
  waveformId = page.url().split('/').at(-1)!;
  await expectMeasured(page);
  const before = { document: await drawnDocument(page), live: await live(page) };

  // A stroke of pilots over data cells and DC, in symbol 2.
  await page
    .getByRole('group', { name: 'Tray' })
    .getByRole('button', { name: /^Pilots/ })
    .click();
  await page.getByRole('radio', { name: 'Brush' }).click();
  await paint(page, { symbol: 2, subcarrier: -6 }, { symbol: 2, subcarrier: 6 }, isPhone(info));
  await expectMeasured(page);
  const painted = await drawnDocument(page);
  for (const subcarrier of [-6, -1, 0, 5, 6]) expect(inkAt(painted, { symbol: 2, subcarrier })).toBe(2);
  for (const subcarrier of [-8, 8]) expect(inkAt(painted, { symbol: 2, subcarrier })).toBe(1);
  expect(inkAt(painted, { symbol: 1, subcarrier: 0 })).toBe(0);
  expect(inkAt(painted, { symbol: 3, subcarrier: 0 })).toBe(0);
  const after = await live(page);
  expect(after!.paprDb).not.toBe(before.live!.paprDb);
  await expect(page.getByText(formatNumber(after!.paprDb!, 2, true)).first()).toBeVisible();

  await press(page, /^Undo/, info);
  expect(await drawnDocument(page)).toEqual(before.document);
  await press(page, /^Redo/, info);
  expect(await drawnDocument(page)).toEqual(painted);
  if (isPhone(info)) await page.getByRole('button', { name: 'More', exact: true }).click();
  await expect(page.getByText(/^saved \d\d:\d\d$/)).toBeVisible();
  await expectSaved(page);

  await page.getByRole('link', { name: 'Fit', exact: true }).click();
  await page.getByLabel('Bench profile').selectOption({ label: 'Bench A, 12 bit, left-aligned, version 1' });
  await expect(page.getByText(/of \d+ checks? needs? a change/)).toBeVisible();
  await page.getByRole('button', { name: /^Apply (1 change|both changes|\d changes)$/ }).click();
  await expect(page.getByText(/changes? applied/i)).toBeVisible();
  await expect(page.getByText(/Everything fits|cannot be judged/).first()).toBeVisible({ timeout: 30_000 });
  await page.getByRole('button', { name: 'Ask for review' }).click();
  await page.getByRole('textbox', { name: 'Note' }).fill('Pilots over DC in symbol 2.');
  await page.getByRole('button', { name: 'Ask', exact: true }).click();
  await expect(page.getByText(/is in review, asked by Ines Okoro/)).toBeVisible();
});

test('nobody releases what they drew, by the page and by the API', async ({ as, watch, baseURL }) => {
  watch.allow(/status of 40[13]/);
  const mira = await as('Mira Sand');
  const { people } = await ask(mira.context().request, baseURL!, listPeople, {});
  const { personId } = people.find((person) => person.name === 'Ines Okoro')!;
  const give = (roles: Role[]) =>
    ask(mira.context().request, baseURL!, setRoles, { params: { personId }, body: { roles } });
  await give(['author', 'reviewer']);
  try {
    const ines = await as('Ines Okoro');
    await ines.goto(`/waveforms/${waveformId}/review`);
    await expect(ines.getByText('You drew this. Somebody else releases it.')).toBeVisible();
    await expect(ines.getByRole('button', { name: /^Release/ })).toHaveCount(0);
    const api = ines.context().request;
    const { openReview } = await ask(api, baseURL!, showReview, { params: { waveformId } });
    const answer = await send(api, baseURL!, releaseRevision, {
      params: { waveformId },
      body: { revisionId: openReview!.revisionId },
    });
    expect(answer.status()).toBe(403);
    expect(await answer.json()).toMatchObject({ code: 'own_work' });
    const { editions } = await ask(api, baseURL!, showWaveform, { params: { waveformId } });
    expect(editions).toEqual([]);
  } finally {
    await give(['author']);
  }
});

test('a reviewer reads it and releases it', async ({ as }) => {
  const nora = await as('Nora Quist');
  await nora.goto('/waveforms');
  await expect(nora.getByText('Waits for your review').first()).toBeVisible();
  await nora.goto(`/waveforms/${waveformId}/review`);
  await expect(nora.getByText('“Pilots over DC in symbol 2.”')).toBeVisible();
  await nora.getByRole('button', { name: 'Release edition 1' }).click();
  await expect(nora.getByText('It can never change, only be withdrawn.')).toBeVisible();
  await nora.getByRole('button', { name: 'Release', exact: true }).click();
  await expect(nora).toHaveURL(/\/history$/);
  await expect(nora.getByText('Released, edition 1').first()).toBeVisible();
});

test('an operator makes the pack, reads the card, downloads and checks the file', async ({ as, baseURL }, info) => {
  test.setTimeout(120_000);
  const jun = await as('Jun Aldane');
  const api = jun.context().request;
  await jun.goto('/packs');
  await jun.getByRole('button', { name: 'Make a pack' }).click();
  await jun.getByLabel('Edition').selectOption({ label: `${titleOf(info)}, edition 1` });
  await jun.getByLabel('Bench profile').selectOption({ label: 'Bench A, 12 bit, left-aligned, version 1' });
  await jun.getByRole('button', { name: 'Make the pack' }).click();
  await expect(jun).toHaveURL(/\/packs\/[0-9A-Z]{26}$/, { timeout: 60_000 });
  packId = jun.url().split('/').at(-1)!;
  const pack = await ask(api, baseURL!, showPack, { params: { packId } });
  expect(pack.evmDb!).toBeLessThan(-50);

  // The level card: no limit was given, and never is that shown as well.
  const card = jun.getByRole('region', { name: 'Level card' });
  await expect(card.getByText(pack.card.sentence)).toBeVisible();
  await card.getByRole('textbox', { name: 'Set on the generator, dBm' }).fill('-10');
  await card.getByRole('textbox', { name: 'Set on the generator, dBm' }).press('Enter');
  await expect(card.getByRole('button', { name: 'Back to the card’s setting' })).toBeVisible();
  await jun.getByRole('button', { name: 'All cautions, 11' }).click();
  await expect(jun.getByRole('dialog').getByRole('listitem')).toHaveCount(11);
  await jun.getByRole('button', { name: 'Close' }).click();

  // The download is the file that was proven; a broken one says where it stopped and goes on from there.
  await jun.route('**/packs/*/file', async (route) => {
    const body = await (await route.fetch()).body();
    await route.fulfill({ body: body.subarray(0, Math.floor(0.4 * body.length)) });
  });
  await jun.getByRole('link', { name: 'Download pack' }).click();
  await expect(jun.getByText(/^The file stopped at (39|40) %\.$/)).toBeVisible();
  await jun.unroute('**/packs/*/file');
  const coming = jun.waitForEvent('download');
  await jun.getByRole('button', { name: 'Go on' }).click();
  const download = await coming;
  await expect(jun.getByText('Downloaded, and it is the same file.')).toBeVisible();
  expect(download.suggestedFilename()).toBe(pack.fileName);
  const file = info.outputPath('pack.zip');
  await download.saveAs(file);
  const bytes = readFileSync(file);
  expect(`sha256:${sha256(bytes)}`).toBe(pack.fileDigest);
  const address = baseURL! + addressOf(downloadPack, { params: { packId } });
  const half = Math.floor(bytes.length / 2);
  const first = await api.get(address, { headers: { Range: `bytes=0-${half - 1}` } });
  const rest = await api.get(address, { headers: { Range: `bytes=${half}-`, 'If-Range': first.headers()['etag']! } });
  expect([first.status(), rest.status()]).toEqual([206, 206]);
  expect(Buffer.concat([await first.body(), await rest.body()]).equals(bytes)).toBe(true);

  // The vector in the generator's memory is hashed in the page itself.
  const vector = execFileSync('python3', [
    '-c',
    'import sys, zipfile; sys.stdout.buffer.write(zipfile.ZipFile(sys.argv[1]).read(sys.argv[2]))',
    file,
    pack.vectorName,
  ]);
  expect(`sha256:${sha256(vector)}`).toBe(pack.vectorDigest);
  const right = info.outputPath(pack.vectorName);
  writeFileSync(right, vector);
  await jun.getByLabel('File to check').setInputFiles(right);
  await expect(jun.getByText(/^Same file\..* is the vector\.$/)).toBeVisible();
  vector[0]! ^= 1;
  const wrong = info.outputPath('other.bin');
  writeFileSync(wrong, vector);
  await jun.getByLabel('File to check').setInputFiles(wrong);
  await expect(jun.getByText('Not the same file. Do not use it. (other.bin)')).toBeVisible();
});

test('limits entered for another device stay beside the card that was reviewed', async ({ as, baseURL }) => {
  const jun = await as('Jun Aldane');
  await jun.goto(`/packs/${packId}`);
  const reviewed = (await ask(jun.context().request, baseURL!, showPack, { params: { packId } })).card;
  await jun.getByRole('button', { name: 'Another device' }).click();
  const sheet = jun.getByRole('dialog');
  await sheet.getByRole('textbox', { name: /^Device/ }).fill('Front end 7');
  await sheet.getByRole('textbox', { name: /Peak limit/ }).fill('0');
  await sheet.getByRole('button', { name: 'Use these limits' }).click();
  await expect(jun.getByText(/Front end 7: limits entered by Jun Aldane, \d\d:\d\d/)).toBeVisible();
  const now = await ask(jun.context().request, baseURL!, showPack, { params: { packId } });
  expect(now.card).toEqual(reviewed);
  expect(now.deviceCards.map((one) => one.deviceName)).toEqual(['Front end 7']);
});

test('a withdrawn edition: its open page says so within 60 s, and its file is refused', async ({
  as,
  watch,
  baseURL,
}) => {
  watch.allow(/status of 409/);
  const jun = await as('Jun Aldane');
  await jun.clock.install();
  await jun.goto(`/packs/${packId}`);
  await expect(jun.getByRole('link', { name: 'Download pack' })).toBeVisible();

  const mira = await as('Mira Sand');
  await mira.goto(`/waveforms/${waveformId}/history`);
  await mira.getByRole('button', { name: 'Withdraw', exact: true }).click();
  await mira.getByRole('textbox', { name: 'Reason' }).fill('The pilots over DC break the receiver.');
  await mira.getByRole('button', { name: 'Withdraw edition 1' }).click();
  await expect(mira.getByText('Withdrawn, edition 1').first()).toBeVisible();

  await jun.clock.fastForward(59_000);
  await expect(jun.getByText('Do not use this pack.')).toBeVisible();
  await expect(jun.getByText(/withdrawn by Mira Sand: The pilots over DC break the receiver\./)).toBeVisible();
  await expect(jun.getByRole('link', { name: 'Download pack' })).toHaveCount(0);
  const api = jun.context().request;
  const address = baseURL! + addressOf(downloadPack, { params: { packId } });
  const refused = await api.get(address);
  expect(refused.status()).toBe(409);
  expect(await refused.json()).toMatchObject({ code: 'edition_withdrawn' });
  expect((await api.get(address, { headers: { Range: 'bytes=100-' } })).status()).toBe(409);
  expect((await api.head(address)).status()).toBe(409);
  const { items } = await ask(api, baseURL!, listPacks, { query: { waveformId } });
  expect(items.map((item) => item.state)).toEqual(['withdrawn']);
});
