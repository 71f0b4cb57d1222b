import type { MarkName } from './inkStyle';

/** A mark as plain shapes in px from the cell's upper left corner; filled dots, stroked lines and rings, all in the mark's colour. */
export type MarkShape =
  | { shape: 'dot'; xPx: number; yPx: number; radiusPx: number }
  | { shape: 'line'; x1Px: number; y1Px: number; x2Px: number; y2Px: number; strokePx: number }
  | { shape: 'ring'; xPx: number; yPx: number; radiusPx: number; strokePx: number };

/** Cells below this width or height show their fill alone (reserved keeps its hatch). */
export const MARK_CELL_PX_LEAST = 10;
const MARK_PX_MOST = 14;
const BARE_POINT_CELL_PX = 18;
const PIP_PX = 2;
const HATCH_PITCH_PX = 4;

/** Pip places in quarters of the mark from its middle, laid like a die. */
const DIE: Record<string, readonly (readonly [number, number])[]> = {
  'pips-1': [[0, 0]],
  'pips-2': [
    [-1, 1],
    [1, -1],
  ],
  'pips-3': [
    [-1, 1],
    [0, 0],
    [1, -1],
  ],
  'pips-4': [
    [-1, -1],
    [1, -1],
    [-1, 1],
    [1, 1],
  ],
  'pips-5': [
    [-1, -1],
    [1, -1],
    [0, 0],
    [-1, 1],
    [1, 1],
  ],
  'pips-6': [
    [-1, -1.2],
    [1, -1.2],
    [-1, 0],
    [1, 0],
    [-1, 1.2],
    [1, 1.2],
  ],
};

function pips(name: string, xPx: number, yPx: number, sizePx: number): MarkShape[] {
  const quarter = sizePx / 4;
  const radiusPx = Math.max(PIP_PX / 2, sizePx / 14);
  return DIE[name]!.map(([dx, dy]) => ({
    shape: 'dot',
    xPx: xPx + dx * quarter,
    yPx: yPx + dy * quarter,
    radiusPx,
  }));
}

/** Strokes rising to the right at 45° over the whole cell; cells of one pitch grid join without a seam when given their place. */
function hatch(widthPx: number, heightPx: number, originPx: number): MarkShape[] {
  const shapes: MarkShape[] = [];
  const diagonal = HATCH_PITCH_PX * Math.SQRT2;
  // Lines x + y = c, from c = 0 (upper left) to c = width + height, on the grid's own pitch.
  const first = diagonal - (((originPx % diagonal) + diagonal) % diagonal);
  for (let c = first; c < widthPx + heightPx; c += diagonal) {
    const x1Px = Math.max(0, c - heightPx);
    const x2Px = Math.min(widthPx, c);
    shapes.push({ shape: 'line', x1Px, y1Px: c - x1Px, x2Px, y2Px: c - x2Px, strokePx: 1 });
  }
  return shapes;
}

/**
 * The mark of a cell of this size. `originPx` is the cell's x + y on the drawing (for the hatch alone). Cells below
 * 10 px give no shapes but the hatch's.
 */
export function cellMark(name: MarkName, widthPx: number, heightPx: number, originPx = 0): MarkShape[] {
  if (name === 'hatch') return hatch(widthPx, heightPx, originPx);
  const least = Math.min(widthPx, heightPx);
  if (least < MARK_CELL_PX_LEAST) return [];
  const sizePx = Math.min(least, MARK_PX_MOST);
  const xPx = widthPx / 2;
  const yPx = heightPx / 2;
  const half = sizePx / 4;
  const strokePx = Math.max(1.5, sizePx / 8);
  switch (name) {
    case 'bare':
      return least >= BARE_POINT_CELL_PX ? [{ shape: 'dot', xPx, yPx, radiusPx: 0.5 }] : [];
    case 'dash':
      return [{ shape: 'line', x1Px: xPx - half, y1Px: yPx, x2Px: xPx + half, y2Px: yPx, strokePx }];
    case 'slant':
      return [{ shape: 'line', x1Px: xPx - half, y1Px: yPx + half, x2Px: xPx + half, y2Px: yPx - half, strokePx }];
    case 'tooth': {
      const up = 0.35 * sizePx;
      return [
        { shape: 'line', x1Px: xPx, y1Px: yPx - up, x2Px: xPx, y2Px: yPx + up, strokePx },
        { shape: 'line', x1Px: xPx - half * 0.8, y1Px: yPx + up, x2Px: xPx + half * 0.8, y2Px: yPx + up, strokePx },
      ];
    }
    case 'ring':
      return [{ shape: 'ring', xPx, yPx, radiusPx: (0.45 * sizePx) / 2, strokePx }];
    default:
      return pips(name, xPx, yPx, sizePx);
  }
}
