import { askForReview } from '@/lib/contracts/reviews';
import { createWaveform, showWaveform } from '@/lib/contracts/waveforms';
import { pilotComb } from '@/lib/document/examples/frames';
import { ask } from './support/api.ts';
import { expect, test } from './support/test.ts';

test('a remedy is one press, Ctrl+Z takes it back, and in review it makes a new draft', async ({ as, baseURL }) => {
  const page = await as('Ines Okoro');
  const request = page.context().request;
  // 15 363 samples on a granularity of 16
  const body = pilotComb();
  body.content.timing = { ...body.content.timing, padSamples: 3 };
  const { waveformId } = await ask(request, baseURL!, createWaveform, { query: {}, body });
  await page.goto(`/waveforms/${waveformId}/fit`);
  await page.getByLabel('Bench profile').selectOption({ label: 'Bench A, 12 bit, left-aligned, version 1' });
  const length = page.getByText('13 samples short');
  await expect(length).toBeVisible();
  await expect(page.getByRole('img', { name: /^Seam: the step at the wrap is/ })).toBeVisible({ timeout: 20_000 });
  const pad = page.getByRole('button', { name: /^Pad with 13 silent samples/ });
  await pad.focus();
  await page.keyboard.press('Enter');
  await expect(length).toBeHidden();
  await page.keyboard.press('Control+z');
  await expect(length).toBeVisible();

  const { head } = await ask(request, baseURL!, showWaveform, { params: { waveformId } });
  await ask(request, baseURL!, askForReview, {
    params: { waveformId },
    body: { revisionId: head!.revisionId, note: 'The pad is three samples.' },
  });
  await page.reload();
  await page.getByLabel('Bench profile').selectOption({ label: 'Bench A, 12 bit, left-aligned, version 1' });
  await expect(page.getByText('This revision is in review and cannot change.')).toBeVisible();
  await page.getByRole('button', { name: /^Pad with 13 silent .*Make a new draft with this remedy$/ }).click();
  await expect(length).toBeHidden();
  await expect(page.getByText('New draft made')).toBeVisible();
});
