import { useEffect, useMemo, useSyncExternalStore } from 'react';
import { createAutosave, type Autosave, type SaveState } from '@/lib/client/autosave';
import { dropLocalCopy, keepLocalCopy } from '@/lib/client/localCopies';
import { storedDocument } from '@/lib/editor/document';
import type { Editor } from '@/lib/editor/store';
import type { DrawingStore, OpenedDrawing } from './drawingStore';

/** Saves a drawing while it is drawn, on leaving the page, and when the connection comes back. */
export function useSaving(editor: Editor, store: DrawingStore, opened: OpenedDrawing, personId: string): Autosave {
  const saver = useMemo(() => {
    const { waveformId } = opened.revision;
    return createAutosave({
      getSnapshot: () => storedDocument(editor.document),
      send: (document, parentId, key, isLeaving) => store.save(document, parentId, key, isLeaving),
      opened: opened.revision,
      keepLocal: (document, parentId) => keepLocalCopy(personId, { waveformId, parentId, document }),
      dropLocal: () => dropLocalCopy(personId, waveformId),
    });
  }, [editor, store, opened, personId]);

  useEffect(() => {
    // Strokes under way are not saved by themselves: the stroke's end is a change too.
    const stopListening = editor.onPatch(() => saver.touch());
    if (opened.isUnsaved) saver.touch();
    const online = () => void saver.flush();
    const hidden = () => {
      if (document.visibilityState === 'hidden') void saver.flush(true);
    };
    const leaving = () => void saver.flush(true);
    window.addEventListener('online', online);
    window.addEventListener('pagehide', leaving);
    document.addEventListener('visibilitychange', hidden);
    return () => {
      stopListening();
      window.removeEventListener('online', online);
      window.removeEventListener('pagehide', leaving);
      document.removeEventListener('visibilitychange', hidden);
      void saver.flush(true);
    };
  }, [editor, saver, opened]);
  return saver;
}

export function useSaveState(saver: Autosave): SaveState {
  return useSyncExternalStore(saver.subscribe, saver.state);
}
