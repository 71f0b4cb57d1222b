import { useLocalSearchParams } from 'expo-router';
import { useState } from 'react';
import { StyleSheet, View } from 'react-native';
import { Button } from '@/components/ui/Button';
import { DigestChip, DigestsInView } from '@/components/ui/DigestChip';
import { Failing, Loading, NotThere } from '@/components/ui/states';
import { Notice } from '@/components/ui/Notice';
import { Stamp } from '@/components/ui/Stamp';
import { Text } from '@/components/ui/Text';
import { TextLink } from '@/components/ui/TextLink';
import { color } from '@/components/ui/theme';
import { useBreakpoint } from '@/components/ui/useBreakpoint';
import { useApi } from '@/lib/client/useApi';
import { useMay, useMe } from '@/lib/client/useSession';
import type { Edition } from '@/lib/contracts/reviews';
import { groupHistory, type HistoryLine } from '@/lib/contracts/history';
import { listRevisions, showWaveform } from '@/lib/contracts/waveforms';
import { Page } from '../Page';
import { PrimaryStrip } from '../PrimaryStrip';
import { when } from '../when';
import { AskSheet } from './AskSheet';

import { TakeBackDialog } from './TakeBackDialog';
import { WithdrawDialog } from './WithdrawDialog';

/** A waveform's editions and revisions, and where a request for a review stands. */
export function HistoryScreen({ waveformId }: { waveformId: string }) {
  const phone = useBreakpoint() === 'phone';
  const readsDrafts = useMay('readWaveforms');
  const maySave = useMay('saveWaveforms');
  const mayReview = useMay('reviewWaveforms');
  const params = useLocalSearchParams<{ ask?: string }>();
  const waveform = useApi(showWaveform, { params: { waveformId } });
  const revisions = useApi(listRevisions, { params: { waveformId }, query: {} }, { enabled: readsDrafts });
  const [asking, setAsking] = useState(params.ask === '1');
  const [takingBack, setTakingBack] = useState(false);
  const [withdrawing, setWithdrawing] = useState<Edition | null>(null);
  const data = waveform.data;
  const lines = groupHistory(revisions.data?.revisions ?? []);
  const head = data?.head ?? null;
  const open = data?.openReview ?? null;
  const mayAsk = maySave && head !== null && head.stamp.state === 'draft' && open === null;
  const ask = mayAsk ? (
    <Button kind="filled" size={phone ? 'foot' : 'usual'} fill={phone} onPress={() => setAsking(true)}>
      Ask for review
    </Button>
  ) : null;
  return (
    <Page
      title={data?.title ?? 'Waveform'}
      backTo={readsDrafts ? { pathname: '/waveforms/[waveformId]', params: { waveformId } } : '/waveforms'}
      actions={ask}
    >
      {waveform.isPending ? <Loading what="the waveform" rows={4} rowHeight={60} /> : null}
      {waveform.error && !data ? (
        waveform.error.problem?.code === 'not_found' ? (
          <NotThere />
        ) : (
          <Failing
            what={`The waveform did not load. ${waveform.error.message}`}
            onRetry={() => void waveform.refetch()}
          />
        )
      ) : null}
      {open ? (
        <Notice
          kind="warning"
          title={`Revision ${open.revisionNumber} is in review, asked by ${open.askedBy.name}, ${when(open.askedAtMs)}`}
          actions={
            <>
              <TextLink href={{ pathname: '/waveforms/[waveformId]/review', params: { waveformId } }}>
                {mayReview ? 'Open the review' : 'Look at the review'}
              </TextLink>
              {maySave ? (
                <Button kind="plain" onPress={() => setTakingBack(true)}>
                  Take it back
                </Button>
              ) : null}
            </>
          }
        >
          <View>
            {open.note ? <Text>{`“${open.note}”`}</Text> : null}
            {open.newer ? (
              <Text>{`${open.newer.savedBy.name} saved a newer revision, ${when(open.newer.savedAtMs)}.`}</Text>
            ) : null}
            {open.releasableBy.words ? <Text>{open.releasableBy.words}</Text> : null}
          </View>
        </Notice>
      ) : null}
      {data ? (
        <DigestsInView
          digests={[...data.editions, ...lines.map(({ newest }) => newest)].map((one) => one.contentDigest)}
        >
          <Editions editions={data.editions} onWithdraw={setWithdrawing} />
          {readsDrafts ? (
            <View>
              <Text variant="heading" heading={2} tone="strong" style={styles.groupHead}>
                Revisions
              </Text>
              {revisions.isPending ? <Loading what="revisions" rowHeight={52} /> : null}
              {revisions.error ? (
                <Failing
                  what={`The revisions did not load. ${revisions.error.message}`}
                  onRetry={() => void revisions.refetch()}
                />
              ) : null}
              <View role="list" aria-label="Revisions">
                {lines.map((group) => (
                  <GroupRow key={group.newest.revisionId} group={group} waveformId={waveformId} />
                ))}
              </View>
              {revisions.data?.hasOlder ? <Text tone="quiet">Older revisions are kept and not shown here.</Text> : null}
            </View>
          ) : null}
        </DigestsInView>
      ) : null}
      {phone && ask ? <PrimaryStrip>{ask}</PrimaryStrip> : null}
      {asking && head ? <AskSheet waveformId={waveformId} head={head} onClose={() => setAsking(false)} /> : null}
      {takingBack && open ? (
        <TakeBackDialog waveformId={waveformId} revisionId={open.revisionId} onClose={() => setTakingBack(false)} />
      ) : null}
      {withdrawing ? <WithdrawDialog edition={withdrawing} onClose={() => setWithdrawing(null)} /> : null}
    </Page>
  );
}

function Editions({ editions, onWithdraw }: { editions: readonly Edition[]; onWithdraw: (edition: Edition) => void }) {
  const mayWithdraw = useMay('withdrawEditions');
  const mayMake = useMay('makeEditionPacks');
  if (editions.length === 0) return <Text tone="quiet">Nothing has been released yet.</Text>;
  return (
    <View>
      <Text variant="heading" heading={2} tone="strong" style={styles.groupHead}>
        Editions
      </Text>
      <View role="list" aria-label="Editions">
        {editions.map((edition) => (
          <View key={edition.number} role="listitem" style={styles.row}>
            <Stamp state={edition.withdrawn ? 'withdrawn' : 'released'} edition={edition.number} />
            <View style={styles.grow}>
              <Text variant="bodyStrong" tone="strong" numberOfLines={1}>
                {edition.title}
              </Text>
              <Text variant="small" tone="quiet">
                {edition.withdrawn
                  ? `withdrawn by ${edition.withdrawn.by.name}, ${when(edition.withdrawn.atMs)}: ${edition.withdrawn.reason}`
                  : `released by ${edition.releasedBy.name}, ${when(edition.releasedAtMs)}`}
              </Text>
            </View>
            <DigestChip digest={edition.contentDigest} />
            {mayMake && !edition.withdrawn ? (
              <TextLink
                href={{ pathname: '/packs', params: { revisionId: edition.revisionId } }}
                label={`Make a pack of edition ${edition.number}`}
              >
                Make a pack
              </TextLink>
            ) : null}
            {mayWithdraw && !edition.withdrawn ? (
              <Button kind="grave" onPress={() => onWithdraw(edition)}>
                Withdraw
              </Button>
            ) : null}
          </View>
        ))}
      </View>
    </View>
  );
}

function GroupRow({ group, waveformId }: { group: HistoryLine; waveformId: string }) {
  const { newest: last, revisions } = group;
  const first = revisions.at(-1)!;
  const me = useMe();
  const mayPack = me.rights.includes('makeDraftPacks') && last.savedBy.personId === me.personId;
  const numbers = revisions.length === 1 ? `Revision ${last.number}` : `Revisions ${first.number} to ${last.number}`;
  return (
    <View role="listitem" style={styles.row}>
      <View style={styles.grow}>
        <TextLink href={{ pathname: '/waveforms/[waveformId]', params: { waveformId, revision: last.revisionId } }}>
          {last.isHead ? `${numbers}, newest` : numbers}
        </TextLink>
        <Text variant="small" tone="quiet">
          {`${last.savedBy.name}, ${when(last.savedAtMs)}${last.isSide ? ', kept beside: somebody saved first' : ''}`}
        </Text>
        {last.stamp.cameBack && last.stamp.reason ? (
          <Text variant="small">
            {`${last.stamp.cameBack === 'returned' ? 'Returned' : 'Taken back'} by ${last.stamp.by.name}: ${last.stamp.reason}`}
          </Text>
        ) : null}
      </View>
      <Stamp state={last.stamp.state} edition={last.stamp.editionNumber} />
      <DigestChip digest={last.contentDigest} />
      <TextLink
        href={{ pathname: '/waveforms/[waveformId]/fit', params: { waveformId, revision: last.revisionId } }}
        label={`Fit of revision ${last.number}`}
      >
        Fit
      </TextLink>
      {mayPack && last.stamp.state === 'draft' ? (
        <TextLink
          href={{ pathname: '/packs', params: { revisionId: last.revisionId } }}
          label={`Make a draft pack of revision ${last.number}`}
        >
          Make a draft pack
        </TextLink>
      ) : null}
    </View>
  );
}

const styles = StyleSheet.create({
  groupHead: { paddingBottom: 6, borderBottomWidth: 1.5, borderBottomColor: color.rule.strong },
  row: {
    minHeight: 52,
    flexDirection: 'row',
    flexWrap: 'wrap',
    alignItems: 'center',
    gap: 12,
    paddingVertical: 8,
    paddingHorizontal: 4,
    borderBottomWidth: 1,
    borderBottomColor: color.rule.hair,
  },
  grow: { flexGrow: 1, flexShrink: 1, minWidth: 180 },
});
