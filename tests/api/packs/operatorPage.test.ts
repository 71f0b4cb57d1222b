import { mkdtempSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import path from 'node:path';
import { installation } from '@/db/schema/people';
import type { PackDetail } from '@/lib/contracts/packs';
import { openBench, smallDocument } from '../../helpers/documents';
import { createBench, makePack } from '../../helpers/packCalls';
import { startTestServer, type Client, type TestServer } from '../../helpers/testServer';
import { create, createReleased, withdrawing } from '../../helpers/waveformCalls';

jest.setTimeout(60_000);

let webDir: string;
let server: TestServer;
let operator: Client;
let author: Client;
let benchId: string;

const shell = `<!DOCTYPE html><html lang="en"><head><title>Combwright</title></head>
<body><div id="root"></div><script src="/_expo/static/js/web/entry-1.js" defer></script></body></html>`;

beforeEach(async () => {
  webDir = mkdtempSync(path.join(tmpdir(), 'web-'));
  writeFileSync(path.join(webDir, 'index.html'), shell);
  server = await startTestServer({ config: { webDir } });
  operator = await server.as('operator');
  author = await server.as('author');
  benchId = (await createBench(await server.as('admin'), openBench({ levelMeans: 'activeRms' }))).benchId;
});
afterEach(async () => {
  await server.close();
  rmSync(webDir, { recursive: true });
});

function document(title: string) {
  const small = smallDocument();
  const intent = { outputRmsDbm: -12, lossDb: 10, devicePeakLimitDbm: 0, deviceMeanLimitDbm: -8, levelToleranceDb: 1 };
  return { ...small, about: { ...small.about, title }, intent };
}

async function released(title = 'PA <ladder> & "$&" ​20 MHz'): Promise<PackDetail> {
  const { revisionId } = await createReleased(author, await server.as('reviewer'), document(title));
  return makePack(operator, revisionId, benchId);
}

const page = async (client: Client, packId: string) => (await client.get(`/packs/${packId}`).expect(200)).text;

test('the card is in the first answer, in reading order, small, without script, before the app', async () => {
  const pack = await released();
  const answer = await operator.get(`/packs/${pack.packId}`).expect(200);
  const html = answer.text;
  expect(answer.headers['content-type']).toContain('text/html');
  expect(answer.headers['cache-control']).toBe('private, no-store');
  expect(Buffer.byteLength(html)).toBeLessThanOrEqual(25 * 1024);
  const order = [
    'PA &lt;ladder&gt; &amp; &quot;$&amp;&quot;',
    'Released, edition 1',
    'SHA-256 of the vector',
    'Set on the generator',
    '<b>−2.0</b> dBm', // −12 dBm at the device after 10 dB; the setting means what the device gets
    'its mean while the frame plays',
    'Highest setting',
    'Peak now',
    'Peak limit',
    '<b>0.0</b> dBm',
    'Mean limit',
    '<b>−8.0</b> dBm',
    'dB left to the peak limit',
    'First cautions',
    'Output off while',
    'Attenuator first',
    'Sample clock',
    'All cautions, 11',
    `href="/api/v1/packs/${pack.packId}/file"`,
    '/_expo/static/js/web/entry-1.js',
  ];
  const places = order.map((part) => html.indexOf(part));
  expect(places.every((at) => at > 0)).toBe(true);
  expect([...places].sort((a, b) => a - b)).toEqual(places);
  expect(html.match(/<script/g)).toHaveLength(1);
  expect(html).not.toContain('<ladder>');
  for (const digits of pack.vectorDigest.slice(7).match(/.{8}/g)!) expect(html).toContain(digits);
});

test('a demo says so there too, a real installation does not', async () => {
  const words = 'Demo: invented people and data';
  const pack = await released('Real');
  expect(await page(operator, pack.packId)).not.toContain(words);
  server.store.write((tx) => tx.update(installation).set({ kind: 'demo' }).run());
  const html = await page(operator, pack.packId);
  expect(html.indexOf(words)).toBeGreaterThan(html.indexOf('<main>'));
  expect(html.indexOf(words)).toBeLessThan(html.indexOf('Real</h1>'));
});

test('a withdrawn edition shows the reason and no way to its file', async () => {
  const pack = await released('Gone');
  await withdrawing(await server.as('reviewer'), pack.waveformId, 1, 'Burns <inputs>.').expect(200);
  const html = await page(operator, pack.packId);
  expect(html).toContain('Do not use this pack. Burns &lt;inputs&gt;.');
  expect(html).toContain('Withdrawn, edition 1');
  expect(html).not.toContain('/file');
  expect(html).not.toContain('Set on the generator');
});

test('who may not see the pack gets the app alone', async () => {
  const { head } = await create(author, document('Secret draft'));
  const pack = await makePack(author, head!.revisionId, benchId);
  expect(await page(author, pack.packId)).toContain('Draft, not for the bench');
  for (const who of ['anonymous', 'operator', 'otherAuthor', 'nobody'] as const)
    expect(await page(await server.as(who), pack.packId)).toBe(shell);
  expect(await page(operator, '01ARZ3NDEKTSV4RRFFQ69G5FAV')).toBe(shell);
  expect(await page(operator, 'not-an-id')).toBe(shell);
});

test('limits for another device are kept beside the card, with person and time', async () => {
  const pack = await released('Card');
  const intent = {
    outputRmsDbm: -12,
    lossDb: 0,
    devicePeakLimitDbm: -10,
    deviceMeanLimitDbm: null,
    levelToleranceDb: 1,
  };
  const cards = `/api/v1/packs/${pack.packId}/device-cards`;
  const entered = await operator.post(cards, { deviceName: 'Front end 7', intent }).expect(201);
  expect(entered.body).toMatchObject({
    deviceName: 'Front end 7',
    enteredBy: { name: 'Olga Operator' },
    card: { verdict: 'over', peakLimitDbm: -10, lossDb: 0 },
  });
  expect(entered.body.card.sentence).toContain('do not switch on');
  const shown = (await operator.get(`/api/v1/packs/${pack.packId}`).expect(200)).body as PackDetail;
  expect(shown.card).toEqual(pack.card); // its own stays as reviewed
  expect(shown.deviceCards).toHaveLength(1);
  const html = await page(operator, pack.packId);
  expect(html).toContain('limits entered by Olga Operator, 2031-05-06 09:00 UTC');
  const bad = await operator.post(cards, { deviceName: '', intent: { ...intent, lossDb: -1 } }).expect(422);
  expect(bad.body.issues.map((issue: { pointer: string }) => issue.pointer)).toEqual(['/deviceName', '/intent/lossDb']);
  await operator.post(cards, { deviceName: 'x', intent: { ...intent, lossDb: Number.NaN } }).expect(422);
  expect(() => server.store.sqlite.exec('delete from device_cards')).toThrow('never goes');
});

test('packs are found by a part of their title or first digits of a digest', async () => {
  const ladder = await released('PA ladder');
  const notch = await released('Notch 40 %_');
  const find = async (text: string) =>
    ((await operator.get(`/api/v1/packs?find=${encodeURIComponent(text)}`).expect(200)).body.items as PackDetail[]).map(
      (pack) => pack.packId,
    );
  expect(await find('')).toEqual([notch.packId, ladder.packId]); // newest release first
  expect(await find('LADD')).toEqual([ladder.packId]);
  expect(await find('40 %_')).toEqual([notch.packId]);
  expect(await find('%')).toEqual([notch.packId]); // no pattern
  expect(await find(notch.fileDigest.slice(7, 17))).toEqual([notch.packId]);
  expect((await find(ladder.vectorDigest.slice(0, 20).toUpperCase())).sort()).toEqual(
    [ladder.packId, notch.packId].sort(),
  );
  expect(await find('nothing like it')).toEqual([]);
});
