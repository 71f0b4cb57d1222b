import { useMemo } from 'react';
import { color } from '@/components/ui/theme';
import { cellMark } from '@/lib/drawing/cellMarks';
import { inkStyleOf, markOf } from '@/lib/drawing/inkStyle';
import type { Ink } from '@/lib/synth';

/** An ink as a cell is drawn: its fill and its mark. */
export function InkSwatch({ ink, sizePx = 28 }: { ink: Ink; sizePx?: number }) {
  const style = inkStyleOf(ink);
  const shapes = useMemo(() => cellMark(markOf(style), sizePx, sizePx), [style, sizePx]);
  const mark = color.cell[style].mark;
  return (
    <svg
      width={sizePx}
      height={sizePx}
      aria-hidden
      style={{ display: 'block', flexShrink: 0, border: `1px solid ${color.rule.control}`, boxSizing: 'content-box' }}
    >
      <rect width={sizePx} height={sizePx} fill={color.cell[style].fill} />
      {shapes.map((shape, i) => {
        switch (shape.shape) {
          case 'dot':
            return <circle key={i} cx={shape.xPx} cy={shape.yPx} r={shape.radiusPx} fill={mark} />;
          case 'ring':
            return (
              <circle
                key={i}
                cx={shape.xPx}
                cy={shape.yPx}
                r={shape.radiusPx}
                fill="none"
                stroke={mark}
                strokeWidth={shape.strokePx}
              />
            );
          case 'line':
            return (
              <line
                key={i}
                x1={shape.x1Px}
                y1={shape.y1Px}
                x2={shape.x2Px}
                y2={shape.y2Px}
                stroke={mark}
                strokeWidth={shape.strokePx}
              />
            );
        }
      })}
    </svg>
  );
}
