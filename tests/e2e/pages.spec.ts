import type { Page } from '@playwright/test';
import { listBenches } from '@/lib/contracts/benches';
import { ask, signIn, type DemoName } from './support/api.ts';
import { expectAccessible } from './support/axe.ts';
import { smallDocument } from '../helpers/documents.ts';
import { demoPack, demoWaveform } from './support/demo.ts';
import { drawnDocument, expectMeasured } from './support/table.ts';
import { expect, test } from './support/test.ts';

interface Screen {
  name: string;
  who: DemoName | null;
  address: (page: Page, origin: string) => Promise<string> | string;
  /** What is there once the screen has loaded. */
  shown: (page: Page) => Promise<void>;
  /** The screen's primary action: a button or link, by name. */
  primary?: { role: 'button' | 'link'; name: RegExp | string };
}

const text = (words: string | RegExp) => (page: Page) => expect(page.getByText(words).first()).toBeVisible();
const on =
  (which: 'draft' | 'inReview' | 'released', rest = '') =>
  async (page: Page, origin: string) =>
    `/waveforms/${(await demoWaveform(page.context().request, origin, which)).waveformId}${rest}`;

const screens: Screen[] = [
  {
    name: 'sign-in',
    who: null,
    address: () => '/sign-in',
    shown: text('Demo team: invented people, no password'),
    primary: { role: 'button', name: 'Sign in' },
  },
  {
    name: 'waveforms',
    who: 'Ines Okoro',
    address: () => '/waveforms',
    shown: text(/PA ladder 20 MHz/),
    primary: { role: 'button', name: 'New waveform' },
  },
  {
    name: 'waveforms of an operator',
    who: 'Jun Aldane',
    address: () => '/waveforms',
    async shown(page) {
      await expect(page.getByText(/PA ladder 20 MHz/).first()).toBeVisible();
      await expect(page.getByText(/Front end, three tones/)).toHaveCount(0);
    },
  },
  {
    name: 'start',
    who: 'Ines Okoro',
    address: () => '/start',
    shown: text('Public standards, each with its clause'),
    primary: { role: 'button', name: 'Use this start' },
  },
  {
    name: 'drawing table',
    who: 'Ines Okoro',
    address: on('draft'),
    shown: (page) => expect(page.getByRole('application', { name: /^Grid,/ })).toBeVisible({ timeout: 30_000 }),
    primary: { role: 'button', name: /^(Ask for review|Paint)$/ },
  },
  {
    name: 'drawing table of a reviewer',
    who: 'Nora Quist',
    address: on('draft'),
    shown: text('You can look. Drawing needs the author role.'),
  },
  {
    name: 'fit',
    who: 'Ines Okoro',
    address: on('released', '/fit'),
    shown: text(/checks? (needs|need) a change|Everything fits|cannot be judged/),
    primary: { role: 'button', name: 'Make a pack' },
  },
  {
    name: 'history',
    who: 'Nora Quist',
    address: on('released', '/history'),
    shown: text('Released, edition 1'),
    primary: { role: 'link', name: 'Make a pack of edition 1' },
  },
  {
    name: 'review',
    who: 'Nora Quist',
    address: on('inReview', '/review'),
    shown: text(/Asked by Tomas Vell/),
    primary: { role: 'button', name: 'Release edition 1' },
  },
  {
    name: 'packs',
    who: 'Jun Aldane',
    address: () => '/packs',
    shown: text(/PA ladder 20 MHz/),
    primary: { role: 'button', name: 'Make a pack' },
  },
  {
    name: 'pack',
    who: 'Jun Aldane',
    address: async (page, origin) => `/packs/${(await demoPack(page.context().request, origin)).packId}`,
    shown: (page) => expect(page.getByRole('textbox', { name: 'Set on the generator, dBm' })).toBeVisible(),
    primary: { role: 'link', name: 'Download pack' },
  },
  {
    name: 'benches',
    who: 'Mira Sand',
    address: () => '/benches',
    shown: text(/Bench B/),
    primary: { role: 'button', name: 'Add a bench' },
  },
  {
    name: 'bench form',
    who: 'Mira Sand',
    async address(page, origin) {
      const { items } = await ask(page.context().request, origin, listBenches, {});
      return `/benches/${items[0]!.benchId}`;
    },
    shown: text(/^Version 1/),
    primary: { role: 'button', name: /^Save version 2$/ },
  },
  {
    name: 'new bench',
    who: 'Mira Sand',
    address: () => '/benches/new',
    shown: (page) => expect(page.getByRole('textbox', { name: 'Name', exact: true })).toBeVisible(),
    primary: { role: 'button', name: 'Save the profile' },
  },
  {
    name: 'people',
    who: 'Mira Sand',
    address: () => '/people',
    shown: text('tomas@demo.invalid'),
    primary: { role: 'button', name: 'Invite a person' },
  },
  { name: 'audit', who: 'Mira Sand', address: () => '/audit', shown: text(/edition 1|PA ladder/) },
  { name: 'account', who: 'Jun Aldane', address: () => '/account', shown: text('Sessions') },
  { name: 'more', who: 'Jun Aldane', address: () => '/more', shown: text('profiles of the generators') },
];

/** Tab from the top of the page; every control that is passed must be reachable once, the wanted one among them. */
async function tabTo(page: Page, { role, name }: NonNullable<Screen['primary']>): Promise<void> {
  const wanted = page
    .getByRole(role, { name, exact: typeof name === 'string' })
    .filter({ visible: true })
    .first();
  await expect(wanted).toBeVisible();
  await page.evaluate(() => (document.activeElement as HTMLElement | null)?.blur());
  for (let presses = 0; presses < 150; presses++) {
    await page.keyboard.press('Tab');
    if (await wanted.evaluate((node) => node === document.activeElement)) return;
  }
  throw new Error(`${String(name)} is not reachable by Tab`);
}

for (const screen of screens) {
  test(`${screen.name} opens in both themes, named and reachable by keys`, async ({ page, context, baseURL }) => {
    test.setTimeout(90_000);
    await page.emulateMedia({ colorScheme: 'light' });
    if (screen.who) await signIn(context.request, baseURL!, screen.who);
    await page.goto(await screen.address(page, baseURL!));
    await screen.shown(page);
    await expect(page).toHaveTitle(/Combwright$/);
    if (screen.who && !(await page.title()).startsWith('Sign in'))
      await expect(page.getByText('Demo: invented people and data')).toBeVisible();
    await expect(page.locator('html')).toHaveAttribute('data-theme', 'paper');
    await expectAccessible(page, `${screen.name} on paper`);
    if (screen.primary) await tabTo(page, screen.primary);
    await page.emulateMedia({ colorScheme: 'dark' });
    await expect(page.locator('html')).toHaveAttribute('data-theme', 'night');
    await expectAccessible(page, `${screen.name} at night`, ['color-contrast']); // the theme changes nothing else
    const [inner, outer] = await page.evaluate(() => [document.documentElement.scrollWidth, window.innerWidth]);
    expect(inner, 'nothing scrolls sideways').toBeLessThanOrEqual(outer!);
  });
}

const FORBIDDEN = 'Your roles do not include this page. An admin can change that.';
const NOTHING = 'There is nothing at this address. It may have been removed.';
const noId = '01ARZ3NDEKTSV4RRFFQ69G5FAV';

test('pages that a person’s roles do not include say so, with one way out', async ({ watch, as }) => {
  watch.allow(/status of 40[34]/);
  const jun = await as('Jun Aldane');
  for (const address of ['/start', '/benches/new', '/people', '/audit']) {
    await jun.goto(address);
    await expect(jun.getByText(FORBIDDEN)).toBeVisible();
    await expect(jun.getByRole('link', { name: 'Back to waveforms' })).toBeVisible();
  }
  await jun.getByRole('link', { name: 'Back to waveforms' }).click();
  await expect(jun).toHaveURL(/\/waveforms$/);
});

test('what may not be seen is not there', async ({ watch, as, baseURL }) => {
  watch.allow(/status of 40[34]/);
  const ines = await as('Ines Okoro');
  const draft = await demoWaveform(ines.context().request, baseURL!, 'draft');
  const jun = await as('Jun Aldane');
  const places = ['', '/fit', '/history', '/review'].map((rest) => `/waveforms/${draft.waveformId}${rest}`);
  for (const address of [...places, `/packs/${noId}`, `/benches/${noId}`, `/waveforms/${noId}`, '/no/such/page']) {
    await jun.goto(address);
    // Fit and review are no pages of an operator, whatever the address names; history is, and an edition might stand there.
    const told = jun.getByText(/\/(fit|review)$/.test(address) ? FORBIDDEN : NOTHING);
    await expect(told, address).toBeVisible();
    await expect(jun.getByText(draft.title)).toHaveCount(0);
  }
});

test('who is not signed in is sent to sign in', async ({ page }) => {
  await page.goto('/packs');
  await expect(page).toHaveURL(/\/sign-in$/);
});

test('a list that does not load says what the server answered, and tries again', async ({
  page,
  watch,
  context,
  baseURL,
}) => {
  watch.allow(/status of 500/);
  await signIn(context.request, baseURL!, 'Ines Okoro');
  let isBroken = true;
  await page.route('**/api/v1/waveforms*', (route) =>
    isBroken ? route.fulfill({ status: 500, body: '{}' }) : route.continue(),
  );
  await page.goto('/waveforms');
  await expect(page.getByText(/The list did not load\..*500/)).toBeVisible();
  isBroken = false;
  await page.getByRole('button', { name: 'Try again' }).click();
  await expect(page.getByText(/PA ladder 20 MHz/).first()).toBeVisible();
});

test('a document is imported from JSON, and a broken one says where it is wrong', async ({ as }, info) => {
  const ines = await as('Ines Okoro');
  await ines.goto('/start');
  const file = (name: string, text: string) => ({ name, mimeType: 'application/json', buffer: Buffer.from(text) });
  const choose = ines.getByLabel('Choose a document');
  const document = smallDocument();
  document.about.title = `Imported on a ${info.project.name}`;
  const broken = { ...document, content: { ...document.content, fftSize: 7, powerDb: 3 } };
  for (const [name, text, words] of [
    ['cut.json', JSON.stringify(document).slice(0, 200), /cut\.json was not taken\./],
    ['empty.json', '', /empty\.json was not taken\./],
    ['broken.json', JSON.stringify(broken), /^\/content\/fftSize: /],
    ['newer.json', JSON.stringify({ ...document, version: 7 }), /version/],
  ] as const) {
    await choose.setInputFiles(file(name, text));
    await expect(ines.getByText(words).first(), name).toBeVisible();
  }
  await choose.setInputFiles(file('whole.json', JSON.stringify(document)));
  await expect(ines.getByText('broken.json was not taken.')).toHaveCount(0);
  await expect(ines.getByRole('textbox', { name: 'Title of the new waveform' })).toHaveValue(document.about.title);
  await ines.getByRole('button', { name: 'Use this start' }).click();
  await expectMeasured(ines);
  expect(await drawnDocument(ines)).toEqual(document);
});

test('without a connection, signing in says that it needs the server', async ({ page, watch }) => {
  watch.allow(/ERR_INTERNET_DISCONNECTED/);
  await page.goto('/sign-in');
  await page.getByRole('textbox', { name: 'E-mail' }).fill('ada@team.invalid');
  await page.getByRole('textbox', { name: 'Password' }).fill('three plain words');
  await page.context().setOffline(true);
  await page.getByRole('button', { name: 'Sign in' }).click();
  await expect(page.getByText('No connection. Signing in needs the server.').first()).toBeVisible();
});

test('only the drawing table loads the drawing engine', async ({ as, baseURL }) => {
  const ines = await as('Ines Okoro');
  const engine: string[] = [];
  ines.on('request', (request) => void (request.url().endsWith('.wasm') && engine.push(request.url())));
  const { waveformId } = await demoWaveform(ines.context().request, baseURL!, 'inReview');
  for (const address of ['/waveforms', '/start', `/waveforms/${waveformId}/review`]) {
    await ines.goto(address);
    await expect(ines.locator('svg').first()).toBeAttached();
    await ines.waitForLoadState('networkidle');
  }
  expect(engine).toEqual([]);
});
