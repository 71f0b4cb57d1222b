import type { Page } from '@playwright/test';
import { createWaveform, listRevisions, listWaveforms, showRevision, showWaveform } from '@/lib/contracts/waveforms';
import { smallDocument } from '../helpers/documents.ts';
import { ask, signIn } from './support/api.ts';
import { killOwnServers, startOwnServer } from './support/server.ts';
import { drawnDocument, expectMeasured, expectSaved, inkAt, paint, saveState } from './support/table.ts';
import { expect, test } from './support/test.ts';

// What was drawn is never lost: by a crash of the page, of the server, of the line, or by a second tab.
test.afterAll(killOwnServers);

const LOCAL_COPY_MS = 400; // a local copy is written after so much quiet, the server is asked after 2 s

async function makeWaveform(page: Page, origin: string, title: string): Promise<string> {
  const document = smallDocument();
  const { waveformId } = await ask(page.context().request, origin, createWaveform, {
    query: {},
    body: { ...document, about: { ...document.about, title } },
  });
  return waveformId;
}

async function openTable(page: Page, waveformId: string): Promise<void> {
  await page.goto(`/waveforms/${waveformId}`);
  await expectMeasured(page);
  await page
    .getByRole('group', { name: 'Tray' })
    .getByRole('button', { name: /^Pilots/ })
    .click();
}

/** A stroke of pilots through one symbol. */
const stroke = (page: Page, symbol: number) =>
  paint(page, { symbol, subcarrier: -4 }, { symbol, subcarrier: 4 }, false);
const hasStroke = async (page: Page, symbol: number) =>
  inkAt(await drawnDocument(page), { symbol, subcarrier: 0 }) === 2;

/** What the server's newest revision holds. */
async function headDocument(page: Page, origin: string, waveformId: string) {
  const request = page.context().request;
  const { head } = await ask(request, origin, showWaveform, { params: { waveformId } });
  return (await ask(request, origin, showRevision, { params: { revisionId: head!.revisionId } })).document;
}

/** The process of the page dies as in a real crash: no event tells the page that it ends. */
async function crash(page: Page): Promise<void> {
  const cdp = await page.context().newCDPSession(page);
  const crashed = page.waitForEvent('crash');
  void cdp.send('Page.crash').catch(() => undefined);
  await crashed;
  await page.close();
}

test('a crashed page: its strokes are offered at return', async ({ as, baseURL }) => {
  const page = await as('Ines Okoro');
  const waveformId = await makeWaveform(page, baseURL!, 'Crash');
  await openTable(page, waveformId);
  // The save is under way and will never arrive.
  await page.route('**/revisions?parentId=*', () => undefined);
  await stroke(page, 1);
  await expect.poll(() => saveState(page)).toBe('saving');
  await page.waitForTimeout(2 * LOCAL_COPY_MS);
  await crash(page);

  const again = await page.context().newPage();
  await again.goto(`/waveforms/${waveformId}`);
  await expect(again.getByText(/^A copy from \d\d:\d\d on this device was not saved\.$/)).toBeVisible();
  expect(await hasStroke(again, 1)).toBe(false);
  await again.getByRole('button', { name: 'Go on with the copy' }).click();
  await expectMeasured(again);
  await expect.poll(() => hasStroke(again, 1)).toBe(true);
  await expectSaved(again);
  expect(inkAt(await headDocument(again, baseURL!, waveformId), { symbol: 1, subcarrier: 0 })).toBe(2);
  await again.reload();
  await expectMeasured(again);
  await expect(again.getByText(/^A copy from/)).toHaveCount(0);
});

test('no connection: the page says so, keeps the strokes and saves them when it is back', async ({
  as,
  watch,
  baseURL,
}) => {
  watch.allow(/ERR_INTERNET_DISCONNECTED/);
  const page = await as('Ines Okoro');
  const waveformId = await makeWaveform(page, baseURL!, 'Offline');
  await openTable(page, waveformId);
  await page.context().setOffline(true);
  await stroke(page, 1);
  const notice = page.getByText(
    'No connection. Your strokes are kept on this device and saved when the connection is back.',
  );
  await expect(notice).toBeVisible();
  await expect(page.getByText('not saved: no connection')).toBeVisible();
  await stroke(page, 2);
  await page.context().setOffline(false);
  await expectSaved(page);
  await expect(notice).toHaveCount(0);
  const head = await headDocument(page, baseURL!, waveformId);
  for (const symbol of [1, 2]) expect(inkAt(head, { symbol, subcarrier: 0 })).toBe(2);
});

test('a killed server: nothing is lost and nothing is saved twice', async ({ newWindow, watch }, info) => {
  test.setTimeout(150_000);
  watch.allow(/ERR_CONNECTION_(REFUSED|RESET)|ERR_EMPTY_RESPONSE|ERR_INCOMPLETE_CHUNKED_ENCODING/);
  const server = await startOwnServer(info.outputPath('data'), { DEMO: 'yes' });
  const page = await newWindow(server.origin);
  await signIn(page.context().request, server.origin, 'Ines Okoro');
  const waveformId = await makeWaveform(page, server.origin, 'Killed server');
  await openTable(page, waveformId);

  // Killed while it takes the save: whether it was written or not, the page sends it again and there is one of it.
  const arriving = page.waitForRequest(/\/revisions\?parentId=/);
  await stroke(page, 1);
  await arriving;
  await server.kill();
  await expect(page.getByText('not saved: no connection')).toBeVisible();
  await server.restart();
  await expectSaved(page);
  const { revisions } = await ask(page.context().request, server.origin, listRevisions, {
    params: { waveformId },
    query: {},
  });
  expect(revisions.map((one) => one.number)).toEqual([2, 1]);
  expect(inkAt(await headDocument(page, server.origin, waveformId), { symbol: 1, subcarrier: 0 })).toBe(2);

  // Server and page die both: the copy on the device is offered.
  await server.kill();
  await stroke(page, 2);
  await expect(page.getByText('not saved: no connection')).toBeVisible();
  await crash(page);
  await server.restart();
  const again = await page.context().newPage();
  await again.goto(`/waveforms/${waveformId}`);
  await again.getByRole('button', { name: 'Go on with the copy' }).click();
  await expectMeasured(again);
  await expectSaved(again);
  const head = await headDocument(again, server.origin, waveformId);
  for (const symbol of [1, 2]) expect(inkAt(head, { symbol, subcarrier: 0 })).toBe(2);
});

test('two tabs of one author: who saves second chooses, and neither drawing is lost', async ({
  as,
  watch,
  baseURL,
}) => {
  test.setTimeout(120_000);
  watch.allow(/status of 409/);
  const first = await as('Ines Okoro');
  const second = await first.context().newPage();
  const waveformId = await makeWaveform(first, baseURL!, 'Two tabs');
  const stale = /^Ines Okoro saved a newer revision .*\. Yours is kept as revision \d+\.$/;
  await openTable(first, waveformId);
  await openTable(second, waveformId);
  await first.bringToFront();
  await stroke(first, 1);
  await expectSaved(first);
  await second.bringToFront();
  await stroke(second, 2);
  await expect(second.getByText(stale)).toBeVisible();
  await expect(second.getByText('not saved: somebody saved first')).toBeVisible();
  await second.getByRole('button', { name: 'Open theirs' }).click();
  await expect(second.getByText(stale)).toHaveCount(0);
  await expectMeasured(second);
  expect(await hasStroke(second, 1)).toBe(true);
  expect(await hasStroke(second, 2)).toBe(false);
  const { revisions } = await ask(first.context().request, baseURL!, listRevisions, {
    params: { waveformId },
    query: {},
  });
  expect(revisions.map((one) => [one.number, one.isHead, one.isSide])).toEqual([
    [3, false, true],
    [2, true, false],
    [1, false, false],
  ]);

  await first.bringToFront();
  await stroke(first, 3);
  await expectSaved(first);
  await second.bringToFront();
  await second
    .getByRole('group', { name: 'Tray' })
    .getByRole('button', { name: /^Pilots/ })
    .click();
  await stroke(second, 2);
  await expect(second.getByText(stale)).toBeVisible();
  await second.getByRole('button', { name: 'Keep mine as a copy' }).click();
  await expect(second).not.toHaveURL(new RegExp(waveformId));
  await expectMeasured(second);
  expect(await hasStroke(second, 2)).toBe(true);
  expect(await hasStroke(second, 3)).toBe(false);
  const { items } = await ask(first.context().request, baseURL!, listWaveforms, { query: { find: 'Two tabs' } });
  expect(items.map((item) => item.title).sort()).toEqual(['Two tabs', 'Two tabs, copy']);
});

test('a damaged copy is set aside with a notice, and may be downloaded', async ({ as, baseURL }) => {
  const page = await as('Ines Okoro');
  const waveformId = await makeWaveform(page, baseURL!, 'Damaged copy');
  await openTable(page, waveformId);
  await page.route('**/revisions?parentId=*', () => undefined);
  await stroke(page, 1);
  await page.waitForTimeout(2 * LOCAL_COPY_MS);
  await page.evaluate(
    (id) =>
      new Promise<void>((resolve, reject) => {
        const opening = indexedDB.open('combwright', 1);
        opening.onerror = () => reject(new Error('no local store'));
        opening.onsuccess = () => {
          const store = opening.result.transaction('copies', 'readwrite').objectStore('copies');
          const keys = store.getAllKeys();
          keys.onsuccess = () => {
            const key = keys.result.find((one) => String(one).endsWith(id))!;
            store.put({ waveformId: id, parentId: id, atMs: Date.now(), text: '{"format":"combwright.wave' }, key);
          };
          store.transaction.oncomplete = () => resolve();
        };
      }),
    waveformId,
  );
  await crash(page);
  const again = await page.context().newPage();
  await again.goto(`/waveforms/${waveformId}`);
  await expect(again.getByText(/could not be read and was set aside\.$/)).toBeVisible();
  const coming = again.waitForEvent('download');
  await again.getByRole('button', { name: 'Download it' }).click();
  expect((await coming).suggestedFilename()).toBe('set-aside-copy.json');
  await expectMeasured(again);
});
