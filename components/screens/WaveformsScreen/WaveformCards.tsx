import { Link } from 'expo-router';
import { StyleSheet, View } from 'react-native';
import { Figure } from '@/components/ui/Figure';

import { Stamp } from '@/components/ui/Stamp';
import { Text } from '@/components/ui/Text';
import { color } from '@/components/ui/theme';
import { useMay } from '@/lib/client/useSession';
import type { WaveformItem } from '@/lib/contracts/waveforms';
import { when } from '../when';
import { ItemPicture } from './ItemPicture';
import { itemAside, itemFigures, waveformHref } from './itemWords';

/** The list on a phone: each row a card, the whole card the link. */
export function WaveformCards({ items }: { items: readonly WaveformItem[] }) {
  return (
    <View role="list" aria-label="Waveforms" style={styles.list}>
      {items.map((item) => (
        <View key={item.waveformId} role="listitem">
          <Card item={item} />
        </View>
      ))}
    </View>
  );
}

function Card({ item }: { item: WaveformItem }) {
  const figures = itemFigures(item);
  const aside = itemAside(item);
  return (
    <Link href={waveformHref(item, useMay('readWaveforms'))} style={styles.link}>
      <View style={[styles.card, item.waitsForYourReview ? styles.waits : null]}>
        <Text variant="heading" tone="strong" numberOfLines={1}>
          {item.title}
        </Text>
        <View style={styles.stampRow}>
          <Stamp state={item.stamp.state} edition={item.stamp.editionNumber} />
          {aside ? (
            <Text
              variant="small"
              weight={aside.isCall ? 600 : 400}
              tone={aside.isCall ? 'warning' : 'quiet'}
              numberOfLines={1}
              style={styles.aside}
            >
              {aside.words}
            </Text>
          ) : null}
        </View>
        <View style={styles.figures}>
          <ItemPicture item={item} width={112} height={36} />
          <View>
            <Text variant="label" weight={400} tone="quiet">
              Clock
            </Text>
            <Figure value={figures.clockMhz} unit="MHz" />
          </View>
          <View>
            <Text variant="label" weight={400} tone="quiet">
              Painted span
            </Text>
            <Figure value={figures.spanMhz} {...(figures.spanMhz === 'none' ? {} : { unit: 'MHz' })} />
          </View>
        </View>
        <View style={styles.last}>
          <Text variant="small" tone="quiet" numberOfLines={1} style={styles.aside}>
            {`${item.changedBy.name}, ${when(item.changedAtMs)}`}
          </Text>
          <Text variant="small" tone="quiet">
            PAPR <Text variant="figureSmall">{figures.paprDb}</Text>
            {/\d/.test(figures.paprDb) ? ' dB' : ''}
          </Text>
        </View>
      </View>
    </Link>
  );
}

const styles = StyleSheet.create({
  list: { gap: 10 },
  link: { textDecorationLine: 'none', display: 'flex' },
  card: {
    flex: 1,
    minHeight: 140,
    minWidth: 0,
    paddingVertical: 9,
    paddingHorizontal: 12,
    backgroundColor: color.surface.sheet,
    borderWidth: 1,
    borderColor: color.rule.line,
  },
  waits: {
    backgroundColor: color.surface.raised,
    borderLeftWidth: 3,
    borderLeftColor: color.stamp.inReview,
    paddingLeft: 10,
  },
  stampRow: { flexDirection: 'row', alignItems: 'center', gap: 9, marginTop: 5, height: 26 },
  aside: { flexShrink: 1 },
  figures: { flexDirection: 'row', alignItems: 'center', gap: 14, marginTop: 8 },
  last: { flexDirection: 'row', justifyContent: 'space-between', gap: 8, marginTop: 5 },
});
