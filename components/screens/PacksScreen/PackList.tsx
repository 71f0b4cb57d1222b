import { Link, useRouter } from 'expo-router';
import { StyleSheet, View } from 'react-native';
import { DigestChip, DigestsInView } from '@/components/ui/DigestChip';
import { Figure } from '@/components/ui/Figure';
import { Stamp } from '@/components/ui/Stamp';
import { Table, type TableColumn } from '@/components/ui/Table';
import { Text } from '@/components/ui/Text';
import { color } from '@/components/ui/theme';
import type { Pack } from '@/lib/contracts/packs';
import { formatNumber, formatQuantity } from '@/lib/drawing/quantities';
import { when } from '../when';

const hrefOf = (pack: Pack) => ({ pathname: '/packs/[packId]' as const, params: { packId: pack.packId } });
const sizeOf = (pack: Pack) => formatQuantity(pack.fileBytes, 'B', 3);
const evmOf = (pack: Pack) => (pack.evmDb === null ? 'none' : formatNumber(pack.evmDb, 1, true));
const benchOf = (pack: Pack) => `${pack.bench.name}, version ${pack.bench.version}`;

const columns: TableColumn<Pack>[] = [
  {
    key: 'title',
    label: 'Waveform',
    sortBy: (pack) => pack.title.toLowerCase(),
    cell: (pack) => (
      <Link href={hrefOf(pack)} style={{ textDecorationLine: 'none', display: 'flex' }}>
        <Text variant="bodyStrong" tone="strong" numberOfLines={1}>
          {pack.title}
        </Text>
      </Link>
    ),
  },
  {
    key: 'state',
    label: 'Edition',
    width: 180,
    cell: (pack) => <Stamp state={pack.state} edition={pack.editionNumber} />,
  },
  {
    key: 'bench',
    label: 'Bench',
    sortBy: (pack) => pack.bench.name.toLowerCase(),
    cell: (pack) => (
      <Text variant="small" numberOfLines={1}>
        {benchOf(pack)}
      </Text>
    ),
  },
  {
    key: 'size',
    label: 'Size',
    width: 84,
    isFigure: true,
    sortBy: (pack) => pack.fileBytes,
    cell: (pack) => <Figure variant="figureSmall" value={sizeOf(pack).value} unit={sizeOf(pack).unit} />,
  },
  {
    key: 'evm',
    label: 'EVM, dB',
    width: 84,
    isFigure: true,
    sortBy: (pack) => pack.evmDb ?? 0,
    cell: (pack) => <Text variant="figureSmall">{evmOf(pack)}</Text>,
  },
  {
    key: 'made',
    label: 'Made',
    width: 140,
    sortBy: (pack) => pack.madeAtMs,
    cell: (pack) => (
      <>
        <Text variant="small" numberOfLines={1}>
          {pack.madeBy.name}
        </Text>
        <Text variant="small" tone="quiet">
          {when(pack.madeAtMs)}
        </Text>
      </>
    ),
  },
  { key: 'digest', label: 'Digest', width: 140, cell: (pack) => <DigestChip digest={pack.vectorDigest} /> },
];

export function PackTable({ packs }: { packs: readonly Pack[] }) {
  const router = useRouter();
  return (
    <DigestsInView digests={packs.map((pack) => pack.vectorDigest)}>
      <Table
        label="Packs"
        columns={columns}
        rows={packs}
        keyOf={(pack) => pack.packId}
        onOpen={(pack) => router.push(hrefOf(pack))}
      />
    </DigestsInView>
  );
}

/** The list on a phone: each row a card, the whole card the link. */
export function PackCards({ packs }: { packs: readonly Pack[] }) {
  return (
    <View role="list" aria-label="Packs" style={styles.list}>
      {packs.map((pack) => (
        <View key={pack.packId} role="listitem">
          <Link href={hrefOf(pack)} style={styles.link}>
            <View style={styles.card}>
              <Text variant="heading" tone="strong" numberOfLines={1}>
                {pack.title}
              </Text>
              <View style={styles.row}>
                <Stamp state={pack.state} edition={pack.editionNumber} />
                <Text variant="small" tone="quiet" numberOfLines={1} style={styles.shrink}>
                  {benchOf(pack)}
                </Text>
              </View>
              <View style={styles.row}>
                <Figure variant="figureSmall" value={sizeOf(pack).value} unit={sizeOf(pack).unit} />
                <Text variant="small" tone="quiet">
                  EVM <Text variant="figureSmall">{evmOf(pack)}</Text>
                  {pack.evmDb === null ? '' : ' dB'}
                </Text>
                <Text variant="figureSmall" tone="quiet" style={styles.end}>
                  {pack.vectorDigest.replace('sha256:', '').slice(0, 8)}
                </Text>
              </View>
              <Text variant="small" tone="quiet" numberOfLines={1}>
                {`${pack.madeBy.name}, ${when(pack.madeAtMs)}`}
              </Text>
            </View>
          </Link>
        </View>
      ))}
    </View>
  );
}

const styles = StyleSheet.create({
  list: { gap: 10 },
  link: { textDecorationLine: 'none', display: 'flex' },
  card: {
    flex: 1,
    minWidth: 0,
    gap: 5,
    paddingVertical: 9,
    paddingHorizontal: 12,
    backgroundColor: color.surface.sheet,
    borderWidth: 1,
    borderColor: color.rule.line,
  },
  row: { flexDirection: 'row', alignItems: 'center', gap: 12, minHeight: 24 },
  shrink: { flexShrink: 1 },
  end: { marginLeft: 'auto' },
});
