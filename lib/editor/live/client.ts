import { createStore } from 'zustand/vanilla';
import type { StoreApi } from 'zustand/vanilla';
import type { BenchContent } from '@/lib/synth/index';
import { storedDocument } from '../document';
import { invertPatch } from '../patch';
import type { Editor } from '../store';
import type { Patch } from '../types';
import type { LiveAnswer, LiveRequest, LiveResult, LiveView } from './protocol';

/** A worker as the client sees it. */
export interface LivePort {
  post(request: LiveRequest): void;
  end(): void;
}

export interface LivePortHandlers {
  onAnswer(answer: LiveAnswer): void;
  /** The thread died or could not be started. */
  onCrash(message: string): void;
}

export interface LiveState {
  status: 'starting' | 'running' | 'stopped';
  /** The latest figures and traces; compare result.changeCount with the session's to see whether they are stale. */
  result: LiveResult | null;
  /** Symbols done and to do while a long frame is measured; null when nothing is under way. */
  progress: { symbolsDone: number; symbolsToDo: number } | null;
  /** Why the views stand still, in words; null when all is well. */
  message: string | null;
}

export interface VectorDigest {
  changeCount: number;
  sha256: string;
  bytes: number;
}

/** Keeps a worker fed with the editor's patches and its answers at hand. */
export interface LiveClient {
  readonly state: StoreApi<LiveState>;
  /** Starts the worker (also anew, after it stopped) and listens to the editor. */
  start(): void;
  /** What to show; may be told before the start, and an unchanged view costs nothing. */
  setView(view: LiveView): void;
  /** The digest of the vector as a pack for this profile would hold it. Rejects with a sentence. */
  digest(bench: BenchContent): Promise<VectorDigest>;
  /** Ends the worker; start() begins again. */
  end(): void;
}

/** Until the screen has told what it shows. */
const FIRST_VIEW: LiveView = {
  symbol: 0,
  timeWidthPx: 360,
  timeRange: null,
  spectrumWidthPx: 360,
  positionRange: { from: 0, to: 1 },
  ink: 0,
};

export const LIVE_VIEWS_STOPPED = 'The live views stopped. Your drawing is safe.';

export function createLiveClient(editor: Editor, startPort: (handlers: LivePortHandlers) => LivePort): LiveClient {
  const state = createStore<LiveState>()(() => ({ status: 'starting', result: null, progress: null, message: null }));
  const waiting = new Map<number, { resolve(digest: VectorDigest): void; reject(error: Error): void }>();
  let port: LivePort | null = null;
  let view = FIRST_VIEW;
  let stopListening: (() => void) | null = null;
  let sequence = 0;
  /** What the worker shows beside the document. */
  let previewed: Patch | null = null;
  let nextRequestId = 1;

  function refuseWaiting(message: string): void {
    for (const { reject } of waiting.values()) reject(new Error(message));
    waiting.clear();
  }

  function post(patch: Patch, changeCount: number): void {
    port?.post({ kind: 'patch', sequence: ++sequence, changeCount, patch });
  }

  function open(): void {
    sequence = 0;
    previewed = null;
    const { changeCount } = editor.session.getState();
    port?.post({ kind: 'open', document: storedDocument(editor.document), changeCount, view });
    followPreview();
  }

  /** A real change that ends a preview reaches the session before its listeners: the worker is back at the document by then. */
  function followPreview(): void {
    const { preview, changeCount } = editor.session.getState();
    if (preview === previewed) return;
    if (previewed) post(invertPatch(previewed), changeCount);
    if (preview) post(preview, changeCount);
    previewed = preview;
  }

  function listen(): () => void {
    const stops = [editor.session.subscribe(followPreview), editor.onPatch(post)];
    return () => stops.forEach((stop) => stop());
  }

  function stopped(): void {
    port?.end();
    port = null;
    refuseWaiting(LIVE_VIEWS_STOPPED);
    state.setState({ status: 'stopped', progress: null, message: LIVE_VIEWS_STOPPED });
  }

  function answered(answer: LiveAnswer): void {
    switch (answer.kind) {
      case 'result':
        return state.setState({ status: 'running', result: answer.result, progress: null, message: null });
      case 'progress':
        return state.setState({ progress: { symbolsDone: answer.symbolsDone, symbolsToDo: answer.symbolsToDo } });
      case 'documentWanted':
        return open();
      case 'digest': {
        const { requestId, changeCount, sha256, bytes } = answer;
        waiting.get(requestId)?.resolve({ changeCount, sha256, bytes });
        waiting.delete(requestId);
        return;
      }
      case 'digestFailed':
        waiting.get(answer.requestId)?.reject(new Error(answer.message));
        waiting.delete(answer.requestId);
        return;
      case 'failed':
        // The document is at fault, not the worker: it goes on listening for the change that mends it.
        return state.setState({ status: 'running', progress: null, message: answer.message });
    }
  }

  return {
    state,
    start() {
      port?.end();
      stopListening ??= listen();
      state.setState({ status: 'starting', message: null, progress: null });
      port = startPort({ onAnswer: answered, onCrash: stopped });
      open();
    },
    setView(next) {
      if (JSON.stringify(next) === JSON.stringify(view)) return;
      view = next;
      port?.post({ kind: 'view', view });
    },
    digest(bench) {
      return new Promise((resolve, reject) => {
        if (!port) return reject(new Error(LIVE_VIEWS_STOPPED));
        const requestId = nextRequestId++;
        waiting.set(requestId, { resolve, reject });
        port.post({ kind: 'digest', requestId, bench });
      });
    },
    end() {
      stopListening?.();
      stopListening = null;
      refuseWaiting(LIVE_VIEWS_STOPPED);
      port?.end();
      port = null;
    },
  };
}
