import { Skia, type SkCanvas, type SkPicture } from '@shopify/react-native-skia';
import type { ThemeColors } from '@/components/ui/theme';
import { inkStyleOf } from '@/lib/drawing/inkStyle';
import { lowestOf } from '@/lib/editor/document';
import { createShownSettings, type Editor } from '@/lib/editor/store';
import type { CellPoint } from '@/lib/editor/types';
import { formatNumber } from '@/lib/drawing/quantities';
import { drawPeakDots, drawPeakScale, drawStraightedge, drawSymbolNumbers } from './draw/drawAxes';
import { drawBandStrip } from './draw/bandStrip';
import { drawGrid, seenCells } from './draw/drawGrid';
import { drawOverlay } from './draw/drawOverlay';
import { createLateDisposal, createReducer, createTileStore, type GridCells, type InkFills } from './draw/gridImages';
import { createDrawScope, pixelOf, type DrawScope } from './draw/scope';
import { fillRect, frame, type Rect } from './draw/shapes';
import type { FaceFiles } from './loadFaces';
import { drawCcdf } from './plots/ccdfPlot';
import { drawConstellation } from './plots/constellationPlot';
import { drawLens } from './plots/lensPlot';
import { drawSpectrum } from './plots/spectrumPlot';
import { drawTimePlot, timeArea } from './plots/timePlot';
import { bandRange } from './bandRange';
import type { FrameProbe, TableCanvasProps, TableLive } from './types';

/** What a frame is drawn from, read when it is drawn. */
export interface FrameInputs {
  props: TableCanvasProps;
  theme: ThemeColors;
  themeName: string;
  hover: CellPoint | null;
  hasFocus: boolean;
}

export interface TableEngine {
  /** Something changed: draws in the next animation frame, once. */
  invalidate(): void;
  dispose(): void;
}

interface PictureSink {
  setPicture(picture: SkPicture): void;
}

/** A part drawn once and kept until one of the values it was drawn from changes. */
interface KeptPart {
  from: readonly unknown[];
  picture: SkPicture;
}

const sameValues = (a: readonly unknown[], b: readonly unknown[]) =>
  a.length === b.length && a.every((value, i) => Object.is(value, b[i]));

export function createTableEngine(
  sink: PictureSink,
  editor: Editor,
  faces: FaceFiles,
  read: () => FrameInputs,
): TableEngine {
  const scope = createDrawScope(faces);
  const late = createLateDisposal();
  const tiles = createTileStore(late);
  const reducer = createReducer(late);
  const bandReducer = createReducer(late);
  const parts = new Map<string, KeptPart>();
  const shownSettings = createShownSettings(editor);
  let fills: (InkFills & { from: readonly unknown[] }) | null = null;
  let frameRequest = 0;
  let lastPicture: SkPicture | null = null;
  let isDisposed = false;

  const stopListening = editor.onPatch((patch) => {
    for (const change of patch.changes) {
      if (change.kind === 'cells') {
        for (const row of change.rows) touch(row.symbol, row.symbol + row.symbols - 1);
      } else if (change.kind === 'size' || change.kind === 'tray') touch();
    }
  });

  function touch(from?: number, to?: number): void {
    for (const one of [tiles, reducer, bandReducer]) one.touch(from, to);
  }

  function fillsFor(theme: ThemeColors): InkFills {
    const { tray } = shownSettings();
    if (!fills || fills.from[0] !== tray || fills.from[1] !== theme) {
      const styles = tray.map(inkStyleOf);
      const pixels = new Uint32Array(256);
      styles.forEach((style, ink) => (pixels[ink] = pixelOf(theme.cell[style].fill)));
      fills = { styles, pixels, from: [tray, theme] };
      touch();
    }
    return fills;
  }

  /** Draws a part into the frame, from its kept picture where nothing changed. */
  function part(canvas: SkCanvas, name: string, from: readonly unknown[], draw: (canvas: SkCanvas) => void): void {
    let kept = parts.get(name);
    if (!kept || !sameValues(kept.from, from)) {
      const recorder = Skia.PictureRecorder();
      draw(recorder.beginRecording(Skia.XYWHRect(-64, -64, 8192, 8192)));
      const picture = recorder.finishRecordingAsPicture();
      recorder.dispose();
      if (kept) late.add(kept.picture);
      parts.set(name, (kept = { from, picture }));
    }
    canvas.drawPicture(kept.picture);
  }

  function drawFrame(canvas: SkCanvas, inputs: FrameInputs): TableLive {
    const { props, theme, themeName, hover, hasFocus } = inputs;
    const { layout, preview } = props;
    const state = editor.session.getState();
    const { viewport: view, changeCount, cursor, selection, chosenSymbol } = state;
    const { settings, cells } = editor.document;
    const { fftSize, symbolCount } = settings;
    const grid: GridCells = { cells, fftSize, symbolCount };
    const inks = fillsFor(theme);
    const density = Math.min(3, window.devicePixelRatio || 1);
    const live = props.live.get();
    const { result, peaksBefore, isStale } = live;
    const spacingHz = settings.subcarrierSpacingHz[0] / settings.subcarrierSpacingHz[1];
    const common = [theme, layout, view] as const;

    part(canvas, 'grid', [...common, changeCount, inks, density], (on) => {
      on.translate(layout.grid.x, layout.grid.y);
      const along = view.turned ? view.heightPx : view.widthPx;
      const { p0, p1, l0, l1 } = seenCells({ grid, view });
      const isReduced = view.subcarrierPx * density < 1 || view.symbolPx * density < 1;
      const reduced = isReduced
        ? reducer.image(grid, inks, {
            firstPosition: view.firstPosition,
            cellPx: view.subcarrierPx * density,
            columns: Math.round(along * density),
            symbolFrom: l0,
            symbolTo: l1,
            rowsMost: Math.max(1, Math.round((view.turned ? view.widthPx : view.heightPx) * density)),
            toothPx: 2 * density,
          })
        : null;
      const shown = isReduced
        ? []
        : tiles.shown(grid, inks, { positionFrom: p0, positionTo: p1, symbolFrom: l0, symbolTo: l1 });
      drawGrid(on, scope, { grid, fills: inks, view, tiles: shown, reduced, density, themeName }, theme);
      frame(on, scope.stroke(theme.rule.line, 1), { x: -1, y: -1, width: view.widthPx + 2, height: view.heightPx + 2 });
    });
    part(canvas, 'overlay', [...common, cursor, selection, hover, preview, hasFocus, fftSize], (on) => {
      on.translate(layout.grid.x, layout.grid.y);
      drawOverlay(
        on,
        scope,
        { view, cursor, selection, hover, preview, hasFocus, dcPosition: -lowestOf(fftSize) },
        theme,
      );
    });
    part(canvas, 'numbers', [...common, symbolCount, chosenSymbol, fftSize], (on) =>
      drawSymbolNumbers(on, scope, layout.grid, view, symbolCount, chosenSymbol, fftSize, theme),
    );
    const { peaks } = layout;
    if (peaks && result)
      part(canvas, 'peaks', [...common, result, peaksBefore, isStale], (on) =>
        drawPeakDots(
          on,
          scope,
          peaks,
          { view, symbolPaprDb: result.symbolPaprDb, before: peaksBefore, worst: result.worstSymbol, isStale },
          theme,
        ),
      );
    part(canvas, 'straightedge', [...common, fftSize, spacingHz, result, peaksBefore, hover], (on) => {
      const bar = layout.straightedge;
      const reading = hover && peaks ? readingOf(hover, fftSize, spacingHz) : null;
      drawStraightedge(
        on,
        scope,
        bar,
        { view, fftSize, spacingHz, plotX: layout.grid.x, plotWidth: layout.grid.width, reading },
        theme,
      );
      if (peaks && result && !reading && !view.turned)
        drawPeakScale(
          on,
          scope,
          { ...bar, x: peaks.x, width: peaks.width },
          { symbolPaprDb: result.symbolPaprDb, before: peaksBefore },
          theme,
        );
    });
    const { band } = layout;
    if (band)
      part(canvas, 'band', [...common, changeCount, inks, density], (on) => {
        const { from, to } = bandRange(grid, view);
        const middle = Math.floor(symbolCount / 2);
        const picture = bandReducer.image(grid, inks, {
          firstPosition: from,
          cellPx: (band.width / (to - from)) * density,
          columns: Math.round(band.width * density),
          symbolFrom: Math.max(0, middle - 1),
          symbolTo: Math.min(symbolCount, Math.max(0, middle - 1) + 2),
          rowsMost: 2,
          toothPx: density,
        });
        drawBandStrip(on, scope, band, { from, to, picture, view }, theme);
      });
    drawViews(canvas, inputs, live, grid, inks);
    return live;
  }

  function drawViews(
    canvas: SkCanvas,
    { props, theme, themeName }: FrameInputs,
    { result, isStale }: TableLive,
    grid: GridCells,
    inks: InkFills,
  ): void {
    const { layout } = props;
    const { viewport: view, cursor, changeCount } = editor.session.getState();
    const { spectrum, time, ccdf, constellation, lens } = layout;
    const veiled = (on: SkCanvas, area: Rect) => veil(on, scope, area, theme, isStale && result !== null);
    if (spectrum)
      part(canvas, 'spectrum', [theme, layout, view, result?.spectrum, isStale], (on) => {
        const along = view.turned ? view.heightPx : view.widthPx;
        const shown = { from: view.firstPosition, to: view.firstPosition + along / view.subcarrierPx };
        drawSpectrum(on, scope, spectrum, { trace: result?.spectrum ?? null, ...shown }, theme);
        veiled(on, spectrum);
      });
    if (time)
      part(canvas, 'time', [theme, layout, result?.time, isStale], (on) => {
        drawTimePlot(on, scope, time, result?.time ?? null, theme);
        veiled(on, timeArea(time));
      });
    if (ccdf)
      part(canvas, 'ccdf', [theme, layout, result?.ccdf, isStale], (on) => {
        drawCcdf(on, scope, ccdf, result?.ccdf ?? null, theme);
        veiled(on, ccdf);
      });
    if (constellation)
      part(canvas, 'constellation', [theme, layout, result?.constellation, isStale], (on) => {
        drawConstellation(on, scope, constellation, result?.constellation ?? null, theme);
        veiled(on, constellation);
      });
    if (lens)
      part(canvas, 'lens', [theme, layout, inks, cursor, changeCount], (on) =>
        drawLens(on, scope, lens, { grid, fills: inks, cursor, themeName }, theme),
      );
  }

  function paint(): void {
    frameRequest = 0;
    if (isDisposed) return;
    const startedMs = performance.now();
    const inputs = read();
    const { layout, probe } = inputs.props;
    const recorder = Skia.PictureRecorder();
    const live = drawFrame(recorder.beginRecording(Skia.XYWHRect(0, 0, layout.width, layout.height)), inputs);
    const picture = recorder.finishRecordingAsPicture();
    recorder.dispose();
    sink.setPicture(picture);
    if (lastPicture) late.add(lastPicture);
    lastPicture = picture;
    late.frame();
    if (probe) count(probe, startedMs, editor.session.getState().changeCount, live.result?.changeCount ?? -1);
  }

  return {
    invalidate() {
      if (frameRequest === 0 && !isDisposed) frameRequest = requestAnimationFrame(paint);
    },
    dispose() {
      isDisposed = true;
      if (frameRequest !== 0) cancelAnimationFrame(frameRequest);
      stopListening();
      for (const { picture } of parts.values()) picture.dispose();
      parts.clear();
      // The view may draw once more (a hidden page that comes back): it is left with an empty picture, not a freed one.
      sink.setPicture(emptyPicture());
      lastPicture?.dispose();
      tiles.dispose();
      reducer.dispose();
      bandReducer.dispose();
      late.flush();
      scope.dispose();
    },
  };
}

function emptyPicture(): SkPicture {
  const recorder = Skia.PictureRecorder();
  recorder.beginRecording(Skia.XYWHRect(0, 0, 1, 1));
  const picture = recorder.finishRecordingAsPicture();
  recorder.dispose();
  return picture;
}

/** A view that is older than the drawing is paled at once. */
function veil(canvas: SkCanvas, scope: DrawScope, area: Rect, theme: ThemeColors, isStale: boolean): void {
  if (isStale) fillRect(canvas, scope.fill(theme.plot.background, 0.5), area.x, area.y, area.width, area.height);
}

function readingOf({ position, symbol }: CellPoint, fftSize: number, spacingHz: number): [string, string] {
  const k = position + lowestOf(fftSize);
  return [`${formatNumber(k)}, ${symbol}`, `${formatNumber((k * spacingHz) / 1e6, 3, true)} MHz`];
}

/** The engine draws in a microtask queued by setPicture: the frame's script time ends behind it. */
function count(probe: FrameProbe, startedMs: number, changeCount: number, liveChangeCount: number): void {
  queueMicrotask(() => {
    probe.frames++;
    probe.shownChangeCount = changeCount;
    probe.shownLiveChangeCount = liveChangeCount;
    probe.scriptMs.push(performance.now() - startedMs);
    if (probe.scriptMs.length > 1000) probe.scriptMs.shift();
  });
}
