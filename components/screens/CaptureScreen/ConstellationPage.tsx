import { useMemo } from 'react';
import { View } from 'react-native';
import { useWidth } from '@/components/drawing/useWidth';
import { Text } from '@/components/ui/Text';
import { color } from '@/components/ui/theme';
import { inkStyleOf } from '@/lib/drawing/inkStyle';
import { formatNumber } from '@/lib/drawing/quantities';
import { pointsOf } from '@/lib/synth';
import type { ResultProps } from './resultProps';
import { PlotHead } from './PlotHead';

/** Equalized cells as small dots in their ink's colour, and the points that were sent as rings. */
export function ConstellationPage({ capture, content }: ResultProps) {
  const { widthPx, onLayout } = useWidth();
  const { points, inks } = capture.constellation;
  const side = Math.min(widthPx, 420);
  const reach = useMemo(() => reachOf(points), [points]);
  const at = (value: number) => ((value + reach) / (2 * reach)) * side;
  // one path an ink: a line of no length with a round end is a dot
  const paths = useMemo(() => {
    const found = new Map<number, string[]>();
    inks.forEach((ink, i) => {
      const list = found.get(ink) ?? [];
      list.push(
        `M${(((points[2 * i]! + reach) / (2 * reach)) * side).toFixed(1)} ${(((reach - points[2 * i + 1]!) / (2 * reach)) * side).toFixed(1)}h0`,
      );
      found.set(ink, list);
    });
    return [...found].map(([ink, list]) => ({ ink, path: list.join('') }));
  }, [points, inks, reach, side]);
  const sent = useMemo(() => sentPoints(content), [content]);
  const copied = () =>
    Array.from(
      inks,
      (ink, i) => `${content.tray[ink]!.name}\t${points[2 * i]!.toFixed(5)}\t${points[2 * i + 1]!.toFixed(5)}`,
    ).join('\n');
  return (
    <View onLayout={onLayout}>
      <PlotHead
        words={`${formatNumber(inks.length)} equalized cells; rings are what was sent`}
        copied={copied}
        what="Constellation"
      />
      {side > 0 ? (
        <svg
          width={side}
          height={side}
          role="img"
          aria-label={`Constellation of ${inks.length} cells`}
          style={{ display: 'block', backgroundColor: color.plot.background }}
        >
          <line x1={at(0)} x2={at(0)} y1={0} y2={side} stroke={color.plot.grid} />
          <line x1={0} x2={side} y1={at(0)} y2={at(0)} stroke={color.plot.grid} />
          {paths.map(({ ink, path }) => (
            <path
              key={ink}
              d={path}
              stroke={
                content.tray[ink]!.role === 'data' ? color.plot.point : color.cell[inkStyleOf(content.tray[ink]!)].fill
              }
              strokeWidth={2}
              strokeLinecap="round"
              strokeOpacity={0.7}
            />
          ))}
          {sent.map(([re, im]) => (
            <circle key={`${re},${im}`} cx={at(re)} cy={at(-im)} r={3.5} fill="none" stroke={color.plot.trace} />
          ))}
          <rect x={0.5} y={0.5} width={side - 1} height={side - 1} fill="none" stroke={color.rule.line} />
        </svg>
      ) : null}
      <Text variant="label" weight={400} tone="quiet" style={{ marginTop: 4 }}>
        Unit: the mean power of a 0 dB cell is 1.
      </Text>
    </View>
  );
}

/** Up to 64 points a map: denser rings would hide the cells. */
function sentPoints(content: ResultProps['content']): [number, number][] {
  const seen = new Map<string, [number, number]>();
  for (const ink of content.tray) {
    if (ink.role !== 'data') continue;
    const points = pointsOf(ink.value.constellation, ink.value.bitMap);
    if (points.length > 128) continue;
    const gain = 10 ** (ink.powerDb / 20);
    for (let i = 0; i < points.length; i += 2) {
      const point: [number, number] = [gain * points[i]!, gain * points[i + 1]!];
      seen.set(point.map((value) => value.toFixed(4)).join(), point);
    }
  }
  return seen.size > 128 ? [] : [...seen.values()];
}

/** Half the plot's side in cell units: all but the farthest two in a thousand. */
function reachOf(points: Float32Array): number {
  const sizes = Float32Array.from(points, Math.abs).sort();
  return Math.max(0.5, 1.1 * (sizes[Math.floor(0.998 * (sizes.length - 1))] ?? 1));
}
