import { View } from 'react-native';
import { useWidth } from '@/components/drawing/useWidth';
import { color } from '@/components/ui/theme';
import { formatInteger } from '@/lib/drawing/quantities';

const figureFace = 'ChivoMono_400Regular';
const barPx = 20;
const labelsPx = 16;

/** More steps than this are drawn from near the end of the file. */
const stepsMost = 24;
const stepsShown = 8;

/** Which steps of the granularity are drawn: all of them, or the last few with a break before them. */
export function shownSteps(samples: number, granularity: number): { first: number; end: number } {
  const end = Math.max(1, Math.ceil(samples / granularity));
  return end <= stepsMost ? { first: 0, end } : { first: end - stepsShown, end };
}

/** The file on a ruler of the granularity: whole steps full, the last one dashed where it is not. */
export function LengthRuler({ samples, granularity }: { samples: number; granularity: number }) {
  const { widthPx, onLayout } = useWidth();
  const { first, end } = shownSteps(samples, granularity);
  const isWhole = samples % granularity === 0;
  const breakPx = first > 0 ? 22 : 0;
  const stepPx = (widthPx - breakPx) / (end - first);
  const x = (at: number) => breakPx + (at / granularity - first) * stepPx;
  const inset = stepPx > 8 ? 2 : 0;
  const words = isWhole
    ? `${formatInteger(samples)} samples are ${formatInteger(end)} whole steps of ${formatInteger(granularity)}`
    : `${formatInteger(samples)} samples end inside step ${formatInteger(end)} of ${formatInteger(granularity)} each`;
  return (
    <View onLayout={onLayout} role="img" aria-label={words} style={{ height: barPx + labelsPx }}>
      {widthPx > 0 ? (
        <svg width={widthPx} height={barPx + labelsPx} aria-hidden style={{ display: 'block' }}>
          {first > 0 ? (
            <text x={2} y={15} fontSize={13} fontFamily={figureFace} fill={color.ink.quiet}>
              …
            </text>
          ) : null}
          {Array.from({ length: end - first }, (_, i) => {
            const from = (first + i) * granularity;
            const left = x(from);
            const open = from + granularity > samples;
            const filledPx = (Math.min(samples, from + granularity) - from) / granularity;
            return (
              <g key={from}>
                <rect
                  x={left + 0.5}
                  y={0.5}
                  width={Math.max(0, stepPx - (inset > 0 ? 2 : 0) - 1)}
                  height={barPx - 1}
                  fill="none"
                  stroke={color.rule.strong}
                  {...(open ? { strokeDasharray: '3 3' } : {})}
                />
                <rect
                  x={left + inset}
                  y={inset}
                  width={Math.max(0, (stepPx - 3 * inset) * filledPx)}
                  height={barPx - 2 * inset}
                  fill={color.plot.point}
                />
              </g>
            );
          })}
          <text x={breakPx} y={barPx + 13} fontSize={11} fontFamily={figureFace} fill={color.plot.axis}>
            {formatInteger(first * granularity)}
          </text>
          <text
            x={widthPx}
            y={barPx + 13}
            fontSize={11}
            fontFamily={figureFace}
            fill={color.plot.axis}
            textAnchor="end"
          >
            {isWhole ? formatInteger(samples) : `${formatInteger(samples)} of ${formatInteger(end * granularity)}`}
          </text>
        </svg>
      ) : null}
    </View>
  );
}
