import { useEffect } from 'react';
import { readPreferences } from '@/components/ui/preferences';
import { clampViewport, resizeViewport, turnViewport } from '@/lib/editor/kernels/viewport';
import type { Editor } from '@/lib/editor/store';
import type { Viewport } from '@/lib/editor/types';

const PHONE_CELL_PX = 14;
const PHONE_SYMBOL_PX = { least: 18, most: 24 };
const SYMBOL_PX_LEAST = 12;
/** Margin at both sides of what is painted, so that the spectrum's shoulders are seen. */
const MARGIN_RATIO = 0.08;

/** Lowest and highest painted position; the whole axis where nothing is painted. */
function painted(editor: Editor): { from: number; to: number } {
  const { cells, settings } = editor.document;
  const { fftSize } = settings;
  let from = fftSize;
  let to = -1;
  for (let start = 0; start < cells.length; start += fftSize) {
    for (let p = 0; p < from; p++) if (cells[start + p] !== 0) from = p;
    for (let p = fftSize - 1; p > to; p--) if (cells[start + p] !== 0) to = p;
  }
  return to < 0 ? { from: 0, to: fftSize - 1 } : { from, to };
}

/** Where a drawing opens: wide, its painted band with all symbols that fit; on a phone cells large enough for their marks. */
function firstViewport(editor: Editor, view: Viewport, isPhone: boolean): Viewport {
  const { settings } = editor.document;
  const { from, to } = painted(editor);
  const span = to - from + 1;
  if (isPhone) {
    const middle = editor.session.getState().cursor.position + 0.5;
    const shown = view.widthPx / PHONE_CELL_PX;
    const fitting = view.heightPx / settings.symbolCount;
    const symbolPx = Math.min(Math.max(fitting, PHONE_SYMBOL_PX.least), PHONE_SYMBOL_PX.most);
    return clampViewport(
      {
        ...view,
        subcarrierPx: PHONE_CELL_PX,
        symbolPx,
        firstPosition: middle - shown / 2,
        firstSymbol: 0,
      },
      settings,
    );
  }
  const margin = Math.ceil(span * MARGIN_RATIO);
  const first = Math.max(0, from - margin);
  const last = Math.min(settings.fftSize, to + 1 + margin);
  return clampViewport(
    {
      ...view,
      subcarrierPx: view.widthPx / (last - first),
      symbolPx: Math.max(SYMBOL_PX_LEAST, view.heightPx / settings.symbolCount),
      firstPosition: first,
      firstSymbol: 0,
    },
    settings,
  );
}

/** Keeps the viewport at the size of the grid's area; the first size decides where the drawing opens. */
export function useViewportSize(editor: Editor, widthPx: number, heightPx: number, isPhone: boolean): void {
  useEffect(() => {
    if (widthPx <= 0 || heightPx <= 0) return;
    const { viewport } = editor.session.getState();
    if (viewport.widthPx === widthPx && viewport.heightPx === heightPx) return;
    const { settings } = editor.document;
    if (viewport.widthPx <= 0) {
      const first = firstViewport(editor, { ...viewport, widthPx, heightPx }, isPhone);
      editor.set({ viewport: readPreferences().axesTurned ? turnViewport(first, settings) : first });
      return;
    }
    // Rows that filled the old height fill the new one.
    const filled = Math.abs(viewport.symbolPx * settings.symbolCount - viewport.heightPx) < 1;
    const resized = resizeViewport(viewport, settings, widthPx, heightPx);
    const symbolPx = filled && !isPhone ? Math.max(SYMBOL_PX_LEAST, heightPx / settings.symbolCount) : resized.symbolPx;
    editor.set({ viewport: clampViewport({ ...resized, symbolPx }, settings) });
  }, [editor, widthPx, heightPx, isPhone]);
}

/** After a change of the grid's size the view is brought back inside, and rows that filled the height fill it again. */
export function useViewportOfDocument(editor: Editor, isPhone: boolean): void {
  useEffect(
    () =>
      editor.onPatch((patch) => {
        const sized = patch.changes.find((change) => change.kind === 'size');
        if (!sized || sized.kind !== 'size') return;
        const { viewport } = editor.session.getState();
        const { settings } = editor.document;
        const moved = Math.floor(sized.after.fftSize / 2) - Math.floor(sized.before.fftSize / 2);
        const filled = Math.abs(viewport.symbolPx * sized.before.symbolCount - viewport.heightPx) < 1;
        const symbolPx =
          filled && !isPhone ? Math.max(SYMBOL_PX_LEAST, viewport.heightPx / settings.symbolCount) : viewport.symbolPx;
        const next = { ...viewport, symbolPx, firstPosition: viewport.firstPosition + moved };
        editor.set({ viewport: clampViewport(next, settings) });
      }),
    [editor, isPhone],
  );
}
