import { createHistory } from '@/lib/editor/history';
import { patchBytes } from '@/lib/editor/patch';
import { createEditor } from '@/lib/editor/store';
import { planSettings } from '@/lib/editor/commands/settings';
import { planRectangle } from '@/lib/editor/commands/paint';
import { performOutcome } from '@/lib/editor/commands/outcome';
import type { Patch } from '@/lib/editor/types';
import { headlessEditor, testDocument } from '../../../helpers/headlessEditor';

const step = (n: number): Patch => ({
  label: `step ${n}`,
  changes: [
    {
      kind: 'about',
      before: { title: 'a', notes: '', basedOn: null },
      after: { title: 'b', notes: 'x'.repeat(200), basedOn: null },
    },
  ],
});

describe('history', () => {
  it('lets the oldest steps go when it is full, and tells how many', () => {
    const bytes = patchBytes(step(0));
    const history = createHistory(3 * bytes);
    expect([0, 1, 2].map((n) => history.push(step(n)))).toEqual([0, 0, 0]);
    expect(history.push(step(3))).toBe(1);
    expect(history.bytes()).toBe(3 * bytes);
    expect(
      [history.takeUndo(), history.takeUndo(), history.takeUndo(), history.takeUndo()].map((p) => p?.label),
    ).toEqual(['step 3', 'step 2', 'step 1', undefined]);
  });

  it('forgets what was undone when something new is done', () => {
    const history = createHistory();
    history.push(step(0));
    history.push(step(1));
    history.takeUndo();
    history.push(step(2));
    expect(history.nextRedo()).toBeNull();
    expect(history.bytes()).toBe(2 * patchBytes(step(0)));
  });

  it('keeps the newest step even when it alone is over the bound', () => {
    const history = createHistory(10);
    history.push(step(0));
    expect(history.push(step(1))).toBe(1);
    expect(history.nextUndo()?.label).toBe('step 1');
  });

  it('tells the person', () => {
    const it = headlessEditor(testDocument(), { historyBytesMost: 500 }).tool('brush', 1);
    it.pointerDown(1, 1).pointerUp();
    it.pointerDown(2, 2).pointerUp();
    it.pointerDown(3, 3).pointerUp();
    const { stepsLetGo, notice } = it.editor.session.getState();
    expect(stepsLetGo).toBeGreaterThan(0);
    expect(notice).toContain('oldest steps were let go');
  });

  it('costs kilobytes to fill the largest grid', () => {
    const stored = testDocument({
      fftSize: 8192,
      symbolCount: 1024,
      prefixSamples: [0],
      grid: { rows: [[8192, 0]], rowOfSymbol: new Array<number>(1024).fill(0) },
    });
    const editor = createEditor(stored);
    const all = { subcarrierFrom: -4096, subcarrierTo: 4095, symbolFrom: 0, symbolTo: 1023 };
    const planned = planRectangle(editor, all, 1);
    if (planned?.kind !== 'patch') throw new Error('no patch');
    expect(patchBytes(planned.patch)).toBeLessThan(4096);
    performOutcome(editor, planned);
    expect(editor.document.cells.every((ink) => ink === 1)).toBe(true);
  });

  it('drops an empty patch', () => {
    const { editor } = headlessEditor();
    const { settings } = editor.document;
    expect(
      editor.apply({ label: '', changes: [{ kind: 'level', before: settings.level, after: { ...settings.level } }] }),
    ).toBe(false);
    expect(planSettings(editor.document, { level: { ...settings.level } }, '')).toBeNull();
    expect(editor.session.getState()).toMatchObject({ changeCount: 0, undoLabel: null });
  });
});
