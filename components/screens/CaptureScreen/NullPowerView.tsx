import { StyleSheet, View } from 'react-native';
import { Text } from '@/components/ui/Text';
import { color } from '@/components/ui/theme';
import { formatNumber } from '@/lib/drawing/quantities';
import type { NullPower } from '@/lib/synth';
import { PlotHead } from './PlotHead';

const floorDb = -100;

interface Row {
  name: string;
  db: number;
}

/** What the device put where nothing was sent, on one scale in dB to the mean used cell. */
export function NullPowerView({ nulls, file }: { nulls: NullPower; file: NullPower | null }) {
  const own = file?.notch ?? file?.inside ?? null;
  const rows: Row[] = [
    ...(nulls.notch
      ? [
          {
            name: `Notch ${formatNumber(nulls.notch.lowSubcarrier)} to ${formatNumber(nulls.notch.highSubcarrier)}, ${formatNumber(nulls.notch.cells)} cells`,
            db: nulls.notch.db,
          },
        ]
      : []),
    ...(nulls.inside ? [{ name: `All inside, ${formatNumber(nulls.inside.cells)}`, db: nulls.inside.db }] : []),
    ...(nulls.worst
      ? [{ name: `Worst, symbol ${nulls.worst.symbol}, k ${formatNumber(nulls.worst.subcarrier)}`, db: nulls.worst.db }]
      : []),
    ...(own ? [{ name: `${file?.notch ? 'Notch' : 'All inside'} in the file`, db: own.db }] : []),
  ];
  if (rows.length === 0)
    return (
      <Text variant="small" tone="quiet">
        No null cell lies inside the painted span.
      </Text>
    );
  return (
    <View>
      <View style={styles.rule} />
      <PlotHead
        words="Power in the null cells"
        what="Null cells"
        copied={() => rows.map(({ name, db }) => `${name}\t${db.toFixed(2)} dB`).join('\n')}
      />
      {rows.map(({ name, db }) => (
        <View key={name} style={styles.row}>
          <Text variant="small" weight={500} style={styles.name} numberOfLines={2}>
            {name}
          </Text>
          <View style={styles.scale} aria-hidden>
            <View style={styles.line} />
            <View style={[styles.bar, { width: `${Math.min(100, Math.max(1, (db / floorDb) * 100))}%` }]} />
            <View style={styles.zero} />
          </View>
          <Text variant="figureSmall" tone="strong" style={styles.figure}>
            {formatNumber(db, 1, true)}
          </Text>
        </View>
      ))}
      <Text variant="label" weight={400} tone="quiet" style={styles.words}>
        dB to the mean used cell, as received. What the file has not, the device adds.
      </Text>
    </View>
  );
}

const styles = StyleSheet.create({
  rule: { borderTopWidth: 1, borderTopColor: color.rule.strong },
  row: {
    flexDirection: 'row',
    alignItems: 'center',
    gap: 10,
    minHeight: 34,
    borderBottomWidth: 1,
    borderBottomColor: color.rule.hair,
  },
  name: { width: 150, flexShrink: 0 },
  scale: { flexGrow: 1, flexShrink: 1, height: 14, justifyContent: 'center' },
  line: { position: 'absolute', left: 0, right: 0, height: 1, backgroundColor: color.rule.line },
  bar: { position: 'absolute', right: 0, height: 5, backgroundColor: color.plot.notch },
  zero: { position: 'absolute', right: 0, width: 1, height: 14, backgroundColor: color.ink.strong },
  figure: { width: 56, textAlign: 'right' },
  words: { marginTop: 6 },
});
