import { createWaveform } from '@/lib/contracts/waveforms';
import { paLadder } from '@/lib/document/demoDocuments';
import { ask, signIn } from './support/api.ts';
import { expectMeasured, paint, session } from './support/table.ts';
import { expect, test } from './support/test.ts';

/** Counted in frames, not in ms: how loaded the machine is does not matter. */
const FRAMES_MOST = 2;

interface FrameNote {
  session: number;
  answered: number;
  shownLive: number;
  shown: number;
}

test('an answer of the worker is painted in the second frame after it at the latest', async ({
  page,
  context,
  baseURL,
}, info) => {
  test.setTimeout(90_000);
  await signIn(context.request, baseURL!, 'Ines Okoro');
  const ladder = paLadder();
  const { waveformId } = await ask(context.request, baseURL!, createWaveform, {
    query: {},
    body: { ...ladder, about: { ...ladder.about, title: 'Counted in frames' } },
  });
  await page.goto(`/waveforms/${waveformId}`);
  await expectMeasured(page);
  // What stands at the start of every frame: the document's count, the newest answer's, and those of the picture on the screen.
  await page.evaluate(() => {
    const notes: FrameNote[] = [];
    (window as unknown as { notes: FrameNote[] }).notes = notes;
    const note = () => {
      const hook = window.__combwrightTable!;
      const probe = hook.probe()!;
      notes.push({
        session: hook.session().changeCount,
        answered: hook.live()?.changeCount ?? -1,
        shownLive: probe.shownLiveChangeCount,
        shown: probe.shownChangeCount,
      });
      requestAnimationFrame(note);
    };
    requestAnimationFrame(note);
  });
  const before = (await session(page)).changeCount;
  await page.getByRole('group', { name: 'Tray' }).getByRole('button', { name: /key 1/ }).click();
  const { viewport } = await session(page);
  const middle = Math.round(viewport.firstPosition + viewport.widthPx / viewport.subcarrierPx / 2) - 1024;
  for (const symbol of [1, 2, 3])
    await paint(
      page,
      { symbol, subcarrier: middle - 8 },
      { symbol, subcarrier: middle + 8 },
      info.project.name === 'phone',
    );
  await expectMeasured(page);
  await expect
    .poll(() =>
      page.evaluate(() => {
        const hook = window.__combwrightTable!;
        return hook.probe()!.shownLiveChangeCount === hook.session().changeCount;
      }),
    )
    .toBe(true);
  const notes = await page.evaluate(() => (window as unknown as { notes: FrameNote[] }).notes);
  expect((await session(page)).changeCount).toBeGreaterThan(before);

  let answers = 0;
  for (let i = 1; i < notes.length; i++) {
    const { answered } = notes[i]!;
    if (answered === notes[i - 1]!.answered) continue;
    answers++;
    // Frame i is the first after the answer: its picture stands at the start of frame i + 1.
    const later = notes.slice(i, i + FRAMES_MOST + 1);
    expect(
      later.some((note) => note.shownLive >= answered),
      `answer ${answered}: ${JSON.stringify(later)}`,
    ).toBe(true);
  }
  expect(answers).toBeGreaterThan(0);
  for (const note of notes) {
    expect(note.shownLive).toBeLessThanOrEqual(note.shown);
    expect(note.shown).toBeLessThanOrEqual(note.session);
  }
});
