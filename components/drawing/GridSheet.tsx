import { useMemo } from 'react';
import { StyleSheet, View } from 'react-native';
import { color, useThemeColors } from '@/components/ui/theme';
import { gridPicture, pictureBlocks } from '@/lib/drawing/gridPicture';
import type { WaveformContent } from '@/lib/synth';
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
  const colors = useThemeColors();
  const band = useMemo(() => paintedBand(content), [content]);
  const visible = band.to - band.from;
  const { blocks, columns, rowCount } = useMemo(() => {
    // one column a pixel of the visible band, over the whole band: a comb keeps its teeth
    const wanted = widthPx === 0 ? 0 : Math.min(content.fftSize, Math.ceil((widthPx * content.fftSize) / visible));
    if (wanted === 0) return { blocks: [], columns: 1, rowCount: 1 };
    const picture = gridPicture(content, wanted, Math.max(1, Math.floor(gridHeightPx / 2)));
    const fills = Object.fromEntries(Object.entries(colors.cell).map(([key, cell]) => [key, cell.fill]));
    return {
      blocks: pictureBlocks(picture, fills as Parameters<typeof pictureBlocks>[1]),
      columns: picture.columns,
      rowCount: picture.rowCount,
    };
  }, [content, colors, gridHeightPx, visible, widthPx]);
  const perPosition = columns / content.fftSize;
  const spacingHz = content.subcarrierSpacingHz[0] / content.subcarrierSpacingHz[1];
  const rowPx = gridHeightPx / content.symbolCount;
  return (
    <View
      onLayout={onLayout}
      role={label ? 'img' : undefined}
      aria-label={label}
      aria-hidden={label ? undefined : true}
    >
      {widthPx > 0 ? (
        <>
          <svg width={widthPx} height={gridHeightPx} style={styles.grid as object} aria-hidden>
            <svg
              width={widthPx}
              height={gridHeightPx}
              viewBox={`${band.from * perPosition} 0 ${visible * perPosition} ${rowCount}`}
              preserveAspectRatio="none"
              shapeRendering="crispEdges"
            >
              {blocks.map((block, i) => (
                <rect key={i} x={block.x} y={block.y} width={block.width} height={block.height} fill={block.fill} />
              ))}
            </svg>
            {rowPx >= 6
              ? Array.from({ length: content.symbolCount - 1 }, (_, i) => (
                  <line
                    key={i}
                    x1={0}
                    x2={widthPx}
                    y1={Math.round((i + 1) * rowPx) + 0.5}
                    y2={Math.round((i + 1) * rowPx) + 0.5}
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
