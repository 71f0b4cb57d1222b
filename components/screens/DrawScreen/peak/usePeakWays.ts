import { useCallback, useEffect, useRef, useState } from 'react';
import type { LiveClient } from '@/lib/editor/live/client';
import type { PeakProgress, PeakResult } from '@/lib/editor/live/peakJob';
import type { Editor } from '@/lib/editor/store';
import { askOf, type PeakBlanks, type WayId } from './peakWords';

/** How a way stands. `result` stays while it is tried again with other blanks. */
export interface WayState {
  result: PeakResult | null;
  progress: PeakProgress | null;
  isRunning: boolean;
  isCancelled: boolean;
  failed: string | null;
}

const IDLE: WayState = { result: null, progress: null, isRunning: false, isCancelled: false, failed: null };

type States = Record<'now' | WayId, WayState>;
const NONE: States = { now: IDLE, phases: IDLE, seed: IDLE, toneReservation: IDLE, clipAndFilter: IDLE };

export interface PeakWays {
  states: States;
  start(way: 'now' | WayId, blanks: PeakBlanks): void;
  cancel(way: WayId): void;
  /** Ends what runs and forgets what was found: the drawing is another one. */
  forget(): void;
}

/** The ways that are tried in the worker of the live views, one after another; strokes are heard between their steps. */
export function usePeakWays(peak: LiveClient['peak']): PeakWays {
  const [states, setStates] = useState<States>(NONE);
  const running = useRef(new Map<string, { cancel(): void }>());

  const set = useCallback((way: keyof States, change: Partial<WayState>) => {
    setStates((all) => ({ ...all, [way]: { ...all[way], ...change } }));
  }, []);

  const stop = useCallback((way: keyof States) => {
    running.current.get(way)?.cancel();
    running.current.delete(way);
  }, []);

  const start = useCallback(
    (way: 'now' | WayId, blanks: PeakBlanks) => {
      stop(way);
      set(way, { isRunning: true, isCancelled: false, failed: null, progress: null });
      const job = peak(way === 'now' ? { way } : askOf(way, blanks), {
        onProgress: (progress) => set(way, { progress }),
        onDone(result) {
          running.current.delete(way);
          set(way, { ...IDLE, result });
        },
        onFailed(failed) {
          running.current.delete(way);
          set(way, { ...IDLE, failed });
        },
      });
      running.current.set(way, job);
    },
    [peak, set, stop],
  );

  const cancel = useCallback(
    (way: WayId) => {
      stop(way);
      set(way, { isRunning: false, isCancelled: true, progress: null });
    },
    [set, stop],
  );

  const forget = useCallback(() => {
    for (const way of [...running.current.keys()]) stop(way as keyof States);
    setStates(NONE);
  }, [stop]);

  useEffect(() => () => running.current.forEach((job) => job.cancel()), []);
  return { states, start, cancel, forget };
}

const QUIET_MS = 400;

/** Counts drawings: one more a little after each change of the document, previews left out. */
export function useDrawingCount(editor: Editor): number {
  const [count, setCount] = useState(0);
  useEffect(() => {
    let timer: ReturnType<typeof setTimeout> | undefined;
    const stopListening = editor.onPatch(() => {
      clearTimeout(timer);
      timer = setTimeout(() => setCount((before) => before + 1), QUIET_MS);
    });
    return () => {
      clearTimeout(timer);
      stopListening();
    };
  }, [editor]);
  return count;
}
