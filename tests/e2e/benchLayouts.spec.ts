import { execFileSync } from 'node:child_process';
import { readFileSync } from 'node:fs';
import { signIn } from './support/api.ts';
import { expect, test } from './support/test.ts';

test('a layout is pressed together, drawn byte by byte, saved, and its sidedness pack is taken along', async ({
  page,
  context,
  baseURL,
}, info) => {
  await signIn(context.request, baseURL!, 'Mira Sand');
  await page.goto('/benches/new');
  const phone = info.project.name === 'phone';
  const open = async (group: string) => {
    if (phone) await page.getByRole('button', { name: new RegExp(`^${group}`) }).click();
  };
  const press = (word: string) => page.getByRole('radio', { name: word, exact: true }).click();
  await page.getByRole('textbox', { name: 'Name', exact: true }).fill('Bench of two files');
  await open('File');
  await press('WAV');
  // a choice that cannot be says why, where it is
  await page.getByRole('radio', { name: 'two files', exact: true }).click({ force: true });
  await expect(page.getByText('I and Q are the two channels of one WAV file.')).toBeVisible();
  await press('raw');
  await press('two files');
  await open('Word');
  await press('high first');
  await expect(
    page.getByRole('img', { name: /^byte 0, 00, I 0 is 1; byte 1, 01, I 0; byte 2, 00, I 1 is 2/ }),
  ).toBeVisible();
  await expect(page.getByRole('img', { name: /^byte 0, FF, Q 0 is −1; byte 1, FF/ })).toBeVisible();
  await expect(page.getByText('Big-endian: the value 1 is stored 00 01, and −1 is stored FF FF.')).toBeVisible();
  await page.getByRole('button', { name: 'Save the profile' }).click();
  await expect(page.getByText(/^Version 1,/)).toBeVisible();

  const downloading = page.waitForEvent('download');
  await page.getByText('Download sidedness pack').click();
  const download = await downloading;
  expect(download.suggestedFilename()).toMatch(/^sidedness-.*\.zip$/);
  const file = info.outputPath('sidedness.zip');
  await download.saveAs(file);
  expect(readFileSync(file).subarray(0, 2).toString('latin1')).toBe('PK');
  const said = execFileSync('node', ['build/cli.mjs', 'verify', file], { encoding: 'utf8' });
  expect(said).toContain('words equal to a new synthesis');
});
