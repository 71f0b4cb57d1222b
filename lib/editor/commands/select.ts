import { revealCell } from '../kernels/viewport';
import { rectBetween } from '../kernels/region';
import type { Editor, SessionState } from '../store';
import type { CellPoint, ToolName } from '../types';
import type { Outcome } from './outcome';
import type { Command } from './registry';

type ArrowKey = 'ArrowLeft' | 'ArrowRight' | 'ArrowUp' | 'ArrowDown';

/** What an arrow means follows the drawing: turned axes turn the arrows too. */
function arrowStep(key: ArrowKey, isTurned: boolean): CellPoint {
  const steps: Record<ArrowKey, CellPoint> = isTurned
    ? {
        ArrowLeft: { position: 0, symbol: -1 },
        ArrowRight: { position: 0, symbol: 1 },
        ArrowUp: { position: 1, symbol: 0 },
        ArrowDown: { position: -1, symbol: 0 },
      }
    : {
        ArrowLeft: { position: -1, symbol: 0 },
        ArrowRight: { position: 1, symbol: 0 },
        ArrowUp: { position: 0, symbol: -1 },
        ArrowDown: { position: 0, symbol: 1 },
      };
  return steps[key];
}

/** Session values for a cursor at a cell (cut to the grid), in view, its symbol chosen. */
function cursorAt(editor: Editor, to: CellPoint): Pick<SessionState, 'cursor' | 'chosenSymbol' | 'viewport'> {
  const grid = editor.document.settings;
  const cursor = {
    position: Math.min(Math.max(to.position, 0), grid.fftSize - 1),
    symbol: Math.min(Math.max(to.symbol, 0), grid.symbolCount - 1),
  };
  const viewport = revealCell(editor.session.getState().viewport, grid, cursor.position, cursor.symbol);
  return { cursor, chosenSymbol: cursor.symbol, viewport };
}

function planMove(editor: Editor, key: ArrowKey, cells: number): Outcome {
  const { cursor, viewport } = editor.session.getState();
  const step = arrowStep(key, viewport.turned);
  const to = { position: cursor.position + step.position * cells, symbol: cursor.symbol + step.symbol * cells };
  return { kind: 'session', changes: { ...cursorAt(editor, to), selection: null } };
}

/** Shift and an arrow: the corner opposite to the cursor stays, the cursor's corner moves. */
function planSelect(editor: Editor, key: ArrowKey): Outcome {
  const { cursor, selection, viewport } = editor.session.getState();
  const step = arrowStep(key, viewport.turned);
  const anchor = selection
    ? {
        position: cursor.position === selection.positionFrom ? selection.positionTo : selection.positionFrom,
        symbol: cursor.symbol === selection.symbolFrom ? selection.symbolTo : selection.symbolFrom,
      }
    : cursor;
  const moved = cursorAt(editor, { position: cursor.position + step.position, symbol: cursor.symbol + step.symbol });
  return { kind: 'session', changes: { ...moved, selection: rectBetween(anchor, moved.cursor) } };
}

function planAll(editor: Editor): Outcome {
  const { fftSize, symbolCount } = editor.document.settings;
  const selection = { positionFrom: 0, positionTo: fftSize - 1, symbolFrom: 0, symbolTo: symbolCount - 1 };
  return { kind: 'session', changes: { selection } };
}

function planEscape(editor: Editor): Outcome {
  const { gestureOpen } = editor.session.getState();
  return gestureOpen ? { kind: 'cancelGesture' } : { kind: 'session', changes: { selection: null, notice: null } };
}

function planBrushSize(editor: Editor, by: number): Outcome {
  const { brush } = editor.session.getState();
  const { fftSize } = editor.document.settings;
  const subcarriers = Math.min(Math.max(brush.subcarriers + by, 1), fftSize);
  return { kind: 'session', changes: { brush: { ...brush, subcarriers } } };
}

const always = () => true;
const ARROWS: readonly [ArrowKey, string][] = [
  ['ArrowLeft', 'left'],
  ['ArrowRight', 'right'],
  ['ArrowUp', 'up'],
  ['ArrowDown', 'down'],
];
const TOOLS: readonly [ToolName, string, string][] = [
  ['brush', 'Brush', 'B'],
  ['rectangle', 'Rectangle', 'R'],
  ['comb', 'Comb', 'C'],
  ['pick', 'Pick', 'P'],
  ['pan', 'Pan', 'H'],
];

/** Digits by place in the tray: 1 is the first swatch, 0 the tenth. */
const inkCommands = Array.from({ length: 10 }, (_, place): Command => {
  const digit = String((place + 1) % 10);
  return {
    id: `ink.${place}`,
    label: `Ink ${place + 1}`,
    shortcut: digit,
    isEnabled: (editor) => place < editor.document.settings.tray.length,
    plan: () => ({ kind: 'session', changes: { ink: place } }),
  };
});

export const selectCommands: readonly Command[] = [
  ...TOOLS.map(([tool, label, shortcut]): Command => ({
    id: `tool.${tool}`,
    label,
    shortcut,
    isEnabled: always,
    plan: () => ({ kind: 'session', changes: { tool, notice: null } }),
  })),
  ...inkCommands,
  ...ARROWS.flatMap(([key, word]): Command[] => [
    {
      id: `cursor.${word}`,
      label: `Cursor ${word}`,
      shortcut: key,
      isEnabled: always,
      plan: (e) => planMove(e, key, 1),
    },
    {
      id: `cursor.far.${word}`,
      label: `Cursor ten ${word}`,
      shortcut: `Ctrl+${key}`,
      isEnabled: always,
      plan: (e) => planMove(e, key, 10),
    },
    {
      id: `select.${word}`,
      label: `Select ${word}`,
      shortcut: `Shift+${key}`,
      isEnabled: always,
      plan: (e) => planSelect(e, key),
    },
  ]),
  { id: 'select.all', label: 'Select all', shortcut: 'Ctrl+A', isEnabled: always, plan: planAll },
  { id: 'cancel', label: 'Cancel', shortcut: 'Escape', isEnabled: always, plan: planEscape },
  { id: 'brush.smaller', label: 'Smaller brush', shortcut: '-', isEnabled: always, plan: (e) => planBrushSize(e, -1) },
  {
    id: 'brush.larger',
    label: 'Larger brush',
    shortcut: '+',
    otherShortcuts: ['='],
    isEnabled: always,
    plan: (e) => planBrushSize(e, 1),
  },
];
