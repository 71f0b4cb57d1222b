import { performOutcome } from '@/lib/editor/commands/outcome';
import { planSettings } from '@/lib/editor/commands/settings';
import { contentOf, storedDocument } from '@/lib/editor/document';
import type { PeakAsk, PeakProgress, PeakResult } from '@/lib/editor/live/peakJob';
import { createEditor } from '@/lib/editor/store';
import { createFrameMeasure, type WaveformContent } from '@/lib/synth/index';
import { headlessEditor, testDocument } from '../../../../helpers/headlessEditor';
import { liveDesk, wholeView } from '../../../../helpers/liveDesk';

const clip = { kind: 'clipAndFilter', targetPaprDb: 5, iterations: 3 } as const;

function painted(content: Partial<WaveformContent> = {}) {
  const it = headlessEditor(testDocument(content));
  it.tool('rectangle', 1).pointerDown(4, 0).pointerMove(27, 13).pointerUp();
  return it;
}

function paprOf(content: WaveformContent): number {
  const measuring = createFrameMeasure(content);
  while (measuring.step());
  return measuring.result().power.paprDb!;
}

/** Asks and settles. */
function tried(it: ReturnType<typeof painted>, ask: PeakAsk) {
  const desk = liveDesk(it.editor, wholeView(32));
  const heard: { done: PeakResult | null; failed: string | null; progress: PeakProgress[] } = {
    done: null,
    failed: null,
    progress: [],
  };
  const job = desk.client.peak(ask, {
    onDone: (result) => (heard.done = result),
    onFailed: (message) => (heard.failed = message),
    onProgress: (progress) => void heard.progress.push(progress),
  });
  return { desk, heard, job };
}

describe('a lowered peak while drawing', () => {
  it('follows an edit that moves the mean into every symbol, and keeps the peaks that were', () => {
    const it = painted({ peakReduction: clip });
    const desk = liveDesk(it.editor, wholeView(32));
    desk.settle();
    it.tool('brush', 0).pointerDown(6, 4).pointerMove(20, 4).pointerUp();
    const edited = desk.settle().result();
    const fresh = liveDesk(createEditor(storedDocument(it.editor.document)), wholeView(32))
      .settle()
      .result();
    expect([...edited.symbolPaprDb]).toEqual([...fresh.symbolPaprDb]);
    expect([...edited.symbolPaprBeforeDb!]).toEqual([...fresh.symbolPaprBeforeDb!]);
    const before = Math.max(...edited.symbolPaprBeforeDb!);
    expect(Math.max(...edited.symbolPaprDb)).toBeLessThan(before);
    performOutcome(it.editor, planSettings(it.editor.document, { peakReduction: { kind: 'none' } }, 'None'));
    const plain = desk.settle().result();
    expect(plain.symbolPaprBeforeDb).toBeNull();
    expect([...plain.symbolPaprDb]).toEqual([...edited.symbolPaprBeforeDb!]);
  });
});

describe('ways to a lower peak', () => {
  it.each<PeakAsk>([
    { way: 'now' },
    { way: 'clipAndFilter', targetPaprDb: 5, iterations: 4 },
    { way: 'toneReservation', targetPaprDb: 5, iterations: 4 },
    { way: 'seed', streamId: 's0', first: 1, count: 9 },
    { way: 'phases' },
  ])('measures the document with its change: %p', (ask) => {
    const it = painted();
    it.tool('rectangle', 3).pointerDown(4, 0).pointerMove(8, 13).pointerUp();
    const { desk, heard } = tried(it, ask);
    desk.settle();
    expect(heard.failed).toBeNull();
    const { change, figures } = heard.done!;
    const content = { ...contentOf(it.editor.document), ...change };
    expect(figures.paprDb).toBe(paprOf(content));
    if (change === null) return;
    const label = 'Lower the peak';
    expect(performOutcome(it.editor, planSettings(it.editor.document, change, label))).toMatchObject({ kind: 'patch' });
  });

  it('hears strokes between its steps, tells how far it is, and stops when it is cancelled', () => {
    const it = painted();
    const { desk, heard, job } = tried(it, { way: 'seed', streamId: 's0', first: 1, count: 400 });
    desk.run(120);
    expect(heard.progress.at(-1)).toMatchObject({ total: 400, unit: 'tries' });
    const { changeCount } = it.editor.session.getState();
    it.tool('brush', 1).pointerDown(9, 3).pointerUp();
    desk.run(20);
    expect(desk.result().changeCount).toBeGreaterThanOrEqual(changeCount);
    job.cancel();
    desk.settle();
    expect(heard).toMatchObject({ done: null, failed: null });
    expect(desk.answers.some(({ kind }) => kind === 'peakDone')).toBe(false);
  });

  it('says in words what cannot be tried, and when the thread died', () => {
    const it = painted();
    const wrong = tried(it, { way: 'seed', streamId: 's7', first: 1, count: 5 });
    wrong.desk.settle();
    expect(wrong.heard.failed).toBe('This payload has no seed.');
    const dead = tried(it, { way: 'now' });
    dead.desk.crash();
    expect(dead.heard.failed).toMatch(/stopped/);
  });
});
