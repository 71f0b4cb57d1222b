import { useEffect, useMemo, useState, type ReactNode } from 'react';
import { StyleSheet, View } from 'react-native';
import { CanvasGate } from '@/components/canvas/CanvasGate';
import { Text } from '@/components/ui/Text';
import { color } from '@/components/ui/theme';
import { EmptyNote } from './EmptyNote';
import { BLOCK_ROWS } from './figureWords';
import { MarginColumn, SpectrumFigures } from './MarginColumn';
import { SentenceForm } from './SentenceForm';
import { SplitEdge } from './SplitEdge';
import type { TableCanvas } from './tableCanvas';
import type { TableContext } from './tableContext';
import { GRID_SHARE, PAGED_BELOW_PX, widePlaces } from './tableLayout';
import { useSize } from './useSize';
import { useViewportSize } from './useViewport';

/** Sheet line, numbers and trough stand round this: the main column and the margin, on one canvas. */
export function WideTable({
  table,
  canvas,
  fallback,
}: {
  table: TableContext;
  canvas: TableCanvas;
  fallback: ReactNode;
}) {
  const [size, onLayout] = useSize();
  const [gridShare, setGridShare] = useState(GRID_SHARE);
  const isPaged = size.pageHeight < PAGED_BELOW_PX;
  const page = isPaged ? (table.page === 'spectrum' ? 'time' : table.page) : null;
  const { width, height } = size;
  const places = useMemo(
    () => widePlaces({ width, height, gridShare, page, figureRows: BLOCK_ROWS }),
    [width, height, gridShare, page],
  );
  const { layout } = places;
  useViewportSize(table.editor, width > 0 ? layout.grid.width : 0, layout.grid.height, false);
  const { setLayout } = table;
  useEffect(() => {
    if (width > 0) setLayout(layout);
  }, [setLayout, layout, width]);
  return (
    <View id="table" style={styles.table} onLayout={onLayout}>
      {width > 0 ? (
        <>
          <CanvasGate {...canvas} editor={table.editor} live={table.live} layout={layout} fallback={fallback} />
          <EmptyNote table={table} layout={layout} />
          {table.rights.canDraw ? <SentenceForm table={table} width={places.mainWidth} /> : null}
          <Text variant="label" weight={400} tone="quiet" style={[styles.rows, { top: layout.grid.y - 17 }]}>
            symbol
          </Text>
          {layout.peaks ? (
            <Text
              variant="label"
              weight={400}
              tone="quiet"
              style={[styles.peaks, { left: layout.peaks.x, width: layout.peaks.width, top: layout.grid.y - 17 }]}
            >
              peak, dB
            </Text>
          ) : null}
          <SplitEdge
            x={layout.grid.x}
            y={places.edgeY}
            width={layout.grid.width}
            value={gridShare}
            onDrag={(y) => setGridShare(places.shareAt(y))}
            onStep={(steps) => setGridShare((share) => Math.max(0.2, Math.min(0.8, share + steps * 0.02)))}
            onRestore={() => setGridShare(GRID_SHARE)}
          />
          <View id="views" role="region" aria-label="Views" style={styles.views} {...({ tabIndex: -1 } as object)}>
            <SpectrumFigures table={table} places={places} />
            <MarginColumn table={table} places={places} />
          </View>
        </>
      ) : null}
    </View>
  );
}

const styles = StyleSheet.create({
  table: { flex: 1, minHeight: 0, overflow: 'hidden', backgroundColor: color.surface.desk },
  rows: { position: 'absolute', left: 20, width: 40, textAlign: 'right' },
  peaks: { position: 'absolute', textAlign: 'center' },
  views: { position: 'absolute', left: 0, top: 0, right: 0, bottom: 0, pointerEvents: 'box-none' },
});
