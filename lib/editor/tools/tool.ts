import type { Editor } from '../store';
import type { CellPoint, ScreenPoint } from '../types';

/** Where the pointer is, in pixels of the plot area and as the cell under it (which may lie outside of the grid). */
export interface ToolPoint {
  at: ScreenPoint;
  cell: CellPoint;
}

/** A drag under way. Every state answers cancel. */
export interface Drag {
  move(to: ToolPoint): void;
  up(): void;
  cancel(): void;
}

/** A tool begins a drag at a press; null where a press means nothing. */
export type Tool = (editor: Editor, start: ToolPoint) => Drag | null;
