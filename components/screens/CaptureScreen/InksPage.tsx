import { StyleSheet, View } from 'react-native';
import { InkSwatch } from '@/components/drawing/InkSwatch';
import { Text } from '@/components/ui/Text';
import { color } from '@/components/ui/theme';
import { formatNumber } from '@/lib/drawing/quantities';
import type { ResultProps } from './resultProps';
import { percentOf, verdictOf } from './captureWords';

/** EVM of each ink whose values the edition knows. */
export function InksPage({ capture, content, limitPercent }: ResultProps) {
  const rows = content.tray.flatMap((ink, place) => {
    const figure = capture.evm.byInk[place];
    return figure === undefined || figure.cells === 0 ? [] : [{ ink, figure }];
  });
  return (
    <View role="list">
      {rows.map(({ ink, figure }) => {
        const verdict = verdictOf(figure.ratio, ink.role === 'data' ? limitPercent : null);
        return (
          <View key={ink.inkId} role="listitem" style={styles.row}>
            <InkSwatch ink={ink} sizePx={24} />
            <View style={styles.name}>
              <Text numberOfLines={1}>{ink.name}</Text>
              <Text variant="label" weight={400} tone="quiet">
                {`${formatNumber(figure.cells)} cells`}
              </Text>
            </View>
            <View style={styles.figures}>
              <Text variant="figure" tone="strong">
                {figure.ratio === null ? 'not measured' : percentOf(figure.ratio)}
                {figure.ratio === null ? null : (
                  <Text variant="label" tone="quiet">
                    {' %'}
                  </Text>
                )}
              </Text>
              <Text variant="label" weight={400} tone={verdict && !verdict.isMet ? 'danger' : 'quiet'}>
                {[figure.db === null ? null : `${formatNumber(figure.db, 1, true)} dB`, verdict?.words]
                  .filter(Boolean)
                  .join(', ')}
              </Text>
            </View>
          </View>
        );
      })}
    </View>
  );
}

const styles = StyleSheet.create({
  row: {
    flexDirection: 'row',
    alignItems: 'center',
    gap: 12,
    minHeight: 52,
    paddingVertical: 6,
    borderBottomWidth: 1,
    borderBottomColor: color.rule.hair,
  },
  name: { flexGrow: 1, flexShrink: 1, minWidth: 0 },
  figures: { alignItems: 'flex-end' },
});
