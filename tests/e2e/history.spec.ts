import { createWaveform, saveRevision } from '@/lib/contracts/waveforms';
import { smallDocument } from '../helpers/documents.ts';
import { ask } from './support/api.ts';
import { drawnDocument, expectMeasured, expectSaved } from './support/table.ts';
import { expect, test } from './support/test.ts';

const named = (title: string, oversampling: number) => {
  const document = smallDocument();
  return {
    ...document,
    about: { ...document.about, title },
    content: { ...document.content, oversampling },
  };
};

test('an older revision is opened as it was, and drawn on from there', async ({ as, baseURL }) => {
  const page = await as('Ines Okoro');
  const { request } = page.context();
  const first = named('Two revisions', 1);
  const { waveformId, head } = await ask(request, baseURL!, createWaveform, { query: {}, body: first });
  await ask(request, baseURL!, saveRevision, {
    params: { waveformId },
    query: { parentId: head!.revisionId },
    body: named('Two revisions', 2),
  });
  // Saved within ten minutes by one person: one line of the history. The older one has its own address.
  await page.goto(`/waveforms/${waveformId}?revision=${head!.revisionId}`);
  await expect(page.getByText('This is revision 1. Revision 2 is the newest.')).toBeVisible();
  await expectMeasured(page);
  expect(await drawnDocument(page)).toEqual(first);
  await expect(page.getByRole('group', { name: 'Tray' })).toHaveCount(0);

  await page.getByRole('button', { name: 'Open the newest' }).click();
  await expect(page).toHaveURL(`${baseURL}/waveforms/${waveformId}`);
  await expectMeasured(page);
  expect((await drawnDocument(page)).content.oversampling).toBe(2);

  await page.goBack();
  await page.goto(`/waveforms/${waveformId}?revision=${head!.revisionId}`);
  await page.getByRole('button', { name: 'Draw on from here' }).click();
  await expectMeasured(page);
  expect(await drawnDocument(page)).toEqual(first);
  await expectSaved(page);
  await page.goto(`/waveforms/${waveformId}/history`);
  await expect(page.getByText('Revisions 1 to 3, newest')).toBeVisible();
});
