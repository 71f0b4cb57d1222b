import { View } from 'react-native';
import { useWidth } from '@/components/drawing/useWidth';
import { color } from '@/components/ui/theme';
import type { Fit } from '@/lib/contracts/fit';

const figureFace = 'ChivoMono_400Regular';
const heightPx = 132;
const labelsPx = 16;

/** The last and the first samples of the file as the loop plays them: I and Q, the wrap in the middle, its step drawn out. */
export function SeamPicture({ seam, jumps }: { seam: NonNullable<Fit['seam']>; jumps: boolean }) {
  const { widthPx, onLayout } = useWidth();
  const count = seam.around.length / 2;
  const wrapAt = count / 2;
  const most = Math.max(1, ...seam.around.map(Math.abs)) * 1.08;
  const x = (at: number) => Math.round((((at + 0.5) * widthPx) / count) * 10) / 10;
  const y = (value: number) => Math.round((heightPx / 2) * (1 - value / most) * 10) / 10;
  const path = (part: 0 | 1, from: number, to: number) => {
    let out = '';
    for (let i = from; i < to; i++) out += `${i === from ? 'M' : 'L'}${x(i)} ${y(seam.around[2 * i + part]!)}`;
    return out;
  };
  const step = (part: 0 | 1) => path(part, wrapAt - 1, wrapAt + 1);
  const words = `Seam: the step at the wrap is ${seam.stepAtWrap.toFixed(2)} of the RMS, at most ${seam.stepElsewhere.toFixed(2)} elsewhere`;
  return (
    <View onLayout={onLayout} role="img" aria-label={words} style={{ height: heightPx + labelsPx }}>
      {widthPx > 0 ? (
        <svg width={widthPx} height={heightPx + labelsPx} aria-hidden style={{ display: 'block' }}>
          <rect width={widthPx} height={heightPx} fill={color.plot.background} />
          <line x1={0} x2={widthPx} y1={y(0)} y2={y(0)} stroke={color.plot.grid} />
          <line x1={widthPx / 2} x2={widthPx / 2} y1={0} y2={heightPx} stroke={color.wash.prefixEdge} />
          {([0, 1] as const).map((part) => {
            const stroke = part === 0 ? color.plot.traceI : color.plot.traceQ;
            return (
              <g key={part} fill="none" strokeWidth={1.25}>
                <path d={path(part, 0, wrapAt)} stroke={stroke} {...(part === 1 ? { strokeDasharray: '5 2' } : {})} />
                <path
                  d={path(part, wrapAt, count)}
                  stroke={stroke}
                  {...(part === 1 ? { strokeDasharray: '5 2' } : {})}
                />
                <path d={step(part)} stroke={jumps ? color.plot.limit : stroke} strokeWidth={jumps ? 2.5 : 1.25} />
              </g>
            );
          })}
          <rect x={0.5} y={0.5} width={widthPx - 1} height={heightPx - 1} fill="none" stroke={color.rule.line} />
          <g fontSize={11} fontFamily={figureFace} fill={color.plot.axis}>
            <text x={0} y={heightPx + 13}>
              {`last ${wrapAt}`}
            </text>
            <text x={widthPx / 2} y={heightPx + 13} textAnchor="middle" fill={color.wash.prefixEdge}>
              wrap
            </text>
            <text x={widthPx} y={heightPx + 13} textAnchor="end">
              {`first ${wrapAt}`}
            </text>
            <g stroke={color.plot.background} strokeWidth={3} paintOrder="stroke">
              <text x={6} y={14} fill={color.plot.traceI}>
                I, solid
              </text>
              <text x={6} y={28} fill={color.plot.traceQ}>
                Q, dashed
              </text>
            </g>
          </g>
        </svg>
      ) : null}
    </View>
  );
}
