import { killOwnServers, startOwnServer } from './support/server.ts';
import { expect, test } from './support/test.ts';

test.afterAll(killOwnServers);

test('an empty installation: its code, its first administrator, and a second person by a link', async ({
  newWindow,
  watch,
}, info) => {
  test.setTimeout(120_000);
  watch.allow(/status of 4(01|22|04)|ERR_CONNECTION_REFUSED/);
  const server = await startOwnServer(info.outputPath('data'), { DEMO: 'no' });
  await expect.poll(() => server.out()).toMatch(/with this code: \S+/);
  const code = /with this code: (\S+)/.exec(server.out())![1]!;
  expect(server.log()).not.toContain(code);

  const page = await newWindow(server.origin);
  await page.goto('/');
  await expect(page).toHaveURL(/\/first-run$/);
  await expect(page.getByText('This installation has no people yet. The first one becomes admin.')).toBeVisible();
  await page.getByRole('textbox', { name: 'Code' }).fill(`${code.slice(0, -1)}${code.endsWith('A') ? 'B' : 'A'}`);
  await page.getByRole('textbox', { name: 'Name' }).fill('Ada Brink');
  await page.getByRole('textbox', { name: 'E-mail' }).fill('ada@team.invalid');
  await page.getByRole('textbox', { name: 'Password' }).fill('three plain words');
  await page.getByRole('button', { name: 'Create the first account' }).click();
  await expect(page.getByText(/^That is not the code\./)).toBeVisible();
  await page.getByRole('textbox', { name: 'Code' }).fill(code);
  await page.getByRole('button', { name: 'Create the first account' }).click();
  await expect(page).toHaveURL(/\/waveforms$/);
  await expect(page.getByText('Nothing has been released yet. Packs appear after a review.')).toBeVisible();
  await expect(page.getByText(/Demo/)).toHaveCount(0);

  await page.goto('/people');
  await expect(page.getByText('Only you so far.')).toBeVisible();
  await page.getByRole('button', { name: 'Invite a person' }).click();
  const sheet = page.getByRole('dialog', { name: /Invite a person/ });
  await sheet.getByRole('textbox', { name: 'Name' }).fill('Bo Lind');
  await sheet.getByRole('textbox', { name: 'E-mail' }).fill('bo@team.invalid');
  await sheet.getByRole('button', { name: 'author' }).click();
  await sheet.getByRole('button', { name: 'Make the invitation' }).click();
  await expect(sheet.getByText('Copy it now. It is not shown again.')).toBeVisible();
  const link = (await sheet.getByText(/\/accept-invitation#/).textContent())!.trim();
  await sheet.getByRole('button', { name: 'Done' }).click();
  await expect(page.getByText(link)).toHaveCount(0);

  const second = await newWindow(server.origin);
  await second.goto(link);
  await expect(second.getByText('Ada Brink invited you as author.')).toBeVisible();
  await second.getByRole('textbox', { name: 'Password' }).fill('short');
  await second.getByRole('button', { name: 'Join' }).click();
  await expect(second.getByText(/12 characters/).first()).toBeVisible();
  await second.getByRole('textbox', { name: 'Password' }).fill('four other plain words');
  await second.getByRole('button', { name: 'Join' }).click();
  await expect(second).toHaveURL(/\/waveforms$/);
  await expect(second.getByText('No waveforms yet. Start from a preset or a bare grid.')).toBeVisible();

  const third = await newWindow(server.origin);
  await third.goto(link);
  await expect(third.getByText('This link was used or is too old. Ask for a new one.')).toBeVisible();
  await third.goto('/');
  await expect(third).toHaveURL(/\/sign-in$/);
  await expect(third.getByText(/Demo/)).toHaveCount(0);
  await third.getByRole('textbox', { name: 'E-mail' }).fill('bo@team.invalid');
  await third.getByRole('textbox', { name: 'Password' }).fill('three plain words');
  await third.getByRole('button', { name: 'Sign in' }).click();
  await expect(third.getByText('E-mail or password is not right.')).toBeVisible();
  await third.getByRole('textbox', { name: 'Password' }).fill('four other plain words');
  await third.getByRole('button', { name: 'Sign in' }).click();
  await expect(third).toHaveURL(/\/waveforms$/);

  // The code went with its use: a restart prints none. No page asks for anything while the server is away.
  for (const open of [page, second, third]) await open.close();
  await server.kill();
  await server.restart();
  expect(server.out()).not.toMatch(/code/);
});
