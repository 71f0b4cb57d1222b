import { cellUnder, hitTest } from '../kernels/hitTest';
import { panViewport, pinchViewport, zoomViewport } from '../kernels/viewport';
import type { Editor } from '../store';
import type { CellPoint, ScreenPoint, ToolName } from '../types';
import { combTool, rectangleTool } from './areaTool';
import { brushTool } from './brushTool';
import type { Drag, Tool, ToolPoint } from './tool';
import { panTool, pickTool } from './viewTools';

export interface PointerInput extends ScreenPoint {
  pointerId: number;
  kind: 'mouse' | 'touch' | 'pen';
  /** 0 main, 1 middle (pans), others mean nothing here. */
  button: number;
}

export interface WheelInput extends ScreenPoint {
  dxPx: number;
  dyPx: number;
  ctrlKey: boolean;
  shiftKey: boolean;
  altKey: boolean;
}

export type ToolPhase = 'idle' | 'pointing' | 'dragging' | 'pinching';

/** Pointers and wheel to tools and viewport; the canvas hands raw events in and knows no tool. */
export interface ToolMachine {
  pointerDown(input: PointerInput): void;
  pointerMove(input: PointerInput): void;
  pointerUp(input: PointerInput): void;
  /** The system took the pointer away. */
  pointerCancel(pointerId: number): void;
  /** The pointer left the canvas without being pressed. */
  pointerLeave(): void;
  /**
   * Wheel or trackpad: zooms the subcarriers at the pointer; with Ctrl (a trackpad's pinch) both axes, with Alt the
   * symbols alone; with Shift, and sideways, it moves the drawing.
   */
  wheel(input: WheelInput): void;
  /** Takes back the stroke under way; false when there was none. */
  cancel(): boolean;
  phase(): ToolPhase;
  /** The cell under a pointer that is not pressed, or being dragged; null outside of the grid. */
  hover(): CellPoint | null;
}

export interface ToolMachineOptions {
  /** A single finger moves the drawing instead of painting (a person's choice). */
  oneFingerMoves?: () => boolean;
  onHover?: (cell: CellPoint | null) => void;
}

const TOOLS: Record<ToolName, Tool> = {
  brush: brushTool,
  rectangle: rectangleTool,
  comb: combTool,
  pick: pickTool,
  pan: panTool,
};

/** One notch of a usual mouse wheel is 100 px: a quarter closer. */
const ZOOM_PER_PX = 1.25 ** (1 / 100);

export function createToolMachine(editor: Editor, options: ToolMachineOptions = {}): ToolMachine {
  const pointers = new Map<number, ScreenPoint>();
  let phase: ToolPhase = 'idle';
  let drag: Drag | null = null;
  let hovered: CellPoint | null = null;

  const view = () => editor.session.getState().viewport;
  const grid = () => editor.document.settings;
  const pointOf = ({ xPx, yPx }: ScreenPoint): ToolPoint => ({
    at: { xPx, yPx },
    cell: cellUnder(view(), { xPx, yPx }),
  });

  function setHover(cell: CellPoint | null): void {
    if (cell?.position === hovered?.position && cell?.symbol === hovered?.symbol) return;
    hovered = cell;
    options.onHover?.(cell);
  }

  function endDrag(how: 'up' | 'cancel'): void {
    const ended = drag;
    drag = null;
    phase = 'idle';
    ended?.[how]();
  }

  function toolFor(input: PointerInput): Tool | null {
    if (input.button === 1) return panTool;
    if (input.button !== 0) return null;
    if (input.kind === 'touch' && options.oneFingerMoves?.()) return panTool;
    return TOOLS[editor.session.getState().tool];
  }

  function firstTwo(): [ScreenPoint, ScreenPoint] {
    const [a, b] = [...pointers.values()];
    return [a!, b!];
  }

  function lift(pointerId: number, how: 'up' | 'cancel'): void {
    if (!pointers.delete(pointerId)) return;
    // After a pinch the finger that stays paints nothing: painting begins with a new press.
    if (phase === 'pinching') phase = pointers.size >= 2 ? 'pinching' : 'idle';
    else endDrag(how);
  }

  return {
    pointerDown(input) {
      pointers.set(input.pointerId, { xPx: input.xPx, yPx: input.yPx });
      if (pointers.size >= 2) {
        endDrag('cancel');
        phase = 'pinching';
        setHover(null);
        return;
      }
      const tool = toolFor(input);
      if (!tool) return;
      drag = tool(editor, pointOf(input));
      phase = drag ? 'pointing' : 'idle';
      setHover(hitTest(view(), grid(), input));
    },
    pointerMove(input) {
      const pressed = pointers.get(input.pointerId);
      if (phase === 'pinching' && pressed) {
        const from = firstTwo();
        pointers.set(input.pointerId, { xPx: input.xPx, yPx: input.yPx });
        editor.set({ viewport: pinchViewport(view(), grid(), from, firstTwo()) });
        return;
      }
      if (pressed) {
        pointers.set(input.pointerId, { xPx: input.xPx, yPx: input.yPx });
        if (drag) {
          phase = 'dragging';
          drag.move(pointOf(input));
        }
      }
      setHover(hitTest(view(), grid(), input));
    },
    pointerUp: (input) => lift(input.pointerId, 'up'),
    pointerCancel: (pointerId) => lift(pointerId, 'cancel'),
    pointerLeave: () => setHover(null),
    wheel({ xPx, yPx, dxPx, dyPx, ctrlKey, shiftKey, altKey }) {
      if (phase !== 'idle') return;
      const isTurned = view().turned;
      if (shiftKey) {
        // Browsers turn a wheel with Shift sideways: either way it goes along the symbols.
        const by = -(dyPx !== 0 ? dyPx : dxPx);
        editor.set({ viewport: panViewport(view(), grid(), isTurned ? by : 0, isTurned ? 0 : by) });
        return;
      }
      const factor = ZOOM_PER_PX ** -dyPx;
      const zoomed = zoomViewport(view(), grid(), { xPx, yPx }, altKey ? 1 : factor, altKey || ctrlKey ? factor : 1);
      editor.set({ viewport: dxPx === 0 ? zoomed : panViewport(zoomed, grid(), -dxPx, 0) });
    },
    cancel() {
      if (!drag) return false;
      endDrag('cancel');
      return true;
    },
    phase: () => phase,
    hover: () => hovered,
  };
}
