import type { Skia } from '@shopify/react-native-skia';
import { themes } from '@/components/ui/tokens';
import { differingPixels } from './budget';
import { drawn, loadHeadlessSkia, pixelAt, readFaces } from './skia';

let mockSkia: typeof Skia;
jest.mock('@shopify/react-native-skia', () => ({
  ...jest.requireActual<object>('@shopify/react-native-skia/lib/commonjs/skia/types'),
  get Skia() {
    return mockSkia;
  },
}));

/* eslint-disable @typescript-eslint/no-require-imports -- loaded behind the mock, once the engine is there */
const load = () => ({
  ...(require('@/components/canvas/draw/scope') as typeof import('@/components/canvas/draw/scope')),
  ...(require('@/components/canvas/draw/gridImages') as typeof import('@/components/canvas/draw/gridImages')),
  ...(require('@/components/canvas/draw/drawGrid') as typeof import('@/components/canvas/draw/drawGrid')),
  ...(require('@/components/canvas/draw/drawAxes') as typeof import('@/components/canvas/draw/drawAxes')),
  ...(require('@/components/canvas/draw/drawOverlay') as typeof import('@/components/canvas/draw/drawOverlay')),
  ...(require('@/components/canvas/plots/timePlot') as typeof import('@/components/canvas/plots/timePlot')),
  ...(require('@/components/canvas/plots/ccdfPlot') as typeof import('@/components/canvas/plots/ccdfPlot')),
});
/* eslint-enable @typescript-eslint/no-require-imports */

/** Pixels that may differ from a kept picture: 0.5 %. */
const BUDGET = 0.005;
const STYLES = [
  'null',
  'bpsk',
  'pi2bpsk',
  'qpsk',
  'qam16',
  'qam64',
  'qam256',
  'qam1024',
  'qam4096',
  'pilot',
  'tone',
  'reserved',
] as const;

let kit: ReturnType<typeof load>;
beforeAll(async () => {
  mockSkia = await loadHeadlessSkia();
  kit = load();
}, 60_000);

function gridOf(fftSize: number, symbolCount: number, inkOf: (position: number, symbol: number) => number) {
  const cells = new Uint8Array(fftSize * symbolCount);
  for (let l = 0; l < symbolCount; l++) for (let p = 0; p < fftSize; p++) cells[l * fftSize + p] = inkOf(p, l);
  return { cells, fftSize, symbolCount };
}

function picture(
  theme: 'paper' | 'night',
  grid: ReturnType<typeof gridOf>,
  cellPx: number,
  rowPx: number,
  turned = false,
) {
  const colors = themes[theme] as (typeof themes)['paper'];
  const fills = { styles: STYLES, pixels: Uint32Array.from(STYLES, (style) => kit.pixelOf(colors.cell[style].fill)) };
  const along = Math.round(grid.fftSize * cellPx);
  const across = grid.symbolCount * rowPx;
  const [width, height] = turned ? [across, along] : [along, across];
  const view = {
    widthPx: width,
    heightPx: height,
    firstPosition: 0,
    firstSymbol: 0,
    subcarrierPx: cellPx,
    symbolPx: rowPx,
    turned,
  };
  const scope = kit.createDrawScope(readFaces());
  const late = kit.createLateDisposal();
  const range = { positionFrom: 0, positionTo: grid.fftSize, symbolFrom: 0, symbolTo: grid.symbolCount };
  const reduced =
    cellPx < 1
      ? kit.createReducer(late).image(grid, fills, {
          firstPosition: 0,
          cellPx,
          columns: along,
          symbolFrom: 0,
          symbolTo: grid.symbolCount,
          rowsMost: height,
          toothPx: 2,
        })
      : null;
  const tiles = reduced ? [] : kit.createTileStore(late).shown(grid, fills, range);
  return {
    colors,
    drawn: drawn(mockSkia, width, height, (canvas) =>
      kit.drawGrid(canvas, scope, { grid, fills, view, tiles, reduced, density: 1, themeName: theme }, colors),
    ),
  };
}

describe('the grid', () => {
  const everyInk = gridOf(12, 2, (p) => p);

  test.each(['paper', 'night'] as const)('marks every ink from 10 px, %s', (theme) => {
    const { drawn: made } = picture(theme, everyInk, 20, 22);
    const differing = differingPixels(mockSkia, `inks-${theme}`, made);
    expect(differing).toBeLessThanOrEqual(BUDGET * made.width * made.height);
  });

  test('shows fills alone below 10 px', () => {
    const { drawn: made, colors } = picture('paper', everyInk, 6, 8);
    expect(pixelAt(made, 3 * 6 + 3, 4)).toBe(colors.cell.qpsk.fill);
    expect(pixelAt(made, 9 * 6 + 3, 4)).toBe(colors.cell.pilot.fill);
  });

  test('keeps the hatch of reserved cells at every size, so that they are not taken for null', () => {
    const { drawn: made, colors } = picture(
      'paper',
      gridOf(64, 2, () => 11),
      0.5,
      10,
    );
    let marked = 0;
    for (let y = 0; y < 8; y++)
      for (let x = 0; x < made.width; x++) if (pixelAt(made, x, y) !== colors.cell.reserved.fill) marked++;
    expect(marked).toBeGreaterThan(made.width);
  });

  test('a pilot comb below one pixel a cell neither vanishes nor closes to a bar', () => {
    // Every 12th of 600 at 0.58 px: teeth stand 7 px apart and are 2 px wide.
    const comb = gridOf(600, 1, (p) => (p % 12 === 0 ? 9 : 3));
    const { drawn: made, colors } = picture('paper', comb, 0.5833, 20);
    let teeth = 0;
    for (let x = 0; x < made.width; x++) if (pixelAt(made, x, 8) === colors.cell.pilot.fill) teeth++;
    expect(teeth).toBe(100);
  });

  test('a tone keeps two pixels where pilots would keep one', () => {
    const { drawn: made, colors } = picture(
      'paper',
      gridOf(600, 1, (p) => (p === 300 ? 10 : 0)),
      0.2,
      20,
    );
    let wide = 0;
    for (let x = 0; x < made.width; x++) if (pixelAt(made, x, 8) === colors.cell.tone.fill) wide++;
    expect(wide).toBe(2);
  });

  test('turned, subcarriers run upwards and symbols to the right', () => {
    const { drawn: made, colors } = picture(
      'paper',
      gridOf(8, 2, (p, l) => (p === 0 && l === 1 ? 9 : 0)),
      6,
      20,
      true,
    );
    expect(pixelAt(made, 30, 8 * 6 - 4)).toBe(colors.cell.pilot.fill);
    expect(pixelAt(made, 10, 8 * 6 - 4)).toBe(colors.cell.null.fill);
    expect(pixelAt(made, 30, 3)).toBe(colors.cell.null.fill);
  });

  test('an edit makes the touched tile anew and leaves the others', () => {
    const grid = gridOf(2048, 600, () => 3);
    const fills = {
      styles: STYLES,
      pixels: Uint32Array.from(STYLES, (style) => kit.pixelOf(themes.paper.cell[style].fill)),
    };
    const store = kit.createTileStore(kit.createLateDisposal());
    const range = { positionFrom: 0, positionTo: 2048, symbolFrom: 0, symbolTo: 600 };
    const before = store.shown(grid, fills, range);
    expect(before).toHaveLength(2);
    grid.cells[5 * 2048 + 7] = 9;
    store.touch(5, 5);
    const after = store.shown(grid, fills, range);
    expect(after[0]!.image).not.toBe(before[0]!.image);
    expect(after[1]!.image).toBe(before[1]!.image);
  });
});

describe('axes and plots', () => {
  test('the straightedge names DC once, in bold, under the grid’s own columns', () => {
    const scope = kit.createDrawScope(readFaces());
    const view = {
      widthPx: 300,
      heightPx: 100,
      firstPosition: 474,
      firstSymbol: 0,
      subcarrierPx: 3,
      symbolPx: 20,
      turned: false,
    };
    const made = drawn(mockSkia, 340, 38, (canvas) =>
      kit.drawStraightedge(
        canvas,
        scope,
        { x: 0, y: 0, width: 340, height: 38 },
        { view, fftSize: 1024, spacingHz: 15000, plotX: 40, plotWidth: 300, reading: null },
        themes.paper,
      ),
    );
    expect(differingPixels(mockSkia, 'straightedge', made)).toBeLessThanOrEqual(BUDGET * 340 * 38);
    // Subcarrier 0 is position 512: its tick stands in the middle of its 3 px.
    expect(pixelAt(made, 40 + Math.round((512 - 474 + 0.5) * 3), 2)).toBe(themes.paper.canvas.ruleTick);
  });

  test('the selection is a dark line between two light ones: one stands out on every fill', () => {
    const scope = kit.createDrawScope(readFaces());
    const view = {
      widthPx: 80,
      heightPx: 80,
      firstPosition: 0,
      firstSymbol: 0,
      subcarrierPx: 10,
      symbolPx: 10,
      turned: false,
    };
    const made = drawn(mockSkia, 80, 80, (canvas) =>
      kit.outline(canvas, scope, themes.paper, view, { positionFrom: 2, positionTo: 4, symbolFrom: 2, symbolTo: 3 }),
    );
    expect([18, 19, 20].map((x) => pixelAt(made, x, 30))).toEqual([
      themes.paper.canvas.selectionLight,
      themes.paper.canvas.selectionDark,
      themes.paper.canvas.selectionLight,
    ]);
  });

  test('prefix and the tail it copies share one wash, joined by an arc', () => {
    const columns = 120;
    const max = Float32Array.from({ length: columns }, (_, c) => 1 + 0.5 * Math.sin(c));
    const min = max.map((value) => value * 0.2);
    const trace = {
      symbol: 0,
      prefixSamples: 16,
      usefulSamples: 104,
      from: -16,
      to: 104,
      envelope: { min, max },
      i: { min, max },
      q: { min, max },
      tail: { from: 88, to: 104 },
      peak: { at: 50, ratio: 1.5 },
      paprDb: 3.52,
    };
    const scope = kit.createDrawScope(readFaces());
    const block = { x: 0, y: 0, width: 263, height: 140 };
    const made = drawn(mockSkia, 263, 140, (canvas) => kit.drawTimePlot(canvas, scope, block, trace, themes.paper));
    const area = kit.timeArea(block);
    const washAt = (sample: number) =>
      pixelAt(made, Math.round(area.x + ((sample + 16) / 120) * area.width), area.y + 2);
    expect([washAt(-8), washAt(96)]).toEqual([themes.paper.wash.prefix, themes.paper.wash.prefix]);
    expect(washAt(20)).toBe(themes.paper.plot.background);
    expect(differingPixels(mockSkia, 'time', made)).toBeLessThanOrEqual(BUDGET * 263 * 140);
  });

  test('the CCDF stands beside the Gaussian curve', () => {
    const thresholdsDb = Float32Array.from({ length: 121 }, (_, i) => i / 10);
    const gaussian = thresholdsDb.map((db) => Math.exp(-(10 ** (db / 10))));
    const probability = thresholdsDb.map((db) => (db > 9 ? 0 : Math.exp(-(10 ** (db / 10)) * 1.2)));
    const scope = kit.createDrawScope(readFaces());
    const made = drawn(mockSkia, 260, 120, (canvas) =>
      kit.drawCcdf(
        canvas,
        scope,
        { x: 0, y: 0, width: 260, height: 120 },
        { thresholdsDb, probability, gaussian, atOneInThousandDb: 7.6 },
        themes.night as unknown as (typeof themes)['paper'],
      ),
    );
    expect(differingPixels(mockSkia, 'ccdf-night', made)).toBeLessThanOrEqual(BUDGET * 260 * 120);
  });
});
