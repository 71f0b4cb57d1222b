import { performOutcome } from '../commands/outcome';
import { planPick } from '../commands/paint';
import { isInside } from '../kernels/hitTest';
import { panViewport } from '../kernels/viewport';
import type { Tool, ToolPoint } from './tool';

/** Takes the ink under the pointer, at the press and while it moves; cancel gives the ink before back. */
export const pickTool: Tool = (editor, start) => {
  const { ink, cursor, chosenSymbol } = editor.session.getState();
  const pick = (point: ToolPoint) => {
    if (isInside(editor.document.settings, point.cell)) performOutcome(editor, planPick(editor, point.cell));
  };
  pick(start);
  return { move: pick, up() {}, cancel: () => editor.set({ ink, cursor, chosenSymbol }) };
};

/** Drags the drawing; cancel puts it back. */
export const panTool: Tool = (editor, start) => {
  const { viewport } = editor.session.getState();
  let last = start.at;
  return {
    move({ at }) {
      const now = editor.session.getState().viewport;
      editor.set({ viewport: panViewport(now, editor.document.settings, at.xPx - last.xPx, at.yPx - last.yPx) });
      last = at;
    },
    up() {},
    cancel: () => editor.set({ viewport }),
  };
};
