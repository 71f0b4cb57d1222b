import { useMemo, useSyncExternalStore } from 'react';
import { createShownSettings, type Editor, type SessionState } from '@/lib/editor/store';
import type { Settings } from '@/lib/editor/types';
import type { WaveformIntent } from '@/lib/synth';

/** A narrow part of the session; the component renders again only when this part is another. */
export function useEditorState<T>(editor: Editor, select: (state: SessionState) => T): T {
  const read = () => select(editor.session.getState());
  return useSyncExternalStore(editor.session.subscribe, read, read);
}

/** Renders again at each change of the document; strokes under way count. */
export function useChangeCount(editor: Editor): number {
  return useEditorState(editor, (state) => state.changeCount);
}

/** The settings: their object is replaced by every change of them, and by nothing else. */
export function useSettings(editor: Editor): Settings {
  const read = () => editor.document.settings;
  return useSyncExternalStore(editor.session.subscribe, read, read);
}

/** The settings with what an open form would do to them. */
export function useShownSettings(editor: Editor): Settings {
  const read = useMemo(() => createShownSettings(editor), [editor]);
  return useSyncExternalStore(editor.session.subscribe, read, read);
}

export function useTitle(editor: Editor): string {
  const read = () => editor.document.about.title;
  return useSyncExternalStore(editor.session.subscribe, read, read);
}

export function useIntent(editor: Editor): WaveformIntent {
  const read = () => editor.document.intent;
  return useSyncExternalStore(editor.session.subscribe, read, read);
}
