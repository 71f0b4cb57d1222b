import type { Editor, SessionState } from '../store';
import type { Patch } from '../types';

/** A change that would lose something: asked before it is done. */
export interface Question {
  /** "1024 points hold 1024 subcarriers. 176 painted cells would be cut." */
  text: string;
  /** "Cut them": does `patch`. */
  doLabel: string;
  /** "Keep 2048": does nothing. */
  keepLabel: string;
  patch: Patch;
}

/** Acts that only the screen can do (focus, lists). */
export type ScreenAct = 'focusSentence' | 'nextRegion' | 'listKeys' | 'lowerPeak';

export type Outcome =
  | { kind: 'patch'; patch: Patch }
  | { kind: 'session'; changes: Partial<SessionState> }
  | { kind: 'history'; step: 'undo' | 'redo' }
  | { kind: 'cancelGesture' }
  | { kind: 'question'; question: Question }
  | { kind: 'refused'; message: string; pointer?: string }
  | { kind: 'screen'; act: ScreenAct }
  | null;

/** Does what was planned. Questions and screen acts are handed back for the screen; a refusal becomes the session's notice. */
export function performOutcome(editor: Editor, outcome: Outcome): Outcome {
  switch (outcome?.kind) {
    case 'patch':
      editor.set({ notice: null });
      editor.apply(outcome.patch);
      break;
    case 'session':
      editor.set(outcome.changes);
      break;
    case 'history':
      editor[outcome.step]();
      break;
    case 'cancelGesture':
      editor.cancelGesture();
      break;
    case 'refused':
      editor.set({ notice: outcome.message });
  }
  return outcome;
}
