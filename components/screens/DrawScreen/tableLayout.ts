import type { TableLayout } from '@/components/canvas/CanvasGate';

export type ViewPage = 'time' | 'spectrum' | 'constellation' | 'ccdf' | 'figures';

/** Below this height of the page the margin column becomes pages. */
export const PAGED_BELOW_PX = 820;

const MARGIN_WIDTH = 412;
const EDGE = 20;
const GAP = 24;
const NUMBERS_WIDTH = 48;
const PEAKS_WIDTH = 96;
const GRID_TOP = 54;
const RULE_HEIGHT = 38;
const GRID_LEAST = 120;
const SPECTRUM_LEAST = 100;
const HEAD = 24;
/** The part of the height that the grid takes of grid and spectrum, until the edge between them is dragged. */
export const GRID_SHARE = 0.604;

/** Where the page's own elements stand beside the canvas, in the same px. */
export interface WidePlaces {
  layout: TableLayout;
  mainWidth: number;
  marginX: number;
  marginWidth: number;
  timeHead: number;
  cellsHead: number;
  ccdfHead: number;
  titleBlock: number;
  /** The margin's pages, where it is not tall enough for all; null otherwise. */
  pageTop: number | null;
  spectrumFigures: { x: number; y: number };
  /** The edge between grid and spectrum, and how the share follows a drag. */
  edgeY: number;
  shareAt(y: number): number;
}

export interface WideInput {
  width: number;
  height: number;
  gridShare: number;
  /** Set where the margin column shows one page at a time. */
  page: ViewPage | null;
  /** Rows of the title block. */
  figureRows: number;
}

const clamp = (value: number, least: number, most: number) => Math.max(least, Math.min(most, value));

/** The drawing table on a wide screen: main column with grid, straightedge and spectrum, margin column at the right. */
export function widePlaces({ width, height, gridShare, page, figureRows }: WideInput): WidePlaces {
  const mainWidth = Math.max(480, width - EDGE - GAP - MARGIN_WIDTH - EDGE);
  const marginX = EDGE + mainWidth + GAP;
  const gridX = EDGE + NUMBERS_WIDTH;
  const gridWidth = mainWidth - NUMBERS_WIDTH - 8 - PEAKS_WIDTH;
  const plots = Math.max(GRID_LEAST + SPECTRUM_LEAST, height - GRID_TOP - 3 - RULE_HEIGHT - 3 - 12);
  const gridHeight = clamp(Math.round(plots * gridShare), GRID_LEAST, plots - SPECTRUM_LEAST);
  const ruleY = GRID_TOP + gridHeight + 3;
  const spectrumY = ruleY + RULE_HEIGHT + 3;
  const blockHeight = figureRows * 45 + 3;
  const margin = { time: 0, cells: 0, ccdf: 0 };
  const rest = height - 8 - 3 * HEAD - 20 - blockHeight - 8;
  margin.time = Math.round(rest * 0.37);
  margin.cells = Math.round(rest * 0.34);
  margin.ccdf = rest - margin.time - margin.cells;
  const timeHead = 8;
  const cellsHead = timeHead + HEAD + margin.time + 8;
  const ccdfHead = cellsHead + HEAD + margin.cells + 8;
  const half = (MARGIN_WIDTH - 12) / 2;
  const pageTop = page ? 44 : null;
  const pageBlock = { x: marginX, y: 44 + HEAD, width: MARGIN_WIDTH, height: Math.max(100, height - 44 - HEAD - 12) };
  const all = page === null;
  const layout: TableLayout = {
    width,
    height,
    grid: { x: gridX, y: GRID_TOP, width: gridWidth, height: gridHeight },
    numbersWidth: NUMBERS_WIDTH,
    peaks: { x: gridX + gridWidth + 8, y: GRID_TOP, width: PEAKS_WIDTH, height: gridHeight },
    straightedge: { x: EDGE, y: ruleY, width: mainWidth, height: RULE_HEIGHT },
    band: null,
    spectrum: { x: gridX, y: spectrumY, width: gridWidth, height: plots - gridHeight },
    time: all
      ? { x: marginX, y: timeHead + HEAD, width: MARGIN_WIDTH, height: margin.time }
      : page === 'time'
        ? pageBlock
        : null,
    lens: all ? { x: marginX, y: cellsHead + HEAD, width: half, height: margin.cells } : null,
    constellation: all
      ? { x: marginX + half + 12, y: cellsHead + HEAD, width: half, height: margin.cells }
      : page === 'constellation'
        ? pageBlock
        : null,
    ccdf: all
      ? { x: marginX, y: ccdfHead + HEAD, width: MARGIN_WIDTH, height: margin.ccdf }
      : page === 'ccdf'
        ? pageBlock
        : null,
  };
  return {
    layout,
    mainWidth,
    marginX,
    marginWidth: MARGIN_WIDTH,
    timeHead,
    cellsHead,
    ccdfHead,
    titleBlock: ccdfHead + HEAD + margin.ccdf + 4,
    pageTop,
    spectrumFigures: { x: gridX + gridWidth + 12, y: spectrumY },
    edgeY: GRID_TOP + gridHeight,
    shareAt: (y) => clamp((y - GRID_TOP) / plots, GRID_LEAST / plots, 1 - SPECTRUM_LEAST / plots),
  };
}

export interface PhonePlaces {
  layout: TableLayout;
  tabsY: number;
  viewHeadY: number;
  view: { x: number; y: number; width: number; height: number };
}

const VIEW_HEAD = 22;

/** A phone's (and tablet's) table: band strip, grid, straightedge, tabs, one view. */
export function phonePlaces(width: number, height: number, page: ViewPage): PhonePlaces {
  const viewHeight = clamp(Math.round(height * 0.292), 120, 320);
  const gridTop = 30;
  const gridHeight = Math.max(96, height - gridTop - 36 - 44 - viewHeight);
  const ruleY = gridTop + gridHeight;
  const tabsY = ruleY + 36;
  const viewHeadY = tabsY + 44 + 4;
  const view = { x: 12, y: viewHeadY + VIEW_HEAD, width: width - 24, height: viewHeight - VIEW_HEAD - 8 };
  const only = (one: ViewPage) => (page === one ? view : null);
  const spectrum = only('spectrum');
  return {
    layout: {
      width,
      height,
      grid: { x: 28, y: gridTop, width: width - 28, height: gridHeight },
      numbersWidth: 28,
      peaks: null,
      straightedge: { x: 0, y: ruleY, width, height: 36 },
      band: { x: 26, y: 6, width: width - 34, height: 16 },
      // The grid's own columns: what is painted stands above what it makes.
      spectrum: spectrum && { ...spectrum, x: 28, width: width - 28, height: spectrum.height + 4 },
      time: only('time'),
      lens: null,
      constellation: only('constellation'),
      ccdf: only('ccdf'),
    },
    tabsY,
    viewHeadY,
    view,
  };
}
