import { Link } from 'expo-router';
import { useState } from 'react';
import { Pressable, StyleSheet, View } from 'react-native';

import { Stamp } from '@/components/ui/Stamp';
import { Text } from '@/components/ui/Text';
import { color } from '@/components/ui/theme';
import { useMay } from '@/lib/client/useSession';
import type { WaveformItem } from '@/lib/contracts/waveforms';
import { when } from '../when';
import { ItemPicture } from './ItemPicture';
import { itemAside, itemFigures, waveformHref } from './itemWords';

type SortKey = 'title' | 'clock' | 'span' | 'papr' | 'changed';

const valueOf: Record<SortKey, (item: WaveformItem) => number | string> = {
  title: (item) => item.title.toLowerCase(),
  clock: (item) => item.figures.numbers.sampleClockHz,
  span: (item) => item.figures.numbers.paintedSpanHz ?? -1,
  papr: (item) => item.figures.measured?.paprDb ?? -1,
  changed: (item) => item.changedAtMs,
};

const columns: { key: SortKey | null; label: string; style: 'picture' | 'title' | 'state' | 'figure' | 'changed' }[] = [
  { key: null, label: 'Grid', style: 'picture' },
  { key: 'title', label: 'Title', style: 'title' },
  { key: null, label: 'State', style: 'state' },
  { key: 'clock', label: 'Sample clock, MHz', style: 'figure' },
  { key: 'span', label: 'Painted span, MHz', style: 'figure' },
  { key: 'papr', label: 'PAPR, dB', style: 'figure' },
  { key: 'changed', label: 'Changed', style: 'changed' },
];

/** The list on a wide screen; the head sorts. */
export function WaveformTable({ items }: { items: readonly WaveformItem[] }) {
  const [sort, setSort] = useState<{ key: SortKey; down: boolean }>({ key: 'changed', down: true });
  const sorted = [...items].sort((a, b) => {
    const [x, y] = [valueOf[sort.key](a), valueOf[sort.key](b)];
    return (x < y ? -1 : x > y ? 1 : 0) * (sort.down ? -1 : 1);
  });
  return (
    <View role="table" aria-label="Waveforms" style={styles.table}>
      <View role="row" style={styles.head}>
        {columns.map((column) => {
          const on = column.key === sort.key;
          return (
            <View
              key={column.label}
              role="columnheader"
              aria-label={column.label}
              {...({ 'aria-sort': on ? (sort.down ? 'descending' : 'ascending') : undefined } as object)}
              style={styles[column.style]}
            >
              {column.key ? (
                <Pressable
                  role="button"
                  onPress={() => setSort({ key: column.key!, down: on ? !sort.down : column.key !== 'title' })}
                >
                  <Text
                    variant="label"
                    tone="quiet"
                    numberOfLines={1}
                    style={column.style === 'figure' ? styles.right : null}
                  >
                    {column.label}
                    {on ? (sort.down ? ' ↓' : ' ↑') : ''}
                  </Text>
                </Pressable>
              ) : (
                <Text variant="label" tone="quiet">
                  {column.label}
                </Text>
              )}
            </View>
          );
        })}
      </View>
      {sorted.map((item) => (
        <Row key={item.waveformId} item={item} />
      ))}
    </View>
  );
}

function Row({ item }: { item: WaveformItem }) {
  const [hovered, setHovered] = useState(false);
  const figures = itemFigures(item);
  const aside = itemAside(item);
  return (
    <View
      role="row"
      style={[
        styles.row,
        item.waitsForYourReview ? styles.waits : null,
        {
          backgroundColor: hovered
            ? color.surface.hover
            : item.waitsForYourReview
              ? color.surface.raised
              : color.surface.sheet,
        },
      ]}
      {...({ onMouseEnter: () => setHovered(true), onMouseLeave: () => setHovered(false) } as object)}
    >
      <View role="cell" style={styles.picture}>
        <ItemPicture item={item} width={144} height={36} />
      </View>
      <View role="cell" style={styles.title}>
        <Link href={waveformHref(item, useMay('readWaveforms'))} style={styles.link}>
          <Text variant="bodyStrong" tone="strong" numberOfLines={1}>
            {item.title}
          </Text>
        </Link>
        {aside ? (
          <Text
            variant="small"
            weight={aside.isCall ? 600 : 400}
            tone={aside.isCall ? 'warning' : 'quiet'}
            numberOfLines={1}
          >
            {aside.words}
          </Text>
        ) : null}
      </View>
      <View role="cell" style={styles.state}>
        <Stamp state={item.stamp.state} edition={item.stamp.editionNumber} />
      </View>
      {[figures.clockMhz, figures.spanMhz, figures.paprDb].map((value, i) => (
        <View key={i} role="cell" style={styles.figure}>
          <Text variant="figure" tone={/\d/.test(value) ? 'strong' : 'quiet'} style={styles.right}>
            {value}
          </Text>
        </View>
      ))}
      <View role="cell" style={styles.changed}>
        <Text variant="small">{item.changedBy.name}</Text>
        <Text variant="small" tone="quiet">
          {when(item.changedAtMs)}
        </Text>
      </View>
    </View>
  );
}

const styles = StyleSheet.create({
  table: { borderWidth: 1, borderColor: color.rule.line, backgroundColor: color.surface.sheet },
  head: {
    flexDirection: 'row',
    alignItems: 'center',
    height: 36,
    paddingHorizontal: 20,
    gap: 20,
    borderBottomWidth: 1.5,
    borderBottomColor: color.rule.strong,
  },
  row: {
    position: 'relative',
    flexDirection: 'row',
    alignItems: 'center',
    height: 68,
    paddingHorizontal: 20,
    gap: 20,
    borderBottomWidth: 1,
    borderBottomColor: color.rule.hair,
  },
  waits: { borderLeftWidth: 3, borderLeftColor: color.warning.text, paddingLeft: 17 },
  picture: { width: 146, flexShrink: 0 },
  title: { flexGrow: 1, flexShrink: 1, flexBasis: 240, minWidth: 0 },
  link: { textDecorationLine: 'none' },
  state: { width: 190, flexShrink: 0 },
  figure: { width: 112, flexShrink: 1, minWidth: 0 },
  right: { textAlign: 'right' },
  changed: { width: 160, flexShrink: 0, paddingLeft: 16 },
});
