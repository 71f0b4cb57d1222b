import { Link, useRouter } from 'expo-router';
import { StyleSheet, View } from 'react-native';
import { Stamp } from '@/components/ui/Stamp';
import { Table, type TableColumn } from '@/components/ui/Table';
import { Text } from '@/components/ui/Text';
import { useMay } from '@/lib/client/useSession';
import type { WaveformItem } from '@/lib/contracts/waveforms';
import { when } from '../when';
import { ItemPicture } from './ItemPicture';
import { itemAside, itemFigures, waveformHref } from './itemWords';

function FigureText({ value }: { value: string }) {
  return (
    <Text variant="figure" tone={/\d/.test(value) ? 'strong' : 'quiet'} numberOfLines={1}>
      {value}
    </Text>
  );
}

function Title({ item, readsDrafts }: { item: WaveformItem; readsDrafts: boolean }) {
  const aside = itemAside(item);
  return (
    <>
      <Link href={waveformHref(item, readsDrafts)} style={styles.link}>
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
    </>
  );
}

function columnsFor(readsDrafts: boolean): TableColumn<WaveformItem>[] {
  return [
    {
      key: 'grid',
      label: 'Grid',
      width: 146,
      cell: (item) => <ItemPicture item={item} width={144} height={36} />,
    },
    {
      key: 'title',
      label: 'Title',
      sortBy: (item) => item.title.toLowerCase(),
      cell: (item) => <Title item={item} readsDrafts={readsDrafts} />,
    },
    {
      key: 'state',
      label: 'State',
      width: 180,
      cell: (item) => <Stamp state={item.stamp.state} edition={item.stamp.editionNumber} />,
    },
    {
      key: 'clock',
      label: 'Sample clock, MHz',
      width: 112,
      isFigure: true,
      sortBy: (item) => item.figures.numbers.sampleClockHz,
      cell: (item) => <FigureText value={itemFigures(item).clockMhz} />,
    },
    {
      key: 'span',
      label: 'Painted span, MHz',
      width: 112,
      isFigure: true,
      sortBy: (item) => item.figures.numbers.paintedSpanHz ?? -1,
      cell: (item) => <FigureText value={itemFigures(item).spanMhz} />,
    },
    {
      key: 'papr',
      label: 'PAPR, dB',
      width: 84,
      isFigure: true,
      sortBy: (item) => item.figures.measured?.paprDb ?? -1,
      cell: (item) => <FigureText value={itemFigures(item).paprDb} />,
    },
    {
      key: 'changed',
      label: 'Changed',
      width: 150,
      sortBy: (item) => item.changedAtMs,
      cell: (item) => (
        <View style={styles.changed}>
          <Text variant="small" numberOfLines={1}>
            {item.changedBy.name}
          </Text>
          <Text variant="small" tone="quiet">
            {when(item.changedAtMs)}
          </Text>
        </View>
      ),
    },
  ];
}

/** The list on a wide screen. */
export function WaveformTable({ items }: { items: readonly WaveformItem[] }) {
  const router = useRouter();
  const readsDrafts = useMay('readWaveforms');
  return (
    <Table
      label="Waveforms"
      columns={columnsFor(readsDrafts)}
      rows={items}
      keyOf={(item) => item.waveformId}
      rowHeight={68}
      isCalling={(item) => item.waitsForYourReview}
      onOpen={(item) => router.push(waveformHref(item, readsDrafts))}
      startSort={{ key: 'changed', down: true }}
    />
  );
}

const styles = StyleSheet.create({
  link: { textDecorationLine: 'none', display: 'flex', minWidth: 0 },
  changed: { minWidth: 0 },
});
