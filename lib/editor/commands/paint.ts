import { brushSpans } from '../kernels/brush';
import { combSpans } from '../kernels/comb';
import { cutToGrid, rectOfSettings, rectSpans } from '../kernels/region';
import { planPaint, spanCells } from '../paint';
import type { Editor } from '../store';
import type { CellPoint, CellRect, CombSettings, RectangleSettings, Span } from '../types';
import type { Outcome } from './outcome';
import type { Command } from './registry';

/** The cells of the rectangle's, comb's and brush's sentence, by numbers. */
export function rectangleSpans(editor: Editor, settings: RectangleSettings): Span[] {
  const grid = editor.document.settings;
  return rectSpans(rectOfSettings(settings, grid.fftSize), grid);
}

/** How many cells the open sentence would paint: the count that follows its blanks. */
export function sentenceCells(editor: Editor): number {
  return spanCells(sentenceSpans(editor));
}

/** The cells that the chosen tool's sentence names. */
export function sentenceSpans(editor: Editor): Span[] {
  const { tool, comb, rectangle, cursor, brush } = editor.session.getState();
  if (tool === 'comb') return combSpans(comb, editor.document.settings);
  if (tool === 'rectangle') return rectangleSpans(editor, rectangle);
  return brushSpans(cursor, brush, editor.document.settings);
}

export function planRectangle(editor: Editor, settings: RectangleSettings, ink: number): Outcome {
  return planPaint(editor.document, rectangleSpans(editor, settings), ink);
}

export function planComb(editor: Editor, settings: CombSettings, ink: number): Outcome {
  return planPaint(editor.document, combSpans(settings, editor.document.settings), ink);
}

export function planBrush(editor: Editor, at: CellPoint, ink: number): Outcome {
  const { brush } = editor.session.getState();
  return planPaint(editor.document, brushSpans(at, brush, editor.document.settings), ink);
}

/** The comb of the blanks within a block of cells. */
export function combWithin(comb: CombSettings, rect: CellRect, fftSize: number): CombSettings {
  const zero = Math.floor(fftSize / 2);
  return {
    ...comb,
    subcarrierFrom: rect.positionFrom - zero,
    subcarrierTo: rect.positionTo - zero,
    symbolFrom: rect.symbolFrom,
    symbolTo: rect.symbolTo,
  };
}

/** Space: the selection with the chosen tool where there is one, else the brush at the cursor cell. */
function planAtCursor(editor: Editor): Outcome {
  const { tool, ink, cursor, selection, comb } = editor.session.getState();
  const grid = editor.document.settings;
  const rect = selection && cutToGrid(selection, grid);
  if (tool === 'pick') return planPick(editor, cursor);
  if (!rect) return planBrush(editor, cursor, ink);
  if (tool === 'comb') return planComb(editor, combWithin(comb, rect, grid.fftSize), ink);
  return planPaint(editor.document, rectSpans(rect, grid), ink);
}

/** Takes the ink of a cell, and shows its symbol in the time view. */
export function planPick(editor: Editor, at: CellPoint): Outcome {
  const { cells, settings } = editor.document;
  const ink = cells[at.symbol * settings.fftSize + at.position];
  if (ink === undefined) return null;
  return { kind: 'session', changes: { ink, cursor: at, chosenSymbol: at.symbol, notice: null } };
}

function planSentence(editor: Editor): Outcome {
  return planPaint(editor.document, sentenceSpans(editor), editor.session.getState().ink);
}

function planErase(editor: Editor): Outcome {
  const { selection, cursor, brush } = editor.session.getState();
  const grid = editor.document.settings;
  const spans = selection ? rectSpans(selection, grid) : brushSpans(cursor, brush, grid);
  return planPaint(editor.document, spans, 0, 'Clear');
}

const always = () => true;

export const paintCommands: readonly Command[] = [
  { id: 'paint.cursor', label: 'Paint', shortcut: 'Space', isEnabled: always, plan: planAtCursor },
  { id: 'paint.sentence', label: 'Paint', shortcut: 'Ctrl+Enter', isEnabled: always, plan: planSentence },
  { id: 'paint.clear', label: 'Clear', shortcut: 'Delete', isEnabled: always, plan: planErase },
  {
    id: 'history.undo',
    label: 'Undo',
    shortcut: 'Ctrl+Z',
    isEnabled: (editor) => editor.session.getState().undoLabel !== null || editor.session.getState().gestureOpen,
    plan: () => ({ kind: 'history', step: 'undo' }),
  },
  {
    id: 'history.redo',
    label: 'Redo',
    shortcut: 'Ctrl+Shift+Z',
    otherShortcuts: ['Ctrl+Y'],
    isEnabled: (editor) => editor.session.getState().redoLabel !== null,
    plan: () => ({ kind: 'history', step: 'redo' }),
  },
];
