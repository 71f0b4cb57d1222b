import { Link, useLocalSearchParams } from 'expo-router';
import { useState } from 'react';
import { StyleSheet, View } from 'react-native';
import { Button } from '@/components/ui/Button';
import { DigestChip } from '@/components/ui/DigestChip';
import { Empty, Failing, Loading } from '@/components/ui/states';
import { Stamp } from '@/components/ui/Stamp';
import { Text } from '@/components/ui/Text';
import { TextField } from '@/components/ui/TextField';
import { color } from '@/components/ui/theme';
import { useBreakpoint } from '@/components/ui/useBreakpoint';
import { useApi } from '@/lib/client/useApi';
import { listPackJobs, listPacks, type Pack } from '@/lib/contracts/packs';
import { formatNumber, formatQuantity } from '@/lib/drawing/quantities';
import { Page } from '../Page';
import { useLater } from '../useLater';
import { when } from '../when';
import { MakePackSheet } from './MakePackSheet';
import { PackJobs } from './PackJobs';

/** Packs that the person may see, newest release first, and those being made. */
export function PacksScreen() {
  const phone = useBreakpoint() === 'phone';
  const { revisionId } = useLocalSearchParams<{ revisionId?: string }>();
  const [find, setFind] = useState('');
  const [making, setMaking] = useState(revisionId !== undefined);
  const wanted = useLater(find.trim(), 250);
  const packs = useApi(
    listPacks,
    { query: wanted ? { find: wanted } : {} },
    { placeholderData: (before) => before, refetchInterval: 30_000 },
  );
  const jobs = useApi(
    listPackJobs,
    {},
    {
      refetchInterval: (query) =>
        query.state.data?.items.some((job) => job.state === 'waiting' || job.state === 'running') ? 700 : 15_000,
    },
  );
  const make = (
    <Button kind="filled" size={phone ? 'foot' : 'usual'} fill={phone} onPress={() => setMaking(true)}>
      Make a pack
    </Button>
  );
  const open = jobs.data?.items ?? [];
  return (
    <Page title="Packs" actions={make}>
      <TextField
        label="Find a title or a digest"
        quietLabel
        placeholder="Find a title or a digest"
        value={find}
        onChangeText={setFind}
        autoCapitalize="none"
        style={phone ? styles.wholeWidth : styles.find}
      />
      <PackJobs jobs={open} />
      {packs.isPending ? <Loading what="packs" /> : null}
      {packs.error && !packs.data ? (
        <Failing what={`The list did not load. ${packs.error.message}`} onRetry={() => void packs.refetch()} />
      ) : null}
      {packs.data?.items.length === 0 ? (
        wanted ? (
          <Empty action={<Button onPress={() => setFind('')}>Clear</Button>}>{`Nothing matches “${wanted}”.`}</Empty>
        ) : (
          <Empty>No packs yet. A pack is made from an edition and a bench profile.</Empty>
        )
      ) : null}
      {packs.data && packs.data.items.length > 0 ? (
        <View role="list" aria-label="Packs" style={styles.list}>
          {packs.data.items.map((pack) => (
            <View key={pack.packId} role="listitem">
              <PackRow pack={pack} />
            </View>
          ))}
        </View>
      ) : null}
      {packs.data && packs.data.more > 0 ? (
        <Text tone="quiet">{`${packs.data.more} more. Find one by its title or digest.`}</Text>
      ) : null}
      {phone ? <View style={styles.strip}>{make}</View> : null}
      {making ? <MakePackSheet revisionId={revisionId ?? null} onClose={() => setMaking(false)} /> : null}
    </Page>
  );
}

function PackRow({ pack }: { pack: Pack }) {
  const wide = useBreakpoint() !== 'phone';
  const size = formatQuantity(pack.fileBytes, 'B', 3);
  return (
    <View style={[styles.row, wide ? styles.rowWide : null]}>
      <Link href={{ pathname: '/packs/[packId]', params: { packId: pack.packId } }} style={styles.link}>
        <View style={styles.names}>
          <Text variant="bodyStrong" tone="strong" numberOfLines={1}>
            {pack.title}
          </Text>
          <Text variant="small" tone="quiet" numberOfLines={1}>
            {`${pack.bench.name}, version ${pack.bench.version}`}
          </Text>
        </View>
      </Link>
      <View style={wide ? styles.stamp : null}>
        <Stamp state={pack.state} edition={pack.editionNumber} />
      </View>
      <View style={styles.facts}>
        <View style={wide ? styles.size : null}>
          <Text variant="figureSmall">{`${size.value} ${size.unit}`}</Text>
        </View>
        <View style={wide ? styles.evm : null}>
          <Text variant="figureSmall">
            {pack.evmDb === null ? 'no EVM' : `EVM ${formatNumber(pack.evmDb, 1, true)} dB`}
          </Text>
        </View>
        <DigestChip digest={pack.vectorDigest} />
        <View style={wide ? styles.made : null}>
          <Text variant="small">{pack.madeBy.name}</Text>
          <Text variant="small" tone="quiet">
            {when(pack.madeAtMs)}
          </Text>
        </View>
      </View>
    </View>
  );
}

const styles = StyleSheet.create({
  find: { width: 320 },
  wholeWidth: { width: '100%' },
  list: { borderWidth: 1, borderColor: color.rule.line, backgroundColor: color.surface.sheet },
  row: { padding: 12, gap: 8, borderBottomWidth: 1, borderBottomColor: color.rule.hair },
  rowWide: { flexDirection: 'row', alignItems: 'center', gap: 20, paddingHorizontal: 20, minHeight: 60 },
  link: { textDecorationLine: 'none', display: 'flex', flexGrow: 1, flexShrink: 1, minWidth: 0 },
  names: { flexShrink: 1, minWidth: 0, minHeight: 44, justifyContent: 'center' },
  stamp: { width: 190, flexShrink: 0 },
  facts: { flexDirection: 'row', flexWrap: 'wrap', alignItems: 'center', gap: 12 },
  size: { width: 80, alignItems: 'flex-end' },
  evm: { width: 120, alignItems: 'flex-end' },
  made: { width: 150 },
  strip: {
    position: 'sticky' as 'absolute',
    bottom: 0,
    marginTop: 'auto',
    marginHorizontal: -12,
    marginBottom: -12,
    padding: 10,
    paddingHorizontal: 12,
    flexDirection: 'row',
    backgroundColor: color.surface.trough,
    borderTopWidth: 1,
    borderTopColor: color.rule.line,
  },
});
