import { cellUnder, hitTest, rectOnScreen } from '@/lib/editor/kernels/hitTest';
import {
  clampViewport,
  fitViewport,
  panViewport,
  pinchViewport,
  resizeViewport,
  revealCell,
  turnViewport,
  visibleRange,
  zoomToRect,
  zoomViewport,
} from '@/lib/editor/kernels/viewport';
import type { Viewport } from '@/lib/editor/types';

const grid = { fftSize: 2048, symbolCount: 140 };
const start: Viewport = {
  widthPx: 800,
  heightPx: 350,
  firstPosition: 700,
  firstSymbol: 40,
  subcarrierPx: 4,
  symbolPx: 20,
  turned: false,
};
const turned: Viewport = { ...start, turned: true };

function documentPoint(view: Viewport, xPx: number, yPx: number): [number, number] {
  return view.turned
    ? [view.firstPosition + (view.heightPx - yPx) / view.subcarrierPx, view.firstSymbol + xPx / view.symbolPx]
    : [view.firstPosition + xPx / view.subcarrierPx, view.firstSymbol + yPx / view.symbolPx];
}

describe.each([
  ['upright', start],
  ['turned', turned],
])('viewport, axes %s', (_, view) => {
  it('keeps the document point under the pointer while zooming', () => {
    const at = { xPx: 321, yPx: 123 };
    for (const [alongPx, acrossPx] of [
      [1.7, 1],
      [0.8, 0.9],
      [1.1, 1.3],
    ] as const) {
      const zoomed = zoomViewport(view, grid, at, alongPx, acrossPx);
      const [p0, l0] = documentPoint(view, at.xPx, at.yPx);
      const [p1, l1] = documentPoint(zoomed, at.xPx, at.yPx);
      expect(p1).toBeCloseTo(p0, 9);
      expect(l1).toBeCloseTo(l0, 9);
      expect(zoomed.subcarrierPx).toBeCloseTo(view.subcarrierPx * alongPx, 9);
    }
  });

  it('carries a pinch: the middle point goes along, the spread zooms', () => {
    const from = [
      { xPx: 100, yPx: 100 },
      { xPx: 300, yPx: 200 },
    ] as const;
    const to = [
      { xPx: 120, yPx: 110 },
      { xPx: 420, yPx: 260 },
    ] as const;
    const pinched = pinchViewport(view, grid, from, to);
    expect(pinched.subcarrierPx).toBeCloseTo(view.subcarrierPx * 1.5, 9);
    const before = documentPoint(view, 200, 150);
    const after = documentPoint(pinched, 270, 185);
    expect(after[0]).toBeCloseTo(before[0], 9);
    expect(after[1]).toBeCloseTo(before[1], 9);
  });

  it('follows the pointer when panned', () => {
    const panned = panViewport(view, grid, 40, -30);
    expect(documentPoint(panned, 240, 170)).toEqual(documentPoint(view, 200, 200));
  });

  it('finds the cell that it draws', () => {
    const cell = { position: 730, symbol: 44 };
    const box = rectOnScreen(view, { positionFrom: 730, positionTo: 730, symbolFrom: 44, symbolTo: 44 });
    const middle = { xPx: box.xPx + box.widthPx / 2, yPx: box.yPx + box.heightPx / 2 };
    expect(cellUnder(view, middle)).toEqual(cell);
    expect(hitTest(view, grid, middle)).toEqual(cell);
    expect(
      hitTest({ ...view, firstPosition: -100 }, grid, view.turned ? { xPx: 0, yPx: 349 } : { xPx: 0, yPx: 0 }),
    ).toBeNull();
  });

  it('shows the whole band when fitted, and never beyond the edges', () => {
    const fitted = fitViewport(view, grid);
    expect(visibleRange(fitted, grid)).toMatchObject({ positionFrom: 0, positionTo: 2048, symbolFrom: 0 });
    const out = zoomViewport(fitted, grid, { xPx: 5, yPx: 5 }, 0.1, 0.1);
    expect(out.subcarrierPx).toBeCloseTo(fitted.subcarrierPx, 12);
    const far = panViewport(view, grid, 1e6, 1e6);
    const range = visibleRange(far, grid);
    expect(range.positionFrom >= 0 && range.positionTo <= 2048 && range.symbolFrom >= 0).toBe(true);
    expect(clampViewport(far, grid)).toEqual(far);
  });

  it('holds a zoom to a block wholly in view', () => {
    const rect = { positionFrom: 900, positionTo: 950, symbolFrom: 10, symbolTo: 20 };
    const range = visibleRange(zoomToRect(view, grid, rect), grid);
    expect(range.positionFrom).toBeLessThanOrEqual(900);
    expect(range.positionTo).toBeGreaterThanOrEqual(951);
    expect(range.symbolFrom).toBeLessThanOrEqual(10);
    expect(range.symbolTo).toBeGreaterThanOrEqual(21);
  });

  it('brings a cell into view with the least move', () => {
    expect(revealCell(view, grid, 710, 42)).toBe(view);
    const left = revealCell(view, grid, 100, 42);
    expect(left.firstPosition).toBe(100);
    const right = revealCell(view, grid, 1500, 42);
    expect(visibleRange(right, grid).positionTo).toBeCloseTo(1501, 9);
  });

  it('keeps its middle when resized and when turned twice', () => {
    const lengthOf = (v: Viewport) => (v.turned ? v.heightPx : v.widthPx);
    const middle = (v: Viewport) => v.firstPosition + lengthOf(v) / v.subcarrierPx / 2;
    expect(middle(resizeViewport(view, grid, 640, 300))).toBeCloseTo(middle(view), 9);
    const twice = turnViewport(turnViewport(view, grid), grid);
    expect(middle(twice)).toBeCloseTo(middle(view), 9);
    expect(twice.turned).toBe(view.turned);
  });
});
