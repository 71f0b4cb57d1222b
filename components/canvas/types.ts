import type { LiveResult } from '@/lib/editor/live/protocol';
import type { CellPoint, CellRect } from '@/lib/editor/types';
import type { Editor } from '@/lib/editor/store';
import type { Rect } from './draw/shapes';

/** Where each part of the table stands on its one canvas, in px of the canvas. A part that is not shown is null. */
export interface TableLayout {
  width: number;
  height: number;
  /** The plot area of the grid; symbol numbers stand left of it, up to `numbersWidth`. */
  grid: Rect;
  numbersWidth: number;
  /** Peak dots beside the symbols' rows. */
  peaks: Rect | null;
  /** The straightedge's whole bar; its scale lies over the grid's columns. */
  straightedge: Rect;
  /** A phone's strip of the whole band. */
  band: Rect | null;
  /** The spectrum's plot area: on a wide screen the grid's own columns. */
  spectrum: Rect | null;
  time: Rect | null;
  lens: Rect | null;
  constellation: Rect | null;
  ccdf: Rect | null;
}

/** What a canvas draws that neither document nor session holds. */
export interface TableLive {
  /** The newest answer, or null before the first. */
  result: LiveResult | null;
  /** PAPR of each symbol before the peak was lowered, to stand hollow beside the dots; null: nothing to compare with. */
  peaksBefore: Float32Array | null;
  /** The answer is older than the document. */
  isStale: boolean;
}

/** A reading of the canvas for the page: the cell under the pointer. */
export type HoverListener = (cell: CellPoint | null) => void;

export interface TableCanvasHandle {
  /** Draws again in the next frame. */
  redraw(): void;
  /** Takes back the stroke under way; false when there was none. */
  cancelStroke(): boolean;
}

/** Counters for tests: frames drawn, script time a frame, and the state that the newest frame shows. */
export interface FrameProbe {
  frames: number;
  scriptMs: number[];
  shownChangeCount: number;
  shownLiveChangeCount: number;
}

export interface TableCanvasProps {
  editor: Editor;
  layout: TableLayout;
  live: { get(): TableLive; subscribe(listener: () => void): () => void };
  /** Strokes are refused: a revision that cannot change, or a person who only looks. */
  readOnly: boolean;
  oneFingerMoves: boolean;
  /** The block that a form would paint, outlined. */
  preview: CellRect | null;
  onHover?: HoverListener;
  /** A sideways swipe over the views (a phone's pages): −1 back, 1 on. */
  onSwipe?: (step: -1 | 1) => void;
  label: string;
  handle?: (handle: TableCanvasHandle | null) => void;
  probe?: FrameProbe | null;
}
