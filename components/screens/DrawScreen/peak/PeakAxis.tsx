import { color } from '@/components/ui/theme';

const HEIGHT = 27;
const LINE_Y = 8;
const INSET = 6;

/** Hollow is now, filled is after, a thin line joins them, the limit is a tick: all ways on one axis. */
export function PeakAxis(props: {
  widthPx: number;
  axis: { from: number; to: number };
  nowDb: number;
  afterDb: number | null;
  limitDb: number;
}) {
  const { widthPx, axis, nowDb, afterDb, limitDb } = props;
  const x = (db: number) => INSET + ((db - axis.from) / (axis.to - axis.from)) * (widthPx - 2 * INSET);
  const step = axis.to - axis.from > 6 ? 2 : 1;
  const ticks: number[] = [];
  for (let db = Math.ceil(axis.from / step) * step; db <= axis.to; db += step) ticks.push(db);
  const inside = (db: number) => x(Math.max(axis.from, Math.min(axis.to, db)));
  return (
    <svg width={widthPx} height={HEIGHT} aria-hidden style={{ display: 'block', overflow: 'visible' }}>
      {ticks.map((db) => (
        <g key={db}>
          <line x1={x(db)} x2={x(db)} y1={2} y2={14} stroke={color.rule.line} />
          <text
            x={x(db)}
            y={25}
            textAnchor="middle"
            fontFamily="ChivoMono_400Regular"
            fontSize={11}
            fill={color.ink.quiet}
          >
            {db}
          </text>
        </g>
      ))}
      <line x1={inside(limitDb)} x2={inside(limitDb)} y1={0} y2={16} stroke={color.plot.limit} strokeWidth={1.5} />
      {afterDb === null ? null : (
        <line x1={inside(afterDb)} x2={inside(nowDb)} y1={LINE_Y} y2={LINE_Y} stroke={color.plot.before} />
      )}
      <circle
        cx={inside(nowDb)}
        cy={LINE_Y}
        r={3.2}
        fill={color.plot.background}
        stroke={color.plot.before}
        strokeWidth={1.25}
      />
      {afterDb === null ? null : <circle cx={inside(afterDb)} cy={LINE_Y} r={4} fill={color.plot.trace} />}
    </svg>
  );
}
