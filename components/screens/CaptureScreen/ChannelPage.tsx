import { useMemo } from 'react';
import { View } from 'react-native';
import { Straightedge } from '@/components/drawing/Straightedge';
import { useWidth } from '@/components/drawing/useWidth';
import { Text } from '@/components/ui/Text';
import { color } from '@/components/ui/theme';
import { formatNumber, quantityText } from '@/lib/drawing/quantities';
import type { MeasuredCapture } from '@/lib/synth';
import type { ResultProps } from './resultProps';
import { PlotHead } from './PlotHead';
import { spanOf } from './SubcarriersPage';

const gutterPx = 34;
const figureFace = 'ChivoMono_400Regular';

/** The channel's magnitude over the grid's axis, and its paths in time with the prefix beside them. */
export function ChannelPage({ capture, content }: ResultProps) {
  const { widthPx, onLayout } = useWidth();
  const { channel } = capture;
  const width = Math.max(0, widthPx - gutterPx);
  const band = useMemo(() => spanOf([...channel.magnitudeDb], (db: number) => !Number.isNaN(db)), [channel]);
  const half = Math.floor(content.fftSize / 2);
  const copied = () =>
    [...channel.magnitudeDb]
      .flatMap((db, p) => (Number.isNaN(db) ? [] : [`${p - half}\t${db.toFixed(3)} dB`]))
      .join('\n');
  return (
    <View onLayout={onLayout} style={{ gap: 8 }}>
      <View>
        <PlotHead words="Magnitude, dB to its mean" copied={copied} what="Channel" />
        {width > 0 ? (
          <>
            <Magnitude magnitudeDb={channel.magnitudeDb} band={band} widthPx={width} />
            <Straightedge
              band={band}
              widthPx={width}
              fftSize={content.fftSize}
              spacingHz={content.subcarrierSpacingHz[0] / content.subcarrierSpacingHz[1]}
              gutterPx={gutterPx}
            />
          </>
        ) : (
          <View style={{ height: 154 }} />
        )}
      </View>
      {channel.impulseDb === null ? (
        <Text variant="small" tone="quiet">
          One gain was fitted: a single symbol shows no paths.
        </Text>
      ) : width > 0 ? (
        <Impulse channel={channel} widthPx={widthPx} />
      ) : null}
      <Text variant="small" tone="quiet">
        {pathWords(channel)}
      </Text>
    </View>
  );
}

/** Subcarriers apart that a line still joins. */
const joinedMost = 16;

function Magnitude({
  magnitudeDb,
  band,
  widthPx,
}: {
  magnitudeDb: Float64Array;
  band: { from: number; to: number };
  widthPx: number;
}) {
  const heightPx = 120;
  const known = [...magnitudeDb].filter((db) => !Number.isNaN(db));
  const low = Math.min(-5, 5 * Math.floor(Math.max(-60, Math.min(...known)) / 5));
  const high = Math.max(5, 5 * Math.ceil(Math.max(...known) / 5));
  const y = (db: number) => ((high - Math.max(low, db)) / (high - low)) * heightPx;
  const x = (p: number) => ((p + 0.5 - band.from) / (band.to - band.from)) * widthPx;
  let path = '';
  for (let p = band.from, last = -Infinity; p < band.to; p++) {
    const db = magnitudeDb[p]!;
    if (Number.isNaN(db)) continue;
    // nothing is drawn where nothing was measured: a notch stays open, a comb's teeth are joined
    path += `${p - last <= joinedMost ? 'L' : 'M'}${x(p).toFixed(1)} ${y(db).toFixed(1)}${p - last <= joinedMost ? '' : 'h0'}`;
    last = p;
  }
  return (
    <svg
      width={widthPx}
      height={heightPx}
      aria-hidden
      style={{ display: 'block', marginLeft: gutterPx, overflow: 'visible', backgroundColor: color.plot.background }}
    >
      {[low, 0, high].map((db) => (
        <g key={db}>
          <line x1={0} x2={widthPx} y1={y(db)} y2={y(db)} stroke={color.plot.grid} />
          <text
            x={-5}
            y={y(db) + (db === low ? -1 : 4)}
            textAnchor="end"
            fontSize={11}
            fontFamily={figureFace}
            fill={color.plot.axis}
          >
            {formatNumber(db)}
          </text>
        </g>
      ))}
      <path d={path} fill="none" stroke={color.plot.trace} strokeWidth={1.5} strokeLinecap="round" />
      <rect x={0.5} y={0.5} width={widthPx - 1} height={heightPx - 1} fill="none" stroke={color.rule.line} />
    </svg>
  );
}

const floorDb = -50;

/** |h|² over delay; the prefix stands beside it in its own wash, the usable guard up to its inner line. */
function Impulse({ channel, widthPx }: { channel: MeasuredCapture['channel']; widthPx: number }) {
  const { impulseDb, firstDelaySamples, prefixSamples, guardSamples } = channel;
  const heightPx = 120;
  const plot = widthPx - gutterPx;
  const from = Math.max(firstDelaySamples, -Math.ceil(Math.max(8, 0.25 * prefixSamples)));
  const to = Math.min(firstDelaySamples + impulseDb!.length - 1, Math.ceil(Math.max(24, 1.5 * prefixSamples)));
  const x = (delay: number) => ((delay - from) / (to - from)) * plot;
  const y = (db: number) => (-Math.max(floorDb, db) / -floorDb) * heightPx;
  const bars: React.ReactNode[] = [];
  for (let delay = from; delay <= to; delay++) {
    const db = impulseDb![delay - firstDelaySamples]!;
    if (db <= floorDb) continue;
    bars.push(
      <line
        key={delay}
        x1={x(delay)}
        x2={x(delay)}
        y1={y(db)}
        y2={heightPx}
        stroke={color.plot.trace}
        strokeWidth={1.5}
      />,
    );
  }
  const guardAt = Math.min(plot, x(guardSamples));
  return (
    <View role="img" aria-label={pathWords(channel)}>
      <Text variant="small" tone="quiet">
        Paths, dB to the strongest, over delay; the prefix in its wash
      </Text>
      <svg
        width={plot}
        height={heightPx + 18}
        aria-hidden
        style={{ display: 'block', marginLeft: gutterPx, marginTop: 6, overflow: 'visible' }}
      >
        <rect x={0} y={0} width={plot} height={heightPx} fill={color.plot.background} />
        <rect
          x={x(0)}
          y={0}
          width={Math.max(0, Math.min(plot, x(prefixSamples)) - x(0))}
          height={heightPx}
          fill={color.wash.prefix}
        />
        {[0, -20, -40].map((db) => (
          <g key={db}>
            <line x1={0} x2={plot} y1={y(db)} y2={y(db)} stroke={color.plot.grid} />
            <text
              x={-5}
              y={y(db) + (db === 0 ? 9 : 4)}
              textAnchor="end"
              fontSize={11}
              fontFamily={figureFace}
              fill={color.plot.axis}
            >
              {formatNumber(db)}
            </text>
          </g>
        ))}
        {guardSamples < prefixSamples ? (
          <line x1={guardAt} x2={guardAt} y1={0} y2={heightPx} stroke={color.wash.prefixEdge} strokeDasharray="3 3" />
        ) : null}
        {bars}
        <rect x={0.5} y={0.5} width={plot - 1} height={heightPx - 1} fill="none" stroke={color.rule.line} />
        {[0, prefixSamples].map((delay, i) =>
          delay <= to ? (
            <text
              key={i}
              x={x(delay)}
              y={heightPx + 14}
              textAnchor="middle"
              fontSize={11}
              fontFamily={figureFace}
              fill={color.plot.axis}
            >
              {i === 0 ? '0' : `prefix ${formatNumber(prefixSamples)}`}
            </text>
          ) : null,
        )}
      </svg>
    </View>
  );
}

function pathWords({ paths, delayStepSec, guardSamples, source }: MeasuredCapture['channel']): string {
  const from = source === 'pilots' ? 'From the pilots.' : source === 'allKnown' ? 'From all known cells.' : 'One gain.';
  if (paths.length === 0) return from;
  const last = paths[paths.length - 1]!;
  const first = paths[0]!;
  const spread = last.delaySamples - first.delaySamples;
  const many =
    paths.length === 1 ? '1 path' : `${paths.length} paths over ${quantityText(spread * delayStepSec, 's', 3)}`;
  const guard = quantityText(guardSamples * delayStepSec, 's', 3);
  return `${from} ${many}, ${spread <= guardSamples ? 'inside' : 'beyond'} the usable guard of ${guard}.`;
}
