import { color } from '@/components/ui/theme';
import { megahertzTicks, subcarrierTicks, type AxisTick } from '@/lib/drawing/axis';

/** A stretch of the frequency axis in positions p = k + ⌊N/2⌋, broken at the edges of cells. */
export interface Band {
  from: number;
  to: number;
}

const figureFace = 'ChivoMono_400Regular';
const boldFace = 'ChivoMono_600SemiBold';

/** The rule between a grid and its spectrum: subcarriers on the upper edge, MHz on the lower, DC in bold. */
export function Straightedge({
  band,
  widthPx,
  fftSize,
  spacingHz,
  gutterPx = 0,
  heightPx = 34,
}: {
  band: Band;
  widthPx: number;
  fftSize: number;
  spacingHz: number;
  /** Room left of the scale, for the names of its two edges. */
  gutterPx?: number;
  heightPx?: number;
}) {
  const span = { ...band, lengthPx: widthPx };
  const upper = subcarrierTicks(span, fftSize);
  const lower = megahertzTicks(span, fftSize, spacingHz);
  return (
    <svg
      width={widthPx + gutterPx}
      height={heightPx}
      aria-hidden
      style={{ display: 'block', backgroundColor: color.canvas.ruleEdge }}
    >
      <rect
        x={0.5}
        y={0.5}
        width={Math.max(0, widthPx + gutterPx - 1)}
        height={heightPx - 1}
        fill="none"
        stroke={color.rule.line}
      />
      {gutterPx > 0 ? (
        <>
          <EdgeName x={gutterPx - 5} y={16} name="k" />
          <EdgeName x={gutterPx - 5} y={heightPx - 8} name="MHz" />
        </>
      ) : null}
      <g transform={`translate(${gutterPx})`}>
        {upper.map((tick) => (
          <Tick key={tick.value} tick={tick} edge={0} length={tick.label ? 6 : 3} textAt={16} widthPx={widthPx} />
        ))}
        {lower.map((tick) => (
          <Tick key={tick.value} tick={tick} edge={heightPx} length={-6} textAt={heightPx - 8} widthPx={widthPx} />
        ))}
      </g>
    </svg>
  );
}

function EdgeName({ x, y, name }: { x: number; y: number; name: string }) {
  return (
    <text x={x} y={y} textAnchor="end" fontSize={11} fontFamily={figureFace} fill={color.canvas.ruleTick}>
      {name}
    </text>
  );
}

function Tick({
  tick,
  edge,
  length,
  textAt,
  widthPx,
}: {
  tick: AxisTick;
  edge: number;
  length: number;
  textAt: number;
  widthPx: number;
}) {
  const x = Math.round(tick.atPx) + 0.5;
  // half a label would stand beyond the rule's end
  const half = (tick.label?.length ?? 0) * 3.5;
  const fits = x >= half + 1 && x <= widthPx - half - 1;
  const isZeroMhz = length < 0 && tick.isZero;
  return (
    <g>
      <line x1={x} x2={x} y1={edge} y2={edge + length} stroke={color.canvas.ruleTick} />
      {tick.label && fits && !isZeroMhz ? (
        <text
          x={x}
          y={textAt}
          textAnchor="middle"
          fontSize={11}
          fontFamily={tick.isZero ? boldFace : figureFace}
          fill={tick.isZero ? color.ink.strong : color.canvas.ruleTick}
        >
          {tick.label}
        </text>
      ) : null}
    </g>
  );
}
