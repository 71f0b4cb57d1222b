import { useRouter } from 'expo-router';
import { useEffect, useState } from 'react';
import { ScrollView, StyleSheet, View } from 'react-native';
import { Button } from '@/components/ui/Button';
import { FindField, isKeyOfPage } from '@/components/ui/FindField';
import { Empty, Failing, Loading } from '@/components/ui/states';
import { useBreakpoint } from '@/components/ui/useBreakpoint';
import { AnyOf, OneOf } from '@/components/ui/WordsToPress';
import { useConnectionLost } from '@/lib/client/connection';
import { useApi } from '@/lib/client/useApi';
import { useMay } from '@/lib/client/useSession';
import { listWaveforms } from '@/lib/contracts/waveforms';
import type { RevisionState } from '@/lib/contracts/reviews';
import { Page } from '../Page';
import { PrimaryStrip } from '../PrimaryStrip';
import { useLater } from '../useLater';
import { WaveformCards } from './WaveformCards';
import { WaveformTable } from './WaveformTable';

type Filter = 'all' | RevisionState;

/** What the team works on, last changed first. */
export function WaveformsScreen() {
  const router = useRouter();
  const phone = useBreakpoint() === 'phone';
  const mayMake = useMay('saveWaveforms');
  const readsDrafts = useMay('readWaveforms');
  const [filter, setFilter] = useState<Filter>('all');
  const [mine, setMine] = useState(false);
  const [find, setFind] = useState('');
  const [finding, setFinding] = useState(false);
  const needsConnection = useConnectionLost() ? 'Needs a connection.' : null;
  const wanted = useLater(find.trim(), 250);
  const list = useApi(
    listWaveforms,
    {
      query: {
        ...(filter === 'all' ? {} : { state: filter }),
        ...(mine ? { mine: 'true' as const } : {}),
        ...(wanted ? { find: wanted } : {}),
      },
    },
    { placeholderData: (before) => before, refetchInterval: 60_000 },
  );
  const make = () => router.push('/start');

  useEffect(() => {
    const onKey = (event: KeyboardEvent) => {
      if (event.key === 'ArrowDown' && document.activeElement === document.body)
        document.querySelector<HTMLElement>('[data-row] a[href]')?.focus();
      if (!isKeyOfPage(event)) return;
      if (event.key === '/') setFinding(true);
      if (event.key.toLowerCase() === 'n' && mayMake && !needsConnection) router.push('/start');
    };
    window.addEventListener('keydown', onKey);
    return () => window.removeEventListener('keydown', onKey);
  }, [mayMake, needsConnection, router]);

  const counts = list.data?.counts;
  const choices = (
    [
      ['all', 'All', counts?.all],
      ['draft', 'Draft', counts?.draft],
      ['inReview', 'In review', counts?.inReview],
      ['released', 'Released', counts?.released],
      ['withdrawn', 'Withdrawn', counts?.withdrawn],
    ] as const
  )
    .filter(([value]) => readsDrafts || (value !== 'draft' && value !== 'inReview'))
    .map(([value, label, count]) => ({ value, label, ...(count === undefined ? {} : { count }) }));

  const field = (
    <FindField
      label="Find a title or a digest"
      value={find}
      onChange={setFind}
      onLeave={() => setFinding(false)}
      autoFocus={phone}
      {...(phone ? {} : { style: styles.find })}
    />
  );

  return (
    <Page
      title="Waveforms"
      headAside={
        <Button
          kind="plain"
          onPress={() => {
            setFind('');
            setFinding(!finding);
          }}
        >
          {finding ? 'Close' : 'Find'}
        </Button>
      }
      headField={finding ? field : null}
      actions={
        mayMake ? (
          <Button kind="filled" disabledBecause={needsConnection} onPress={make}>
            New waveform
          </Button>
        ) : null
      }
    >
      <View style={styles.filters}>
        <ScrollView horizontal showsHorizontalScrollIndicator={false} style={styles.words}>
          <OneOf<Filter> label="State" bare choices={choices} value={filter} onChange={setFilter} />
        </ScrollView>
        {phone ? null : (
          <>
            {readsDrafts ? (
              <AnyOf
                label="Whose"
                bare
                choices={[{ value: 'mine', label: 'Mine' }]}
                values={mine ? ['mine'] : []}
                onToggle={(_word, on) => setMine(on)}
              />
            ) : null}
            {field}
          </>
        )}
      </View>
      {list.isPending ? <Loading what="waveforms" /> : null}
      {list.error && !list.data ? (
        <Failing what={`The list did not load. ${list.error.message}`} onRetry={() => void list.refetch()} />
      ) : null}
      {list.data && list.data.items.length === 0 ? (
        <NoRows
          find={wanted}
          mayMake={mayMake}
          onMake={make}
          onClear={() => setFind('')}
          filtered={filter !== 'all' || mine}
          readsDrafts={readsDrafts}
        />
      ) : null}
      {list.data && list.data.items.length > 0 ? (
        phone ? (
          <WaveformCards items={list.data.items} />
        ) : (
          <WaveformTable items={list.data.items} />
        )
      ) : null}
      {phone && mayMake ? (
        <PrimaryStrip>
          <Button kind="filled" size="foot" disabledBecause={needsConnection} onPress={make} fill>
            New waveform
          </Button>
        </PrimaryStrip>
      ) : null}
    </Page>
  );
}

function NoRows({
  find,
  filtered,
  mayMake,
  readsDrafts,
  onMake,
  onClear,
}: {
  find: string;
  filtered: boolean;
  mayMake: boolean;
  readsDrafts: boolean;
  onMake: () => void;
  onClear: () => void;
}) {
  if (find) return <Empty action={<Button onPress={onClear}>Clear</Button>}>{`Nothing matches “${find}”.`}</Empty>;
  if (filtered) return <Empty>No waveform is in this state.</Empty>;
  if (!readsDrafts) return <Empty>Nothing has been released yet. Packs appear after a review.</Empty>;
  return (
    <Empty action={mayMake ? <Button onPress={onMake}>New waveform</Button> : null}>
      No waveforms yet. Start from a preset or a bare grid.
    </Empty>
  );
}

const styles = StyleSheet.create({
  filters: { flexDirection: 'row', alignItems: 'flex-start', gap: 12 },
  words: { flexGrow: 1, flexShrink: 1 },
  find: { width: 270 },
});
