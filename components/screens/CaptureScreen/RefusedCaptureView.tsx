import { StyleSheet, View } from 'react-native';
import { useWidth } from '@/components/drawing/useWidth';
import { Text } from '@/components/ui/Text';
import { color } from '@/components/ui/theme';
import { useBreakpoint } from '@/components/ui/useBreakpoint';
import type { Pack, PackDetail } from '@/lib/contracts/packs';
import { formatNumber, quantityText } from '@/lib/drawing/quantities';
import { notFollowedWords, type Likeness, type UnrecognisedCapture } from '@/lib/synth';
import { CheckFile } from '../PackScreen/CheckFile';
import { editionWords, nameOf, shortNameOf } from './editionWords';

interface Row {
  key: string;
  words: string;
  correlation: number;
  isFound: boolean;
  pack: Pack | null;
  likeness: Likeness | null;
}

/** Not this edition: ρ and no EVM, what it does look like, and what the generator probably plays. */
export function RefusedCaptureView({
  capture,
  samples,
  pack,
  target,
  others,
  alike,
}: {
  capture: UnrecognisedCapture;
  samples: number;
  pack: PackDetail;
  /** What it was read against: the pack, or another edition that was tried. */
  target: Pack;
  others: readonly Pack[];
  alike: readonly Likeness[];
}) {
  const wide = useBreakpoint() === 'wide';
  const rows = rowsOf(capture, pack, others, alike);
  const best = rows.find(({ isFound }) => isFound) ?? null;
  const { value, needed } = capture.correlation;
  const notFollowed = notFollowedWords(capture.correlation);
  const known = [
    { what: 'vector of this pack', digest: pack.vectorDigest },
    { what: 'whole pack', digest: pack.fileDigest },
    ...(best?.pack ? [{ what: `vector of ${nameOf(best.pack, pack)}`, digest: best.pack.vectorDigest }] : []),
  ];
  return (
    <View style={wide ? styles.wide : styles.stack}>
      <View role="alert" style={styles.notice}>
        <Text variant="heading" tone="danger">
          {`This does not look like ${target.packId === pack.packId ? editionWords(pack) : nameOf(target, pack)}`}
        </Text>
        <View style={styles.noticeRow}>
          <Text variant="figureHero" tone="strong" weight={600} style={styles.numeral}>
            {formatNumber(value, 2, true)}
          </Text>
          <Text variant="small" style={styles.shrink}>
            {notFollowed === null
              ? `the best correlation; a match is near 1. No EVM is given below ${formatNumber(needed, 2, true)}.`
              : `the correlation ${notFollowed} No EVM is given.`}
          </Text>
        </View>
      </View>
      <Correlation capture={capture} own={editionWords(pack)} best={best} pack={pack} />
      <View>
        <View style={styles.tableHead}>
          <Text variant="small" tone="quiet">
            What it does look like
          </Text>
          <Text variant="small" tone="quiet">
            correlation
          </Text>
        </View>
        {rows.map((row) => (
          <View key={row.key} style={styles.row}>
            <Text
              weight={row.isFound ? 600 : 400}
              tone={row.isFound ? 'strong' : 'body'}
              style={styles.name}
              numberOfLines={2}
            >
              {row.words}
            </Text>
            <View style={styles.scale} aria-hidden>
              <View style={styles.line} />
              <View
                style={[
                  styles.bar,
                  {
                    width: `${100 * row.correlation}%`,
                    backgroundColor: row.isFound ? color.ink.strong : color.plot.before,
                  },
                ]}
              />
              <View style={[styles.limit, { left: `${100 * needed}%` }]} />
            </View>
            <Text variant="figureSmall" tone="strong" style={styles.figure}>
              {formatNumber(row.correlation, 2, true)}
            </Text>
          </View>
        ))}
      </View>
      {best?.pack && best.likeness ? (
        <>
          <Text variant="small" tone="quiet">
            {`${capital(nameOf(best.pack, pack))} stands ${formatNumber(best.likeness.startSamples)} samples into the loop, ${formatNumber(best.likeness.offsetHz, 1)} Hz off.`}
          </Text>
          <Text>
            <Text weight={700}>{`The generator probably plays ${nameOf(best.pack, pack)}. `}</Text>
            Compare the digest of its file with this pack’s.
          </Text>
        </>
      ) : (
        <Text>
          {others.length === 0
            ? `No frame found in ${formatNumber(samples)} samples. Is the clock right?`
            : `It looks like none of the ${others.length + 1} editions here. No frame found in ${formatNumber(samples)} samples: is the clock right?`}
        </Text>
      )}
      <View style={styles.check}>
        <CheckFile known={known} />
      </View>
    </View>
  );
}

const capital = (words: string): string => `${words[0]!.toUpperCase()}${words.slice(1)}`;

/** Other editions of the waveform, mirrored readings, then the team's other editions; best first. */
function rowsOf(
  capture: UnrecognisedCapture,
  pack: PackDetail,
  others: readonly Pack[],
  alike: readonly Likeness[],
): Row[] {
  const mirrored = capture.tried.find(({ reading, isMirrored }) => reading === 0 && isMirrored);
  const rows: Row[] = alike.flatMap((likeness): Row[] => {
    const other = others[likeness.content];
    if (!other || likeness.correlation === null) return [];
    return [
      {
        key: other.packId,
        words: `${capital(nameOf(other, pack))}${likeness.isMirrored && likeness.isFound ? ', I and Q swapped' : ''}`,
        correlation: likeness.correlation,
        isFound: likeness.isFound,
        pack: other,
        likeness,
      },
    ];
  });
  if (mirrored)
    rows.push({
      key: 'mirrored',
      words: `${capital(editionWords(pack))}, I and Q swapped`,
      correlation: mirrored.correlation,
      isFound: false,
      pack: null,
      likeness: null,
    });
  return rows.sort((a, b) => b.correlation - a.correlation).slice(0, 8);
}

/** ρ over the delay within one frame, with the line that it would have to reach. */
function Correlation({
  capture,
  own,
  best,
  pack,
}: {
  capture: UnrecognisedCapture;
  own: string;
  best: Row | null;
  pack: PackDetail;
}) {
  const { widthPx, onLayout } = useWidth();
  const heightPx = 124;
  const gutterPx = 30;
  const width = Math.max(0, widthPx - gutterPx);
  const y = (value: number) => heightPx * (1 - Math.min(1, value) / 1.04);
  const pathOf = (curve: ArrayLike<number>): string => {
    let path = '';
    for (let i = 0; i < curve.length; i++)
      path += `${i === 0 ? 'M' : 'L'}${((i / (curve.length - 1)) * width).toFixed(1)} ${y(curve[i]!).toFixed(1)}`;
    return path;
  };
  const { needed } = capture.correlation;
  const found = best?.likeness ?? null;
  const peak = found ? peakOf(found.curve) : 0;
  return (
    <View onLayout={onLayout}>
      <View style={styles.plotHead}>
        <Text variant="small" weight={600} tone="strong">
          Correlation over the delay
        </Text>
        <Text variant="small" tone="quiet">
          {`one frame, ${quantityText(capture.frameSec, 's', 3)}`}
        </Text>
      </View>
      {width > 0 ? (
        <svg
          width={widthPx}
          height={heightPx}
          role="img"
          aria-label={`Correlation with ${own}, ${capture.correlation.value.toFixed(2)} at best; ${needed} is needed`}
          style={{ display: 'block', overflow: 'visible' }}
        >
          <g transform={`translate(${gutterPx})`}>
            <rect width={width} height={heightPx} fill={color.plot.background} />
            {[0, 0.5, 1].map((value) => (
              <g key={value}>
                <line x1={0} x2={width} y1={y(value)} y2={y(value)} stroke={color.plot.grid} />
                <text
                  x={-5}
                  y={y(value) + (value === 0 ? 0 : 4)}
                  textAnchor="end"
                  fontSize={11}
                  fontFamily="ChivoMono_400Regular"
                  fill={color.plot.axis}
                >
                  {value}
                </text>
              </g>
            ))}
            {found ? <path d={pathOf(found.curve)} fill="none" stroke={color.plot.before} strokeWidth={1.25} /> : null}
            <path d={pathOf(capture.curve)} fill="none" stroke={color.plot.trace} strokeWidth={1.25} />
            <line x1={0} x2={width} y1={y(needed)} y2={y(needed)} stroke={color.plot.limit} strokeWidth={1.25} />
            <text
              x={width - 3}
              y={y(needed) - 4}
              textAnchor="end"
              fontSize={11}
              fill={color.danger.text}
              fontFamily="HankenGrotesk_400Regular"
            >
              {`needs ${formatNumber(needed, 2, true)}`}
            </text>
            <text
              x={5}
              y={y(needed) + 16}
              fontSize={11}
              fill={color.ink.strong}
              fontFamily="HankenGrotesk_400Regular"
              stroke={color.plot.background}
              strokeWidth={4}
              paintOrder="stroke"
            >
              {own}
            </text>
            {found && best?.pack ? (
              <text
                x={peak < 0.6 ? peak * width + 6 : peak * width - 6}
                y={y(0.9)}
                textAnchor={peak < 0.6 ? 'start' : 'end'}
                fontSize={11}
                fill={color.plot.before}
                fontFamily="HankenGrotesk_400Regular"
              >
                {shortNameOf(best.pack, pack)}
              </text>
            ) : null}
            <rect
              x={0.5}
              y={0.5}
              width={Math.max(0, width - 1)}
              height={heightPx - 1}
              fill="none"
              stroke={color.rule.line}
            />
          </g>
        </svg>
      ) : (
        <View style={{ height: heightPx }} />
      )}
    </View>
  );
}

function peakOf(curve: Float64Array): number {
  let best = 0;
  curve.forEach((value, i) => {
    if (value > curve[best]!) best = i;
  });
  return best / Math.max(1, curve.length - 1);
}

const styles = StyleSheet.create({
  stack: { gap: 12 },
  wide: { gap: 16, maxWidth: 760 },
  notice: {
    backgroundColor: color.danger.wash,
    borderLeftWidth: 3,
    borderLeftColor: color.danger.rule,
    padding: 12,
    gap: 4,
  },
  noticeRow: { flexDirection: 'row', alignItems: 'center', gap: 12 },
  numeral: { fontSize: 44, lineHeight: 50, letterSpacing: -1 },
  shrink: { flexShrink: 1 },
  plotHead: { flexDirection: 'row', justifyContent: 'space-between', paddingVertical: 6 },
  tableHead: {
    flexDirection: 'row',
    justifyContent: 'space-between',
    paddingVertical: 6,
    borderBottomWidth: 1.5,
    borderBottomColor: color.rule.strong,
  },
  row: {
    flexDirection: 'row',
    alignItems: 'center',
    gap: 12,
    minHeight: 40,
    borderBottomWidth: 1,
    borderBottomColor: color.rule.hair,
  },
  name: { flexGrow: 1, flexShrink: 1 },
  scale: { width: 112, height: 14, justifyContent: 'center', flexShrink: 0 },
  line: { position: 'absolute', left: 0, right: 0, height: 1, backgroundColor: color.rule.line },
  bar: { position: 'absolute', left: 0, height: 5 },
  limit: { position: 'absolute', width: 1.5, height: 14, backgroundColor: color.danger.rule },
  figure: { width: 44, textAlign: 'right' },
  check: { alignItems: 'flex-start' },
});
