import { combWithin } from '../commands/paint';
import { indexRefusal } from '../indexRule';
import { combSpans } from '../kernels/comb';
import { cutToGrid, rectBetween, rectSpans, settingsOfRect } from '../kernels/region';
import type { Editor } from '../store';
import type { CellPoint, CellRect, Span } from '../types';
import type { Drag, Tool, ToolPoint } from './tool';

/** A block dragged from corner to corner; what `plan` makes of it is painted afresh at each move. */
function dragArea(editor: Editor, start: ToolPoint, plan: (rect: CellRect) => Span[]): Drag {
  const { ink } = editor.session.getState();
  const grid = editor.document.settings;
  const gesture = editor.beginGesture('Paint');
  let last: CellPoint | null = null;
  let isRefused = false;

  function paint(to: CellPoint): void {
    if (isRefused || (last && last.position === to.position && last.symbol === to.symbol)) return;
    last = to;
    const rect = cutToGrid(rectBetween(start.cell, to), grid);
    const spans = rect ? plan(rect) : [];
    const refused = indexRefusal(editor.document, spans, ink);
    if (refused === null) return gesture.paintFresh(spans, ink);
    isRefused = true;
    gesture.cancel();
    editor.set({ notice: refused });
  }

  editor.set({ notice: null, selection: null });
  paint(start.cell);
  return {
    move: (to) => paint(to.cell),
    up() {
      const end = cutToGrid(rectBetween(start.cell, last ?? start.cell), grid);
      if (end)
        editor.set({ cursor: { position: end.positionFrom, symbol: end.symbolFrom }, chosenSymbol: end.symbolFrom });
      gesture.commit();
    },
    cancel: () => gesture.cancel(),
  };
}

/** Fills the dragged block; the sentence's blanks follow. */
export const rectangleTool: Tool = (editor, start) => {
  const grid = editor.document.settings;
  const before = editor.session.getState().rectangle;
  const drag = dragArea(editor, start, (rect) => {
    editor.set({ rectangle: settingsOfRect(rect, grid.fftSize) });
    return rectSpans(rect, grid);
  });
  return {
    ...drag,
    cancel() {
      drag.cancel();
      editor.set({ rectangle: before });
    },
  };
};

/** A comb with the sentence's steps and shift within the dragged block; the blanks from and to follow. */
export const combTool: Tool = (editor, start) => {
  const grid = editor.document.settings;
  const before = editor.session.getState().comb;
  const drag = dragArea(editor, start, (rect) => {
    const comb = combWithin(editor.session.getState().comb, rect, grid.fftSize);
    editor.set({ comb });
    return combSpans(comb, grid);
  });
  return {
    ...drag,
    cancel() {
      drag.cancel();
      editor.set({ comb: before });
    },
  };
};
