import { useMemo } from 'react';
import { color } from '@/components/ui/theme';
import { formatNumber } from '@/lib/drawing/quantities';
import { niceCeiling } from '@/lib/drawing/plot';
import { limitText } from './captureWords';

const figureFace = 'ChivoMono_400Regular';
const boldFace = 'ChivoMono_600SemiBold';

export interface EvmBar {
  /** Left edge and width as shares of the plot, 0…1. */
  from: number;
  to: number;
  percent: number;
}

/**
 * Bars from zero in percent with the limit as a line; a bar over it, or the largest, is danger ink and carries its figure. `gutterPx` holds
 * the scale.
 */
export function EvmBars({
  bars,
  widthPx,
  heightPx,
  gutterPx,
  limitPercent,
  gapPx,
}: {
  bars: readonly EvmBar[];
  widthPx: number;
  heightPx: number;
  gutterPx: number;
  limitPercent: number | null;
  gapPx: number;
}) {
  const largest = useMemo(() => bars.reduce((most, { percent }) => Math.max(most, percent), 0), [bars]);
  const top = niceCeiling(1.12 * Math.max(largest, limitPercent ?? 0));
  const plotTop = 16;
  const plot = heightPx - plotTop;
  const y = (percent: number) => plotTop + plot * (1 - percent / top);
  const width = widthPx - gutterPx;
  const marks = [0, 0.25, 0.5, 0.75, 1].map((share) => share * top);
  return (
    <svg width={widthPx} height={heightPx} aria-hidden style={{ display: 'block', overflow: 'visible' }}>
      {marks.map((percent) => (
        <g key={percent}>
          <line
            x1={gutterPx}
            x2={widthPx}
            y1={y(percent)}
            y2={y(percent)}
            stroke={percent === 0 ? color.plot.axis : color.plot.grid}
          />
          {percent === 0 ? null : (
            <text
              x={gutterPx - 6}
              y={y(percent) + 4}
              textAnchor="end"
              fontSize={11}
              fontFamily={figureFace}
              fill={color.plot.axis}
            >
              {formatNumber(percent, 3)}
            </text>
          )}
        </g>
      ))}
      {bars.map((bar) => {
        const isOver = limitPercent !== null && bar.percent > limitPercent;
        const isWorst = bar.percent === largest;
        const x = gutterPx + bar.from * width + gapPx / 2;
        return (
          <rect
            key={bar.from}
            x={x}
            width={Math.max(0.6, (bar.to - bar.from) * width - gapPx)}
            y={y(bar.percent)}
            height={Math.max(0, heightPx - y(bar.percent))}
            fill={isOver || isWorst ? color.danger.solid : color.plot.trace}
          />
        );
      })}
      {bars
        .filter(({ percent }) => percent === largest)
        .slice(0, 1)
        .map((bar) => (
          <text
            key={bar.from}
            x={Math.min(widthPx - 14, Math.max(gutterPx + 14, gutterPx + ((bar.from + bar.to) / 2) * width))}
            y={y(bar.percent) - 4}
            textAnchor="middle"
            fontSize={11}
            fontFamily={boldFace}
            fill={color.danger.text}
            stroke={color.surface.desk}
            strokeWidth={3}
            paintOrder="stroke"
          >
            {formatNumber(bar.percent, 2, true)}
          </text>
        ))}
      {limitPercent === null ? null : (
        <g>
          <line
            x1={gutterPx}
            x2={widthPx}
            y1={y(limitPercent)}
            y2={y(limitPercent)}
            stroke={color.plot.limit}
            strokeWidth={1.5}
          />
          <text
            x={widthPx}
            y={y(limitPercent) - 4}
            textAnchor="end"
            fontSize={11}
            fontFamily={figureFace}
            fill={color.danger.text}
          >
            {`limit ${limitText(limitPercent)}`}
          </text>
        </g>
      )}
    </svg>
  );
}
