import { useSyncExternalStore } from 'react';
import type { TableLive } from '@/components/canvas/CanvasGate';
import type { LiveClient } from '@/lib/editor/live/client';
import type { FigureId, LiveFigure } from '@/lib/editor/live/protocol';
import type { Editor } from '@/lib/editor/store';

/** The live views as the table reads them: one value a state, whether or not the worker has started. */
export interface LiveReader {
  get(): TableLive & {
    /** The worker stopped: the views stand still until it is started again. */
    hasStopped: boolean;
    /** Why nothing is measured, in words. */
    message: string | null;
    progress: { done: number; toDo: number } | null;
  };
  subscribe(listener: () => void): () => void;
  restart(): void;
  /** Peaks to stand hollow beside the dots while a form shows what would become of them; null: the document's own, if any. */
  showPeaksBefore(peaks: Float32Array | null): void;
}

type Snapshot = ReturnType<LiveReader['get']>;

/** Joins the worker's answers with the session: an answer is stale as soon as the document is another one. */
export function createLiveReader(editor: Editor, client: LiveClient | null): LiveReader {
  let shownBefore: Float32Array | null = null;
  const listeners = new Set<() => void>();
  let snapshot: Snapshot = {
    result: null,
    peaksBefore: null,
    isStale: false,
    hasStopped: false,
    message: null,
    progress: null,
  };
  const get = () => {
    const { changeCount } = editor.session.getState();
    const state = client?.state.getState();
    const result = state?.result ?? null;
    const next: Snapshot = {
      result,
      peaksBefore: shownBefore ?? result?.symbolPaprBeforeDb ?? null,
      isStale: result === null || result.changeCount !== changeCount,
      hasStopped: state?.status === 'stopped',
      message: state?.message ?? null,
      progress: state?.progress ? { done: state.progress.symbolsDone, toDo: state.progress.symbolsToDo } : null,
    };
    const isSame =
      next.result === snapshot.result &&
      next.peaksBefore === snapshot.peaksBefore &&
      next.isStale === snapshot.isStale &&
      next.hasStopped === snapshot.hasStopped &&
      next.message === snapshot.message &&
      next.progress?.done === snapshot.progress?.done;
    if (!isSame) snapshot = next;
    return snapshot;
  };
  return {
    get,
    subscribe(listener) {
      listeners.add(listener);
      const stops = [
        editor.session.subscribe(listener),
        client?.state.subscribe(listener),
        () => listeners.delete(listener),
      ];
      return () => stops.forEach((stop) => stop?.());
    },
    restart: () => client?.start(),
    showPeaksBefore(peaks) {
      if (shownBefore === peaks) return;
      shownBefore = peaks;
      listeners.forEach((listener) => listener());
    },
  };
}

export function useLive<T>(live: LiveReader, select: (state: Snapshot) => T): T {
  const read = () => select(live.get());
  return useSyncExternalStore(live.subscribe, read, read);
}

export function figureOf(figures: readonly LiveFigure[] | undefined, id: FigureId): LiveFigure | null {
  return figures?.find((figure) => figure.id === id) ?? null;
}
