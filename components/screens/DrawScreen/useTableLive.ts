import { useEffect, useMemo } from 'react';
import type { TableLayout } from '@/components/canvas/CanvasGate';
import { useLiveSynthesis } from '@/components/live/useLiveSynthesis';
import type { LiveClient } from '@/lib/editor/live/client';
import type { LiveView } from '@/lib/editor/live/protocol';
import type { Editor } from '@/lib/editor/store';
import { createLiveReader, type LiveReader } from './liveReader';

/** Widths that hold until the table knows its own. */
const FIRST_WIDTHS = { time: 360, spectrum: 360 };
/** Room beside the time plot's area for its scale. */
const TIME_SCALE_PX = 23;

function viewOf(editor: Editor, widths: { time: number; spectrum: number }): LiveView {
  const { viewport, chosenSymbol, ink } = editor.session.getState();
  const { fftSize } = editor.document.settings;
  const along = viewport.turned ? viewport.heightPx : viewport.widthPx;
  const from = Math.max(0, viewport.firstPosition);
  const to = along > 0 ? Math.min(fftSize, viewport.firstPosition + along / viewport.subcarrierPx) : fftSize;
  return {
    symbol: chosenSymbol,
    timeWidthPx: widths.time,
    timeRange: null,
    spectrumWidthPx: widths.spectrum,
    positionRange: { from, to },
    ink,
  };
}

/** Tells the worker what the views show: symbol, ink and zoom as the session has them, widths as the layout has them. */
function createViewFeed(editor: Editor, client: LiveClient) {
  const widths = { ...FIRST_WIDTHS };
  const send = () => client.setView(viewOf(editor, widths));
  return {
    setLayout({ time, spectrum, grid }: TableLayout): void {
      if (time) widths.time = Math.max(16, Math.round(time.width - TIME_SCALE_PX));
      widths.spectrum = Math.max(16, Math.round(spectrum?.width ?? grid.width));
      send();
    },
    start(): () => void {
      send();
      return editor.session.subscribe((state, before) => {
        const { viewport, chosenSymbol, ink } = before;
        if (state.viewport !== viewport || state.chosenSymbol !== chosenSymbol || state.ink !== ink) send();
      });
    },
  };
}

/** The worker of this table. What the views show follows the session without a render. */
export function useTableLive(editor: Editor): {
  client: LiveClient;
  reader: LiveReader;
  setLayout: (layout: TableLayout) => void;
} {
  const firstView = useMemo(() => viewOf(editor, FIRST_WIDTHS), [editor]);
  const client = useLiveSynthesis(editor, firstView);
  const reader = useMemo(() => createLiveReader(editor, client), [editor, client]);
  const feed = useMemo(() => createViewFeed(editor, client), [editor, client]);
  useEffect(() => feed.start(), [feed]);
  return { client, reader, setLayout: feed.setLayout };
}
