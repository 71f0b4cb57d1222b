import { useLocalSearchParams } from 'expo-router';
import { useState } from 'react';
import { StyleSheet, View } from 'react-native';
import { Button } from '@/components/ui/Button';
import { ChoiceField } from '@/components/ui/ChoiceField';
import { FindField } from '@/components/ui/FindField';
import { Empty, Failing, Loading } from '@/components/ui/states';
import { Text } from '@/components/ui/Text';
import { useBreakpoint } from '@/components/ui/useBreakpoint';
import { useApi } from '@/lib/client/useApi';
import { listPackJobs, listPacks } from '@/lib/contracts/packs';
import { Page } from '../Page';
import { PrimaryStrip } from '../PrimaryStrip';
import { useLater } from '../useLater';
import { MakePackSheet } from './MakePackSheet';
import { PackCards, PackTable } from './PackList';
import { PackJobs } from './PackJobs';

/** Packs that the person may see, newest release first, and those being made. */
export function PacksScreen() {
  const phone = useBreakpoint() === 'phone';
  const { revisionId } = useLocalSearchParams<{ revisionId?: string }>();
  const [find, setFind] = useState('');
  const [bench, setBench] = useState('');
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
  const benchNames = [...new Set((packs.data?.items ?? []).map((pack) => pack.bench.name))].sort();
  const shown = (packs.data?.items ?? []).filter((pack) => bench === '' || pack.bench.name === bench);
  return (
    <Page title="Packs" actions={make}>
      <View style={phone ? styles.stack : styles.filters}>
        {benchNames.length > 1 ? (
          <ChoiceField
            label="Bench"
            value={bench}
            onChange={setBench}
            choices={[{ value: '', label: 'Every bench' }, ...benchNames.map((name) => ({ value: name, label: name }))]}
          />
        ) : null}
        <FindField
          label="Find a title or a digest"
          value={find}
          onChange={setFind}
          {...(phone ? {} : { style: styles.find })}
        />
      </View>
      <PackJobs jobs={open} seenAtMs={jobs.dataUpdatedAt} />
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
      {shown.length > 0 ? phone ? <PackCards packs={shown} /> : <PackTable packs={shown} /> : null}
      {packs.data && packs.data.more > 0 ? (
        <Text tone="quiet">{`${packs.data.more} more. Find one by its title or digest.`}</Text>
      ) : null}
      {phone ? <PrimaryStrip>{make}</PrimaryStrip> : null}
      {making ? <MakePackSheet revisionId={revisionId ?? null} onClose={() => setMaking(false)} /> : null}
    </Page>
  );
}

const styles = StyleSheet.create({
  filters: { flexDirection: 'row', alignItems: 'flex-end', gap: 16 },
  stack: { gap: 12 },
  find: { width: 320, marginLeft: 'auto' },
});
