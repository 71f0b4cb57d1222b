import { expect, type CDPSession, type Page } from '@playwright/test';
import type { ToolName, Viewport } from '@/lib/editor/types';
import type { BenchContent, WaveformDocument } from '@/lib/synth';
import { expandGrid, lowestSubcarrier } from '@/lib/synth';

/** The part of the table's test hook that is read here (components/screens/DrawScreen/testHook.ts). */
interface TableHook {
  document(): WaveformDocument;
  session(): { changeCount: number; viewport: Viewport; tool: ToolName; ink: number; chosenSymbol: number };
  live(): { changeCount: number; paprDb: number | null; symbolsDone: number } | null;
  probe(): { frames: number; scriptMs: number[]; shownChangeCount: number; shownLiveChangeCount: number } | null;
  revisionId(): string;
  saveState(): string;
  digest(bench: BenchContent): Promise<{ changeCount: number; sha256: string; bytes: number }>;
}

declare global {
  interface Window {
    __combwrightTable?: TableHook;
  }
}

export interface Cell {
  symbol: number;
  subcarrier: number;
}

export const drawnDocument = (page: Page) => page.evaluate(() => window.__combwrightTable!.document());
export const session = (page: Page) => page.evaluate(() => window.__combwrightTable!.session());
export const live = (page: Page) => page.evaluate(() => window.__combwrightTable!.live());
export const saveState = (page: Page) => page.evaluate(() => window.__combwrightTable!.saveState());

/** The table is there, and its views show the document as it is. */
export async function expectMeasured(page: Page): Promise<void> {
  await expect(page.getByRole('application', { name: /^Grid,/ })).toBeVisible({ timeout: 30_000 });
  await expect
    .poll(
      () =>
        page.evaluate(() => {
          const hook = window.__combwrightTable;
          return hook ? hook.live()?.changeCount === hook.session().changeCount : false;
        }),
      { timeout: 30_000, message: 'the live views follow the document' },
    )
    .toBe(true);
}

/** The ink number of a cell of the drawn document. */
export function inkAt(document: WaveformDocument, { symbol, subcarrier }: Cell): number {
  const { fftSize, grid } = document.content;
  return expandGrid(grid, fftSize)[symbol * fftSize + subcarrier - lowestSubcarrier(fftSize)]!;
}

/** The middle of a cell on the screen, as the viewport maps it. */
export async function placeOf(page: Page, cell: Cell): Promise<{ x: number; y: number }> {
  const box = await page.getByRole('application', { name: /^Grid,/ }).boundingBox();
  const { viewport: view } = await session(page);
  const { fftSize } = (await drawnDocument(page)).content;
  const along = (cell.subcarrier - lowestSubcarrier(fftSize) + 0.5 - view.firstPosition) * view.subcarrierPx;
  const across = (cell.symbol + 0.5 - view.firstSymbol) * view.symbolPx;
  const [x, y] = view.turned ? [across, view.heightPx - along] : [along, across];
  expect(x, 'the cell is in view').toBeGreaterThanOrEqual(0);
  expect(x, 'the cell is in view').toBeLessThan(box!.width);
  expect(y, 'the cell is in view').toBeGreaterThanOrEqual(0);
  expect(y, 'the cell is in view').toBeLessThan(box!.height);
  return { x: box!.x + x, y: box!.y + y };
}

/** One stroke from cell to cell: with the mouse, or with a finger where there is no mouse. */
export async function paint(page: Page, from: Cell, to: Cell, isTouch: boolean): Promise<void> {
  const [a, b] = [await placeOf(page, from), await placeOf(page, to)];
  const steps = 8;
  const at = (i: number) => ({ x: a.x + ((b.x - a.x) * i) / steps, y: a.y + ((b.y - a.y) * i) / steps });
  if (!isTouch) {
    await page.mouse.move(a.x, a.y);
    await page.mouse.down();
    await page.mouse.move(b.x, b.y, { steps });
    await page.mouse.up();
    return;
  }
  const cdp: CDPSession = await page.context().newCDPSession(page);
  const touch = (type: 'touchStart' | 'touchMove' | 'touchEnd', touchPoints: { x: number; y: number }[]) =>
    cdp.send('Input.dispatchTouchEvent', { type, touchPoints });
  await touch('touchStart', [a]);
  for (let i = 1; i <= steps; i++) await touch('touchMove', [at(i)]);
  await touch('touchEnd', []);
  await cdp.detach();
}

/** What is drawn has reached the server. */
export async function expectSaved(page: Page): Promise<void> {
  await expect.poll(() => saveState(page), { timeout: 20_000 }).toBe('saved');
}
