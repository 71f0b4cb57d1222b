import { useEffect, useMemo } from 'react';
import type { TableLayout } from '@/components/canvas/CanvasGate';
import { useLiveSynthesis } from '@/components/live/useLiveSynthesis';
import type { LiveClient } from '@/lib/editor/live/client';
import type { LiveView } from '@/lib/editor/live/protocol';
import type { Editor } from '@/lib/editor/store';
import { createLiveReader, type LiveReader } from './liveReader';

/** Widths that hold until the table knows its own. */
const FIRST_WIDTH_PX = 360;
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

/**
 * The worker of this table. What the views show follows the session without a render: symbol, ink and zoom are told to it at once,
 * widths when the layout changes.
 */
export function useTableLive(editor: Editor): {
  client: LiveClient;
  reader: LiveReader;
  setLayout: (layout: TableLayout) => void;
} {
  const widths = useMemo(() => ({ time: FIRST_WIDTH_PX, spectrum: FIRST_WIDTH_PX }), []);
  const firstView = useMemo(() => viewOf(editor, widths), [editor, widths]);
  const client = useLiveSynthesis(editor, firstView);
  const reader = useMemo(() => createLiveReader(editor, client), [editor, client]);
  useEffect(() => {
    client.setView(viewOf(editor, widths));
    return editor.session.subscribe((state, before) => {
      const isSame =
        state.viewport === before.viewport && state.chosenSymbol === before.chosenSymbol && state.ink === before.ink;
      if (!isSame) client.setView(viewOf(editor, widths));
    });
  }, [client, editor, widths]);
  const setLayout = useMemo(
    () => (layout: TableLayout) => {
      widths.time = Math.max(16, Math.round((layout.time?.width ?? widths.time + TIME_SCALE_PX) - TIME_SCALE_PX));
      widths.spectrum = Math.max(16, Math.round(layout.spectrum?.width ?? layout.grid.width));
      client.setView(viewOf(editor, widths));
    },
    [client, editor, widths],
  );
  return { client, reader, setLayout };
}
