import type { CDPSession, Page, TestInfo } from '@playwright/test';
import { createWaveform } from '@/lib/contracts/waveforms';
import { paLadder } from '@/lib/document/demoDocuments';
import { ask, type DemoName } from './support/api.ts';
import { expectAccessible } from './support/axe.ts';
import {
  drawnDocument,
  expectMeasured,
  expectSaved,
  inkAt,
  live,
  paint,
  placeOf,
  saveState,
  session,
} from './support/table.ts';
import { expect, test } from './support/test.ts';

// What hands do at the table: strokes, fingers, numbers, inks, and a canvas that comes and goes.
const PILOT = 8;
const isPhone = (info: TestInfo) => info.project.name === 'phone';
const grid = (page: Page) => page.getByRole('application', { name: /^Grid,/ });
const chooseInk = (page: Page, name: RegExp) => page.getByRole('button', { name }).first().click();

async function openNew(as: (name: DemoName) => Promise<Page>, origin: string): Promise<Page> {
  const page = await as('Ines Okoro');
  const document = paLadder();
  const body = { ...document, about: { ...document.about, title: 'Table test' } };
  const { waveformId } = await ask(page.context().request, origin, createWaveform, { query: {}, body });
  await page.goto(`/waveforms/${waveformId}`);
  await expectMeasured(page);
  return page;
}

test('a stroke synthesizes what it touched, and is undone whole', async ({ as, baseURL }, info) => {
  const page = await openNew(as, baseURL!);
  const before = { document: await drawnDocument(page), live: await live(page) };
  await chooseInk(page, /^Pilot, /);
  const from = { symbol: 3, subcarrier: isPhone(info) ? 4 : 150 };
  const to = { ...from, subcarrier: from.subcarrier + 3 };
  await paint(page, from, to, isPhone(info));
  const painted = await drawnDocument(page);
  for (const cell of [from, to]) expect(inkAt(painted, cell)).toBe(PILOT);
  await expectMeasured(page);
  expect((await live(page))!.paprDb).not.toBe(before.live!.paprDb);
  expect((await live(page))!.symbolsDone).toBeLessThan(before.document.content.symbolCount);
  await grid(page).focus();
  await page.keyboard.press('Control+z');
  expect(await drawnDocument(page)).toEqual(before.document);
  await page.keyboard.press('Control+Shift+Z');
  expect(await drawnDocument(page)).toEqual(painted);
  await expectSaved(page);
});

test('a second finger takes the stroke back and moves the drawing', async ({ as, baseURL }) => {
  const page = await openNew(as, baseURL!);
  const before = await drawnDocument(page);
  await chooseInk(page, /^Pilot, /);
  if ((await session(page)).viewport.subcarrierPx < 4) {
    // Wide, the whole band is in view: there is nothing to move until the drawing is closer.
    await grid(page).focus();
    for (let i = 0; i < 4; i++) await page.keyboard.press(']');
  }
  const first = (await session(page)).viewport.firstPosition;
  const a = await placeOf(page, { symbol: 3, subcarrier: -4 });
  const b = await placeOf(page, { symbol: 8, subcarrier: 4 });
  const cdp: CDPSession = await page.context().newCDPSession(page);
  await cdp.send('Emulation.setTouchEmulationEnabled', { enabled: true, maxTouchPoints: 2 });
  const touch = (type: 'touchStart' | 'touchMove' | 'touchEnd', touchPoints: { x: number; y: number; id: number }[]) =>
    cdp.send('Input.dispatchTouchEvent', { type, touchPoints });
  const at = (place: { x: number; y: number }, dx: number, id: number) => ({ x: place.x + dx, y: place.y, id });
  await touch('touchStart', [at(a, 0, 1)]);
  await touch('touchMove', [at(a, 30, 1)]);
  expect(await drawnDocument(page)).not.toEqual(before);
  await touch('touchStart', [at(a, 30, 1), at(b, 0, 2)]);
  for (let i = 1; i <= 5; i++) await touch('touchMove', [at(a, 30 + i * 10, 1), at(b, i * 10, 2)]);
  await touch('touchEnd', []);
  expect(await drawnDocument(page)).toEqual(before);
  expect((await session(page)).viewport.firstPosition).toBeLessThan(first);
});

test('the wheel zooms at the pointer, and the cell under it stays there', async ({ as, baseURL }, info) => {
  const page = await openNew(as, baseURL!);
  const cell = { symbol: 5, subcarrier: isPhone(info) ? 4 : 200 };
  const before = { place: await placeOf(page, cell), px: (await session(page)).viewport.subcarrierPx };
  await page.mouse.move(before.place.x, before.place.y);
  for (let i = 0; i < 3; i++) await page.mouse.wheel(0, -240);
  await expect.poll(async () => (await session(page)).viewport.subcarrierPx).toBeGreaterThan(1.5 * before.px);
  const after = await placeOf(page, cell);
  expect(Math.abs(after.x - before.place.x)).toBeLessThan(2);
});

test('numbers say what follows, and ask before painted cells are cut', async ({ as, baseURL }, info) => {
  const page = await openNew(as, baseURL!);
  const before = await drawnDocument(page);
  if (isPhone(info)) await page.getByRole('button', { name: 'More', exact: true }).click();
  await page.getByRole('button', { name: /^FFT size/ }).click();
  const field = page.getByRole('textbox', { name: /^FFT size/ });
  await field.fill('2500');
  await expect(page.getByText('No painted cell is cut.')).toBeVisible();
  await expect(page.getByText(/^37\.5/).first()).toBeVisible(); // the sample clock that follows, MHz
  await field.fill('1001');
  await expect(page.getByRole('alert').filter({ hasText: 'FFT size' })).toBeVisible();
  await field.fill('1024');
  await expect(page.getByText(/^1024 points hold 1024 subcarriers\. .* would be cut\.$/).first()).toBeVisible();
  await expectAccessible(page, 'a number sheet');
  await page.getByRole('button', { name: 'Set FFT size' }).click();
  await page.getByRole('button', { name: 'Keep 2048' }).click();
  expect(await drawnDocument(page)).toEqual(before);
});

test('an ink’s form changes every cell painted with it', async ({ as, baseURL }) => {
  const page = await openNew(as, baseURL!);
  await chooseInk(page, /^Pilot, /);
  await chooseInk(page, /^Pilot, /);
  const seed = page.getByRole('textbox', { name: 'initial value' });
  await seed.fill('91');
  await seed.press('Enter');
  await expectAccessible(page, 'the ink sheet');
  await page.getByRole('button', { name: /^Change \d+ cells$/ }).click();
  const ink = (await drawnDocument(page)).content.tray[PILOT]!;
  expect(ink.role === 'pilot' && ink.value.factors[0]!.sequence).toEqual({ kind: 'gold', cInit: 91, points: 'qpsk' });
  await expectSaved(page);
});

test('an open ink’s sheet shows what it would do, and leaves nothing behind', async ({ as, baseURL }) => {
  const page = await openNew(as, baseURL!);
  const before = { document: await drawnDocument(page), live: await live(page), state: await saveState(page) };
  await chooseInk(page, /^Pilot, /);
  await chooseInk(page, /^Pilot, /);
  const power = page.getByRole('textbox', { name: /^Power/ });
  await power.fill('12');
  await power.press('Enter');
  await expect.poll(async () => (await live(page))!.paprDb).not.toBe(before.live!.paprDb);
  await expect(page.getByRole('button', { name: /^Pilot, \+12 dB/ }).first()).toBeVisible();
  expect(await drawnDocument(page)).toEqual(before.document);
  expect(await saveState(page)).toBe(before.state);
  await page.getByRole('button', { name: 'Close' }).click();
  await expect.poll(async () => (await live(page))!.paprDb).toBe(before.live!.paprDb);
  expect(await drawnDocument(page)).toEqual(before.document);
});

test('the canvas comes and goes, and changes its size, without a lost context', async ({ as, baseURL }, info) => {
  test.setTimeout(120_000);
  const page = await openNew(as, baseURL!);
  for (let i = 0; i < 3; i++) {
    await page
      .getByRole('link', { name: isPhone(info) ? 'Back' : 'Waveforms', exact: true })
      .first()
      .click();
    await expect(page.getByText('Table test').first()).toBeVisible();
    await page.goBack();
    await expectMeasured(page);
  }
  const { width, height } = page.viewportSize()!;
  for (const less of [140, 60, 0]) {
    await page.setViewportSize({ width: width - (isPhone(info) ? 0 : less), height: height - less });
    await expectMeasured(page);
  }
});

test('who is no author looks, and is told so', async ({ as, baseURL }, info) => {
  const author = await openNew(as, baseURL!);
  const reviewer = await as('Nora Quist');
  await reviewer.goto(author.url());
  await expect(reviewer.getByText('You can look. Drawing needs the author role.')).toBeVisible();
  await expectMeasured(reviewer);
  const before = await drawnDocument(reviewer);
  const from = { symbol: 3, subcarrier: isPhone(info) ? 2 : 150 };
  await paint(reviewer, from, { ...from, subcarrier: from.subcarrier + 2 }, isPhone(info));
  expect(await drawnDocument(reviewer)).toEqual(before);
  // The forms are there to look at, and say why they change nothing.
  if (isPhone(info)) await reviewer.getByRole('button', { name: 'More', exact: true }).click();
  await reviewer.getByRole('button', { name: /^Level, / }).click();
  const headroom = reviewer.getByRole('textbox', { name: /^Headroom/ });
  await headroom.fill('7');
  await headroom.press('Enter');
  await expect(reviewer.getByText('You can look. Drawing needs the author role.')).toHaveCount(2);
  expect(await drawnDocument(reviewer)).toEqual(before);
});

test('moves that arrive together are painted in one frame', async ({ as, baseURL }, info) => {
  const page = await openNew(as, baseURL!);
  await chooseInk(page, /^16-QAM, /);
  const from = { symbol: 2, subcarrier: isPhone(info) ? -4 : -300 };
  const to = { symbol: 9, subcarrier: -from.subcarrier };
  const [a, b] = [await placeOf(page, from), await placeOf(page, to)];
  await page.mouse.move(a.x, a.y);
  await page.mouse.down();
  const frames = await grid(page).evaluate(
    async (element, [a, b]) => {
      const settle = () =>
        new Promise((resolve) => requestAnimationFrame(() => requestAnimationFrame(() => resolve(undefined))));
      await settle();
      const before = window.__combwrightTable!.probe()!.frames;
      for (let i = 1; i <= 50; i++) {
        const clientX = a.x + ((b.x - a.x) * i) / 50;
        const clientY = a.y + ((b.y - a.y) * i) / 50;
        const move = { clientX, clientY, pointerId: 1, pointerType: 'mouse', buttons: 1, bubbles: true };
        element.dispatchEvent(new PointerEvent('pointermove', move));
      }
      await settle();
      return window.__combwrightTable!.probe()!.frames - before;
    },
    [a, b] as const,
  );
  await page.mouse.up();
  const inks = await drawnDocument(page);
  expect(inkAt(inks, to)).toBe(inkAt(inks, from));
  // One for the moves, and one for the answer of the live views where it came in between.
  expect(frames).toBeGreaterThan(0);
  expect(frames).toBeLessThanOrEqual(2);
});
