import { useId, useMemo } from 'react';
import { StyleSheet, View } from 'react-native';
import { color } from '@/components/ui/theme';
import { symbolTicks } from '@/lib/drawing/axis';
import type { WaveformContent } from '@/lib/synth';
import { gridPaths } from './gridRuns';
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

const figureFace = 'ChivoMono_400Regular';
/** Room at the left for symbol numbers, the rule's units and dB. */
const gutterOf = (widthPx: number) => (widthPx < 500 ? 28 : 40);

/**
 * What is painted above what it makes, as pictures: grid, straightedge and, where it is known, the spectrum. With a label it is there to be
 * read and has symbol numbers at the left; without one it is decoration.
 */
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
  /** For readers. */
  label?: string;
}) {
  const { widthPx, onLayout } = useWidth();
  const hatchId = useId();
  const gutterPx = label ? gutterOf(widthPx) : 0;
  const plotPx = Math.max(0, widthPx - gutterPx);
  const band = useMemo(() => paintedBand(content), [content]);
  const looks = useMemo(
    () => (plotPx === 0 ? [] : gridPaths(content, band, plotPx, gridHeightPx)),
    [content, band, plotPx, gridHeightPx],
  );
  const spacingHz = content.subcarrierSpacingHz[0] / content.subcarrierSpacingHz[1];
  const { symbolCount, fftSize } = content;
  const rowPx = gridHeightPx / symbolCount;
  const axis = { band, fftSize, spacingHz, widthPx: plotPx, gutterPx };
  return (
    <View
      onLayout={onLayout}
      role={label ? 'img' : undefined}
      aria-label={label}
      aria-hidden={label ? undefined : true}
    >
      {plotPx > 0 ? (
        <>
          <svg width={widthPx} height={gridHeightPx} style={styles.grid as object} aria-hidden>
            <pattern id={hatchId} width={4} height={4} patternUnits="userSpaceOnUse">
              <rect width={4} height={4} fill={color.cell.reserved.fill} />
              <path d="M-1 1L1 -1M0 4L4 0M3 5L5 3" stroke={color.cell.reserved.mark} />
            </pattern>
            {label ? <SymbolNumbers symbolCount={symbolCount} heightPx={gridHeightPx} endPx={gutterPx - 8} /> : null}
            <g transform={`translate(${gutterPx})`} shapeRendering="crispEdges">
              <rect width={plotPx} height={gridHeightPx} fill={color.cell.null.fill} />
              {looks.map(({ style, path }) => (
                <path key={style} d={path} fill={style === 'reserved' ? `url(#${hatchId})` : color.cell[style].fill} />
              ))}
              {rowPx >= 6 ? (
                <path d={ruleLines(symbolCount, rowPx, plotPx)} stroke={color.canvas.cellRule} fill="none" />
              ) : null}
              <rect x={0.5} y={0.5} width={plotPx - 1} height={gridHeightPx - 1} fill="none" stroke={color.rule.line} />
            </g>
          </svg>
          <Straightedge {...axis} />
          {spectrum ? <SpectrumTrace lines={spectrum} {...axis} heightPx={spectrumHeightPx} /> : null}
        </>
      ) : (
        <View style={{ height: gridHeightPx + 34 + (spectrum ? spectrumHeightPx : 0) }} />
      )}
    </View>
  );
}

function ruleLines(symbolCount: number, rowPx: number, widthPx: number): string {
  let path = '';
  for (let symbol = 1; symbol < symbolCount; symbol++) path += `M0 ${Math.round(symbol * rowPx) + 0.5}h${widthPx}`;
  return path;
}

function SymbolNumbers({ symbolCount, heightPx, endPx }: { symbolCount: number; heightPx: number; endPx: number }) {
  const ticks = symbolTicks({ from: 0, to: symbolCount, lengthPx: heightPx }, symbolCount, 12);
  return ticks
    .filter(({ atPx }) => atPx >= 6 && atPx <= heightPx - 2)
    .map(({ value, atPx, label }) => (
      <text
        key={value}
        x={endPx}
        y={Math.round(atPx + 4)}
        textAnchor="end"
        fontSize={11}
        fontFamily={figureFace}
        fill={color.ink.quiet}
      >
        {label}
      </text>
    ));
}

const styles = StyleSheet.create({ grid: { display: 'flex' } });
