import { createStore } from 'zustand/vanilla';
import type { StoreApi } from 'zustand/vanilla';
import type { WaveformDocument } from '@/lib/synth/index';
import { lowestOf, openDocument } from './document';
import type { EditorDocument } from './document';
import { createGesture } from './gesture';
import type { Gesture } from './gesture';
import { createHistory } from './history';
import { applyPatch, invertPatch, isEmptyPatch } from './patch';
import type {
  BrushSize,
  CellPoint,
  CellRect,
  CombSettings,
  Patch,
  RectangleSettings,
  Settings,
  ToolName,
  Viewport,
} from './types';

/** What the screen shows beside the document. No cell is ever in here. */
export interface SessionState {
  /** Raised by every change of what is shown, the document's and a preview's: drawing and plots follow it. */
  changeCount: number;
  tool: ToolName;
  ink: number;
  cursor: CellPoint;
  selection: CellRect | null;
  brush: BrushSize;
  comb: CombSettings;
  rectangle: RectangleSettings;
  /** The symbol of the time view. */
  chosenSymbol: number;
  viewport: Viewport;
  /** The step that Undo and Redo would take, as words; null when there is none. */
  undoLabel: string | null;
  redoLabel: string | null;
  /** How many older steps were let go to keep the history within its bound, since opening. */
  stepsLetGo: number;
  /** A sentence about the last refused or remarkable act; shown until the next one. */
  notice: string | null;
  /** A stroke is under way: its changes are shown but not yet a step of the history. */
  gestureOpen: boolean;
  /** What an open form would do to the settings: shown by canvas, tray and live views, and no part of the document. */
  preview: Patch | null;
}

export type PatchListener = (patch: Patch, changeCount: number) => void;

export interface Editor {
  readonly document: EditorDocument;
  readonly session: StoreApi<SessionState>;
  /** Does a patch as one step of the history; an empty one is dropped (false). A gesture under way is committed first. */
  apply(patch: Patch): boolean;
  undo(): boolean;
  redo(): boolean;
  /** Opens a gesture (`verb`: “Paint”): moves fold into one step at commit, and cancel leaves nothing behind. One at a time. */
  beginGesture(verb: string): Gesture;
  /** Takes back the gesture under way, if any. */
  cancelGesture(): void;
  /**
   * Shows what a patch of the settings would do, until null, another one, or a real change of settings. The document stays as it is: nothing
   * to undo, to save or to take back. A patch of cells or size is not shown.
   */
  preview(patch: Patch | null): void;
  /** Hears every change in order, moves of a gesture and their taking back included. Returns the way to stop listening. */
  onPatch(listener: PatchListener): () => void;
  /** Changes session values (tool, ink, cursor …). */
  set(changes: Partial<SessionState>): void;
}

export interface EditorOptions {
  historyBytesMost?: number;
  viewport?: Partial<Viewport>;
}

function startSession(document: EditorDocument, viewport: Partial<Viewport>): SessionState {
  const { fftSize, symbolCount, tray } = document.settings;
  const lowest = lowestOf(fftSize);
  const highest = lowest + fftSize - 1;
  return {
    changeCount: 0,
    tool: 'brush',
    ink: Math.min(1, tray.length - 1),
    cursor: { position: -lowest, symbol: 0 },
    selection: null,
    brush: { subcarriers: 1, symbols: 1 },
    comb: {
      everySubcarrier: 12,
      subcarrierFrom: lowest,
      subcarrierTo: highest,
      everySymbol: 1,
      symbolFrom: 0,
      symbolTo: symbolCount - 1,
      shiftPerPass: 0,
    },
    rectangle: { subcarrierFrom: lowest, subcarrierTo: highest, symbolFrom: 0, symbolTo: symbolCount - 1 },
    chosenSymbol: 0,
    viewport: {
      widthPx: 0,
      heightPx: 0,
      firstPosition: 0,
      firstSymbol: 0,
      subcarrierPx: 1,
      symbolPx: 24,
      turned: false,
      ...viewport,
    },
    undoLabel: null,
    redoLabel: null,
    stepsLetGo: 0,
    notice: null,
    gestureOpen: false,
    preview: null,
  };
}

const SHOWABLE = new Set(['numbers', 'tray', 'streams', 'timing', 'level', 'markers']);

export const OLDER_STEPS_LET_GO = 'The oldest steps were let go: Undo keeps 64 MB of them.';

/** Opens a stored document for drawing. */
export function createEditor(stored: WaveformDocument, options: EditorOptions = {}): Editor {
  const document = openDocument(stored);
  const session = createStore<SessionState>()(() => startSession(document, options.viewport ?? {}));
  const history = createHistory(options.historyBytesMost);
  const listeners = new Set<PatchListener>();
  let open: Gesture | null = null;

  /** Keeps cursor, selection, ink and chosen symbol inside the document after a change of its size or tray. */
  function keptInside(state: SessionState): Partial<SessionState> {
    const { fftSize, symbolCount, tray } = document.settings;
    const inside: Partial<SessionState> = {};
    const { cursor, selection } = state;
    if (cursor.position >= fftSize || cursor.symbol >= symbolCount)
      inside.cursor = {
        position: Math.min(cursor.position, fftSize - 1),
        symbol: Math.min(cursor.symbol, symbolCount - 1),
      };
    if (selection && (selection.positionTo >= fftSize || selection.symbolTo >= symbolCount)) inside.selection = null;
    if (state.ink >= tray.length) inside.ink = tray.length - 1;
    if (state.chosenSymbol >= symbolCount) inside.chosenSymbol = symbolCount - 1;
    return inside;
  }

  function write(patch: Patch): void {
    applyPatch(document, patch);
    // Cells and a preview of settings do not touch each other; other settings would leave it without its ground.
    const endsPreview = patch.changes.some(({ kind }) => kind !== 'cells');
    session.setState((state) => ({
      changeCount: state.changeCount + 1,
      ...(endsPreview ? { preview: null } : {}),
      ...keptInside(state),
    }));
    const { changeCount } = session.getState();
    for (const listener of listeners) listener(patch, changeCount);
  }

  function showHistory(letGo = 0): void {
    session.setState((state) => ({
      undoLabel: history.nextUndo()?.label ?? null,
      redoLabel: history.nextRedo()?.label ?? null,
      stepsLetGo: state.stepsLetGo + letGo,
      notice: letGo > 0 ? OLDER_STEPS_LET_GO : null,
    }));
  }

  function closeGesture(how: 'commit' | 'cancel'): void {
    if (open) open[how]();
  }

  function step(take: () => Patch | null, direction: (patch: Patch) => Patch): boolean {
    // In the middle of a stroke, undo takes back the stroke: it is no step yet.
    if (open) {
      closeGesture('cancel');
      return true;
    }
    const patch = take();
    if (!patch) return false;
    write(direction(patch));
    showHistory();
    return true;
  }

  return {
    document,
    session,
    apply(patch) {
      closeGesture('commit');
      if (isEmptyPatch(patch)) return false;
      write(patch);
      showHistory(history.push(patch));
      return true;
    },
    undo: () => step(() => history.takeUndo(), invertPatch),
    redo: () =>
      step(
        () => history.takeRedo(),
        (patch) => patch,
      ),
    beginGesture(verb) {
      closeGesture('commit');
      session.setState({ gestureOpen: true });
      const gesture = createGesture(document, verb, {
        write,
        closed(patch) {
          open = null;
          session.setState({ gestureOpen: false });
          if (patch) showHistory(history.push(patch));
        },
      });
      open = gesture;
      return gesture;
    },
    cancelGesture: () => closeGesture('cancel'),
    preview(patch) {
      const isShown = patch && !isEmptyPatch(patch) && patch.changes.every(({ kind }) => SHOWABLE.has(kind));
      const next = isShown ? patch : null;
      session.setState((state) =>
        state.preview === next ? state : { preview: next, changeCount: state.changeCount + 1 },
      );
    },
    onPatch(listener) {
      listeners.add(listener);
      return () => listeners.delete(listener);
    },
    set: (changes) => session.setState(changes),
  };
}

/** The settings as they are shown: the document's, with a preview's where a form is open. The same object while both stay. */
export function createShownSettings(editor: Editor): () => Settings {
  let from: readonly unknown[] = [];
  let shown = editor.document.settings;
  return () => {
    const { settings } = editor.document;
    const { preview } = editor.session.getState();
    if (from[0] === settings && from[1] === preview) return shown;
    from = [settings, preview];
    const copy = {
      settings,
      cells: editor.document.cells,
      about: editor.document.about,
      intent: editor.document.intent,
    };
    if (preview) applyPatch(copy, preview);
    shown = copy.settings;
    return shown;
  };
}
