import type { FrameProbe } from '@/components/canvas/CanvasGate';
import type { Autosave } from '@/lib/client/autosave';
import type { LiveClient } from '@/lib/editor/live/client';
import { storedDocument } from '@/lib/editor/document';
import type { Editor } from '@/lib/editor/store';
import type { BenchContent, WaveformDocument } from '@/lib/synth';

/**
 * What a browser test reads in place of guessing from pixels: the document, the session, the frames drawn. It exists only where
 * localStorage holds combwright.test = 1, which nothing in the product sets.
 */
export interface TestHook {
  document(): WaveformDocument;
  session(): Record<string, unknown>;
  live(): { changeCount: number; paprDb: number | null; symbolsDone: number } | null;
  probe(): FrameProbe | null;
  revisionId(): string;
  saveState(): string;
  digest(bench: BenchContent): Promise<{ changeCount: number; sha256: string; bytes: number }>;
}

declare global {
  interface Window {
    __combwrightTable?: TestHook;
  }
}

export function isTestRun(): boolean {
  try {
    return localStorage.getItem('combwright.test') === '1';
  } catch {
    return false;
  }
}

export function attachTestHook(
  editor: Editor,
  client: LiveClient,
  saver: Autosave,
  probe: FrameProbe | null,
): () => void {
  if (!isTestRun()) return () => undefined;
  const hook: TestHook = {
    document: () => storedDocument(editor.document),
    session: () => ({ ...editor.session.getState() }),
    live() {
      const { result } = client.state.getState();
      if (!result) return null;
      const papr = result.figures.find((figure) => figure.id === 'paprFrame');
      return { changeCount: result.changeCount, paprDb: papr?.value ?? null, symbolsDone: result.symbolsDone };
    },
    probe: () => probe && { ...probe, scriptMs: [...probe.scriptMs] },
    revisionId: () => saver.revision().revisionId,
    saveState: () => saver.state().kind,
    digest: (bench) => client.digest(bench),
  };
  window.__combwrightTable = hook;
  return () => {
    if (window.__combwrightTable === hook) delete window.__combwrightTable;
  };
}
