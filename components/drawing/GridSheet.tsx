import { useId, useMemo } from 'react';
import { StyleSheet, View } from 'react-native';
import { color } from '@/components/ui/theme';
import type { WaveformContent } from '@/lib/synth';
import { gridRows } from './gridRuns';
import { Straightedge, type Band } from './Straightedge';
import { SpectrumTrace, type SpectrumLine } from './SpectrumTrace';
import { useWidth } from './useWidth';

/** The band of all painted cells with a margin, in positions; the whole band where nothing is painted. */
export function paintedBand(content: WaveformContent, marginRatio = 0.08): Band {
  const { fftSize, grid } = content;
  let first = fftSize;
  let last = -1;
  for (const row of grid.rows) {
    let at = 0;
    for (let i = 0; i < row.length; i += 2) {
      if (row[i + 1] !== 0) {
        first = Math.min(first, at);
        last = Math.max(last, at + row[i]! - 1);
      }
      at += row[i]!;
    }
  }
  if (last < first) return { from: 0, to: fftSize };
  const margin = Math.max(1, (last - first + 1) * marginRatio);
  return { from: Math.max(0, first - margin), to: Math.min(fftSize, last + 1 + margin) };
}

/** What is painted above what it makes, as pictures: grid, straightedge and, where it is known, the spectrum. */
export function GridSheet({
  content,
  gridHeightPx,
  spectrum,
  spectrumHeightPx = 180,
  label,
}: {
  content: WaveformContent;
  gridHeightPx: number;
  spectrum?: readonly SpectrumLine[] | undefined;
  spectrumHeightPx?: number;
  /** For readers; without it the sheet is decoration. */
  label?: string;
}) {
  const { widthPx, onLayout } = useWidth();
  const hatchId = useId();
  const band = useMemo(() => paintedBand(content), [content]);
  const rows = useMemo(() => (widthPx === 0 ? [] : gridRows(content, band, widthPx)), [content, band, widthPx]);
  const spacingHz = content.subcarrierSpacingHz[0] / content.subcarrierSpacingHz[1];
  const rowPx = gridHeightPx / content.symbolCount;
  const yOf = (symbol: number) => Math.round(symbol * rowPx);
  return (
    <View
      onLayout={onLayout}
      role={label ? 'img' : undefined}
      aria-label={label}
      aria-hidden={label ? undefined : true}
    >
      {widthPx > 0 ? (
        <>
          <svg
            width={widthPx}
            height={gridHeightPx}
            shapeRendering="crispEdges"
            style={styles.grid as object}
            aria-hidden
          >
            <pattern id={hatchId} width={4} height={4} patternUnits="userSpaceOnUse">
              <rect width={4} height={4} fill={color.cell.reserved.fill} />
              <path d="M-1 1L1 -1M0 4L4 0M3 5L5 3" stroke={color.cell.reserved.mark} shapeRendering="auto" />
            </pattern>
            <rect width={widthPx} height={gridHeightPx} fill={color.cell.null.fill} />
            {rows.map((row) =>
              row.runs.map((run) =>
                run.style === 'null' ? null : (
                  <rect
                    key={`${row.fromSymbol}.${run.xPx}`}
                    x={run.xPx}
                    y={yOf(row.fromSymbol)}
                    width={run.widthPx}
                    height={yOf(row.toSymbol) - yOf(row.fromSymbol)}
                    fill={run.style === 'reserved' ? `url(#${hatchId})` : color.cell[run.style].fill}
                  />
                ),
              ),
            )}
            {rowPx >= 6
              ? Array.from({ length: content.symbolCount - 1 }, (_, i) => (
                  <line
                    key={i}
                    x1={0}
                    x2={widthPx}
                    y1={yOf(i + 1) + 0.5}
                    y2={yOf(i + 1) + 0.5}
                    stroke={color.canvas.cellRule}
                  />
                ))
              : null}
            <rect x={0.5} y={0.5} width={widthPx - 1} height={gridHeightPx - 1} fill="none" stroke={color.rule.line} />
          </svg>
          <Straightedge band={band} widthPx={widthPx} fftSize={content.fftSize} spacingHz={spacingHz} />
          {spectrum ? (
            <SpectrumTrace
              lines={spectrum}
              band={band}
              fftSize={content.fftSize}
              spacingHz={spacingHz}
              widthPx={widthPx}
              heightPx={spectrumHeightPx}
            />
          ) : null}
        </>
      ) : (
        <View style={{ height: gridHeightPx + 34 + (spectrum ? spectrumHeightPx : 0) }} />
      )}
    </View>
  );
}

const styles = StyleSheet.create({ grid: { display: 'flex' } });
