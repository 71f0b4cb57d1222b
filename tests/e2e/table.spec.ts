import type { Page, TestInfo } from '@playwright/test';
import { createWaveform } from '@/lib/contracts/waveforms';
import type { WaveformDocument } from '@/lib/synth';
import { smallDocument } from '../helpers/documents.ts';
import { ask, signIn } from './support/api.ts';
import { drawnDocument, expectMeasured, inkAt, session } from './support/table.ts';
import { expect, test } from './support/test.ts';

// The canvas is never the only way: keys and numbers do the same work.
const PILOTS = 2;
const isPhone = (info: TestInfo) => info.project.name === 'phone';

async function openNew(page: Page, origin: string, document: WaveformDocument = smallDocument()): Promise<void> {
  await signIn(page.context().request, origin, 'Ines Okoro');
  const { waveformId } = await ask(page.context().request, origin, createWaveform, { query: {}, body: document });
  await page.goto(`/waveforms/${waveformId}`);
}

/** The tool's blanks: beside the grid, on a phone in a sheet. */
async function openSentence(page: Page, info: TestInfo) {
  if (!isPhone(info)) return page.locator('#sentence');
  await page.getByRole('button', { name: 'Change', exact: true }).click();
  return page.getByRole('dialog');
}

async function setBlank(form: ReturnType<Page['locator']>, label: string, value: number): Promise<void> {
  const blank = form.getByRole('textbox', { name: label, exact: true });
  await blank.fill(String(value));
  await blank.press('Enter');
}

test('cells are painted, told and taken back by keys alone', async ({ page, baseURL }) => {
  await openNew(page, baseURL!);
  await expectMeasured(page);
  await page.getByRole('application', { name: /^Grid,/ }).focus();
  await page.keyboard.press('b');
  await page.keyboard.press('3');
  expect(await session(page)).toMatchObject({ tool: 'brush', ink: PILOTS });
  await page.keyboard.press('Control+ArrowLeft');
  await page.keyboard.press('Control+ArrowUp');
  for (const key of ['ArrowRight', 'ArrowDown', 'Space']) await page.keyboard.press(key);
  const cell = await page.evaluate(() => {
    const { position, symbol } = (
      window.__combwrightTable!.session() as unknown as {
        cursor: { position: number; symbol: number };
      }
    ).cursor;
    return { symbol, subcarrier: position - 32 };
  });
  expect(inkAt(await drawnDocument(page), cell)).toBe(PILOTS);
  expect(inkAt(smallDocument(), cell)).not.toBe(PILOTS);
  await expect(page.locator('#spoken-cell')).toContainText(
    `Subcarrier ${String(cell.subcarrier).replace('-', '−')}, symbol ${cell.symbol}, `,
  );
  await page.keyboard.press('Control+z');
  expect(inkAt(await drawnDocument(page), cell)).toBe(inkAt(smallDocument(), cell));
  await page.keyboard.press('Control+Shift+z');
  expect(inkAt(await drawnDocument(page), cell)).toBe(PILOTS);
  await page.keyboard.press('?');
  await expect(page.getByRole('dialog', { name: 'Keys' })).toBeVisible();
  await page.keyboard.press('Escape');
  await expect(page.getByRole('dialog')).toHaveCount(0);
});

test('a comb is placed by its numbers, and says how far its pilots reach', async ({ page, baseURL }, info) => {
  await openNew(page, baseURL!);
  await expectMeasured(page);
  await page
    .getByRole('group', { name: 'Tray' })
    .getByRole('button', { name: /^Pilots/ })
    .click();
  await page.getByRole('radio', { name: /^Comb/ }).click();
  const form = await openSentence(page, info);
  await setBlank(form, 'subcarrier step', 4);
  await setBlank(form, 'first subcarrier', -16);
  await setBlank(form, 'last subcarrier', 16);
  await setBlank(form, 'symbol step', 2);
  await setBlank(form, 'first symbol', 0);
  await setBlank(form, 'last symbol', 3);
  await setBlank(form, 'shift per pass', 2);
  await expect(form.getByText(/Follows [\d.]+ ns of delay, [\d.]+ kHz of Doppler/).first()).toBeVisible();
  await form.getByRole('button', { name: /^Paint/ }).click();
  const document = await drawnDocument(page);
  const painted = (symbol: number) =>
    Array.from({ length: 33 }, (_, i) => i - 16).filter(
      (subcarrier) => inkAt(document, { symbol, subcarrier }) === PILOTS,
    );
  expect(painted(0)).toEqual(expect.arrayContaining([-16, -12, -8, -4, 0, 4, 8, 12, 16]));
  // The second painted symbol stands two subcarriers further; of the first, only the four pilots of before are left.
  expect(painted(2)).toEqual(expect.arrayContaining([-14, -10, -6, -2, 2, 6, 10, 14]));
  expect(painted(1)).toEqual([-7, 7]);
});

test('a file of bits is taken, one of zero length is refused in words', async ({ page, baseURL }, info) => {
  await openNew(page, baseURL!);
  await expectMeasured(page);
  if (isPhone(info)) await page.getByRole('button', { name: 'More', exact: true }).click();
  await page.getByRole('button', { name: /^Payload,/ }).click();
  const sheet = page.getByRole('dialog', { name: 'Payload' });
  await sheet.getByRole('radio', { name: 'File' }).click();
  const file = (name: string, bytes: number[]) => ({
    name,
    mimeType: 'application/octet-stream',
    buffer: Buffer.from(bytes),
  });
  await sheet.getByLabel('File of bits').setInputFiles(file('empty.bin', []));
  await expect(
    sheet.getByText('“empty.bin” is empty: it holds no bits. Choose a file with at least one byte.'),
  ).toBeVisible();
  expect((await drawnDocument(page)).content.streams[0]!.source.kind).toBe('pn');
  await sheet.getByLabel('File of bits').setInputFiles(file('two.bin', [0xa5, 0x0f]));
  await expect(sheet.getByText('two.bin, 16 bits')).toBeVisible();
  expect((await drawnDocument(page)).content.streams[0]!.source).toEqual({
    kind: 'uploaded',
    name: 'two.bin',
    bitCount: 16,
    base64: Buffer.from([0xa5, 0x0f]).toString('base64'),
  });
});

test('an empty grid says what to do', async ({ page, baseURL }) => {
  await openNew(page, baseURL!, smallDocument({ grid: { rows: [[64, 0]], rowOfSymbol: [0, 0, 0, 0] } }));
  await expectMeasured(page);
  await expect(page.getByText('Paint a cell to see the waveform.')).toBeVisible();
  await page.getByRole('application', { name: /^Grid,/ }).focus();
  await page.keyboard.press('2');
  await page.keyboard.press('Space');
  await expect(page.getByText('Paint a cell to see the waveform.')).toHaveCount(0);
});

test('a browser that cannot draw the grid still paints it by numbers', async ({ page, baseURL }, info) => {
  await page.addInitScript(() => {
    const get = HTMLCanvasElement.prototype.getContext as (...given: unknown[]) => unknown;
    HTMLCanvasElement.prototype.getContext = function (this: HTMLCanvasElement, ...given: unknown[]) {
      return String(given[0]).startsWith('webgl') ? null : get.apply(this, given);
    } as typeof HTMLCanvasElement.prototype.getContext;
  });
  await openNew(page, baseURL!);
  await expect(page.getByText('This browser cannot draw the grid. The forms do the same work.')).toBeVisible();
  await page
    .getByRole('group', { name: 'Tray' })
    .getByRole('button', { name: /^Pilots/ })
    .click();
  await page.getByRole('radio', { name: /^Rectangle/ }).click();
  const form = await openSentence(page, info);
  await setBlank(form, 'first subcarrier', 1);
  await setBlank(form, 'last subcarrier', 3);
  await setBlank(form, 'first symbol', 1);
  await setBlank(form, 'last symbol', 1);
  await form.getByRole('button', { name: /^Paint/ }).click();
  const document = await drawnDocument(page);
  expect([0, 1, 2, 3, 4].map((subcarrier) => inkAt(document, { symbol: 1, subcarrier }))).toEqual([0, 2, 2, 2, 1]);
  await expect(page.getByRole('table', { name: 'Runs of cells by symbol' })).toContainText('1 to 3 Pilots');
});
