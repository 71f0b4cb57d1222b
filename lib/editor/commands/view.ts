import { fitViewport, turnViewport, zoomToRect, zoomViewport } from '../kernels/viewport';
import type { Editor } from '../store';
import type { Outcome, ScreenAct } from './outcome';
import type { Command } from './registry';

function planZoomSelection(editor: Editor): Outcome {
  const { viewport, selection } = editor.session.getState();
  if (!selection) return null;
  return { kind: 'session', changes: { viewport: zoomToRect(viewport, editor.document.settings, selection) } };
}

function planWholeBand(editor: Editor): Outcome {
  const { viewport } = editor.session.getState();
  return { kind: 'session', changes: { viewport: fitViewport(viewport, editor.document.settings) } };
}

function planTurn(editor: Editor): Outcome {
  const { viewport } = editor.session.getState();
  return { kind: 'session', changes: { viewport: turnViewport(viewport, editor.document.settings) } };
}

function planZoom(editor: Editor, factor: number): Outcome {
  const { viewport } = editor.session.getState();
  const middle = { xPx: viewport.widthPx / 2, yPx: viewport.heightPx / 2 };
  const zoomed = zoomViewport(viewport, editor.document.settings, middle, factor, 1);
  return { kind: 'session', changes: { viewport: zoomed } };
}

const always = () => true;
const screen = (act: ScreenAct) => () => ({ kind: 'screen', act }) as const;

export const viewCommands: readonly Command[] = [
  {
    id: 'view.selection',
    label: 'Zoom to selection',
    shortcut: 'Z',
    isEnabled: (editor) => editor.session.getState().selection !== null,
    plan: planZoomSelection,
  },
  { id: 'view.band', label: 'Whole band', shortcut: 'W', isEnabled: always, plan: planWholeBand },
  { id: 'view.turn', label: 'Turn the axes', shortcut: 'X', isEnabled: always, plan: planTurn },
  { id: 'view.closer', label: 'Closer', shortcut: ']', isEnabled: always, plan: (e) => planZoom(e, 2) },
  { id: 'view.farther', label: 'Farther', shortcut: '[', isEnabled: always, plan: (e) => planZoom(e, 0.5) },
  {
    id: 'screen.sentence',
    label: 'To the sentence',
    shortcut: '.',
    isEnabled: always,
    plan: screen('focusSentence'),
  },
  { id: 'screen.region', label: 'Next part', shortcut: 'F6', isEnabled: always, plan: screen('nextRegion') },
  {
    id: 'peak.lower',
    label: 'Lower the peak',
    shortcut: 'L',
    isEnabled: always,
    plan: screen('lowerPeak'),
  },
  { id: 'screen.keys', label: 'Keys', shortcut: '?', isEnabled: always, plan: screen('listKeys') },
];
