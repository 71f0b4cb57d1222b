import { indexRefusal } from '../indexRule';
import { strokeSpans } from '../kernels/brush';
import type { Tool } from './tool';

/** Paints under the pointer while it is pressed; a refused cell takes the whole stroke back. */
export const brushTool: Tool = (editor, start) => {
  const { ink, brush } = editor.session.getState();
  const grid = editor.document.settings;
  const gesture = editor.beginGesture('Paint');
  let last = start.cell;
  let isRefused = false;

  function paint(to: typeof last): void {
    if (isRefused) return;
    const spans = strokeSpans(last, to, brush, grid);
    last = to;
    const refused = indexRefusal(editor.document, spans, ink);
    if (refused === null) return gesture.paintMore(spans, ink);
    isRefused = true;
    gesture.cancel();
    editor.set({ notice: refused });
  }

  editor.set({ notice: null, cursor: clampCell(start.cell, grid), selection: null });
  paint(start.cell);
  return {
    move: (to) => paint(to.cell),
    up() {
      const cursor = clampCell(last, grid);
      editor.set({ cursor, chosenSymbol: cursor.symbol });
      gesture.commit();
    },
    cancel: () => gesture.cancel(),
  };
};

function clampCell(
  cell: { position: number; symbol: number },
  grid: { fftSize: number; symbolCount: number },
): { position: number; symbol: number } {
  return {
    position: Math.min(Math.max(cell.position, 0), grid.fftSize - 1),
    symbol: Math.min(Math.max(cell.symbol, 0), grid.symbolCount - 1),
  };
}
