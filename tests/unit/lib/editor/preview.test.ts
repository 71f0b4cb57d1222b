import { planSettings } from '@/lib/editor/commands/settings';
import { planChangeInk } from '@/lib/editor/commands/tray';
import { storedDocument } from '@/lib/editor/document';
import { createShownSettings, type Editor } from '@/lib/editor/store';
import type { Patch } from '@/lib/editor/types';
import { headlessEditor } from '../../../helpers/headlessEditor';
import { liveDesk, wholeView } from '../../../helpers/liveDesk';

// What an open form would do is shown beside the document, never in it.

function painted() {
  const it = headlessEditor();
  it.tool('rectangle', 1).pointerDown(4, 0).pointerMove(27, 5).pointerUp();
  return it;
}

/** The first data ink with other points, as its form would plan it. */
function otherInk(editor: Editor, powerDb: number): Patch {
  const { inkId: _own, ...body } = editor.document.settings.tray[1]!;
  const outcome = planChangeInk(editor.document, 1, { ...body, powerDb } as never);
  if (outcome?.kind !== 'patch') throw new Error('no patch');
  return outcome.patch;
}
const powerOf = (editor: Editor) => createShownSettings(editor)().tray[1]!.powerDb;
const deskOf = (editor: Editor) => liveDesk(editor, wholeView(editor.document.settings.fftSize)).settle();

test('a preview is shown and is no part of the document, its history or its changes', () => {
  const { editor } = painted();
  const before = storedDocument(editor.document);
  const { undoLabel, changeCount } = editor.session.getState();
  const heard = jest.fn();
  editor.onPatch(heard);
  editor.preview(otherInk(editor, 6));
  expect(powerOf(editor)).toBe(6);
  expect(storedDocument(editor.document)).toEqual(before);
  expect(heard).not.toHaveBeenCalled();
  expect(editor.session.getState()).toMatchObject({ undoLabel, changeCount: changeCount + 1 });
  editor.preview(null);
  expect(powerOf(editor)).toBe(0);
  expect(editor.session.getState().changeCount).toBe(changeCount + 2);
});

test('what would change nothing, or more than settings, is not shown', () => {
  const { editor } = painted();
  const { changeCount } = editor.session.getState();
  editor.preview(null);
  editor.preview({ label: '', changes: [{ kind: 'tray', before: [], after: [] }] });
  const resized = planSettings(editor.document, { symbolCount: 20 }, 'Symbols');
  if (resized?.kind !== 'patch') throw new Error('no patch');
  editor.preview(resized.patch);
  expect(editor.session.getState()).toMatchObject({ changeCount, preview: null });
});

test('the live views follow it, one after the other, and come back to the document', () => {
  const { editor } = painted();
  const desk = deskOf(editor);
  const own = desk.result();
  for (const powerDb of [6, -3]) {
    editor.preview(otherInk(editor, powerDb));
    desk.settle();
    const shown = painted().editor;
    shown.apply(otherInk(shown, powerDb));
    const { constellation, figures, spectrum } = deskOf(shown).result();
    expect(desk.result()).toMatchObject({ changeCount: editor.session.getState().changeCount, constellation, figures });
    expect(desk.result().spectrum).toEqual(spectrum);
  }
  editor.preview(null);
  desk.settle();
  expect(desk.result().figures).toEqual(own.figures);
  expect(desk.result().spectrum).toEqual(own.spectrum);
});

test('strokes go on under it, its own change takes its place, undo leads back', () => {
  const it = painted();
  const { editor } = it;
  const desk = deskOf(editor);
  const patch = otherInk(editor, 6);
  editor.preview(patch);
  it.tool('brush', 2).pointerDown(10, 2).pointerUp();
  expect(editor.session.getState().preview).toBe(patch);
  editor.apply(patch);
  expect(editor.session.getState().preview).toBeNull();
  const same = () => {
    const { figures, spectrum } = desk.settle().result();
    const anew = deskOf(editor).result();
    expect(figures).toEqual(anew.figures);
    expect(spectrum).toEqual(anew.spectrum);
  };
  expect(powerOf(editor)).toBe(6);
  same();
  editor.undo();
  expect(powerOf(editor)).toBe(0);
  same();
});

test('a worker that starts anew shows it too', () => {
  const { editor } = painted();
  const desk = deskOf(editor);
  editor.preview(otherInk(editor, 6));
  const { spectrum } = desk.settle().result();
  desk.crash();
  desk.client.start();
  expect(desk.settle().result().spectrum).toEqual(spectrum);
});
