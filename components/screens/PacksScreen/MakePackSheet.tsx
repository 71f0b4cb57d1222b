import { useRouter } from 'expo-router';
import { useEffect, useState } from 'react';
import { StyleSheet, View } from 'react-native';
import { Button } from '@/components/ui/Button';
import { ChoiceField } from '@/components/ui/ChoiceField';
import { Loading } from '@/components/ui/states';
import { Notice } from '@/components/ui/Notice';
import { Sheet } from '@/components/ui/overlay';
import { Text } from '@/components/ui/Text';
import { useAct, useApi } from '@/lib/client/useApi';
import { listBenches } from '@/lib/contracts/benches';
import { listPackJobs, listPacks, makePack, showPackJob } from '@/lib/contracts/packs';
import { listWaveforms, showRevision } from '@/lib/contracts/waveforms';
import { JobRow } from './PackJobs';

/** An edition (or an own draft, given by its address) and a bench profile: the pack is made while you wait or go on. */
export function MakePackSheet({ revisionId, onClose }: { revisionId: string | null; onClose: () => void }) {
  const router = useRouter();
  const editions = useApi(listWaveforms, { query: {} }, { enabled: revisionId === null });
  const given = useApi(showRevision, { params: { revisionId: revisionId ?? '' } }, { enabled: revisionId !== null });
  const benches = useApi(listBenches, {});
  const choices = (editions.data?.items ?? []).flatMap((item) =>
    item.newestEdition
      ? [{ value: item.newestEdition.revisionId, label: `${item.title}, edition ${item.newestEdition.number}` }]
      : [],
  );
  const [edition, setEdition] = useState('');
  const [bench, setBench] = useState('');
  const revision = revisionId ?? (edition || (choices[0]?.value ?? ''));
  const benchId = bench || (benches.data?.items[0]?.benchId ?? '');
  const make = useAct(makePack, [listPackJobs, listPacks]);
  const jobId = make.data?.jobId ?? null;
  const job = useApi(
    showPackJob,
    { params: { jobId: jobId ?? '' } },
    {
      enabled: jobId !== null,
      refetchInterval: (query) =>
        query.state.data?.state === 'waiting' || query.state.data?.state === 'running' ? 500 : false,
    },
  );
  const shown = job.data ?? make.data ?? null;
  const packId = shown?.state === 'done' ? shown.packId : null;
  useEffect(() => {
    if (packId) router.push({ pathname: '/packs/[packId]', params: { packId } });
  }, [packId, router]);
  const draft = given.data && given.data.revision.stamp.state !== 'released';
  const loading = benches.isPending || (revisionId === null ? editions.isPending : given.isPending);
  const missing =
    benches.data?.items.length === 0
      ? 'No bench profile yet. An admin can add one.'
      : revision === ''
        ? 'Nothing has been released yet.'
        : null;
  return (
    <Sheet
      title="Make a pack"
      onClose={onClose}
      foot={
        <Button
          kind="filled"
          size="foot"
          fill
          busy={make.isPending || shown?.state === 'running' || shown?.state === 'waiting'}
          disabledBecause={missing}
          onPress={() =>
            make.mutate({
              body: { revisionId: revision, benchId },
              idempotencyKey: crypto.getRandomValues(new Uint32Array(4)).join('-'),
            })
          }
        >
          Make the pack
        </Button>
      }
    >
      <View style={styles.body}>
        {loading ? <Loading what="editions and benches" rows={2} rowHeight={52} /> : null}
        {revisionId === null ? (
          choices.length > 0 ? (
            <ChoiceField label="Edition" value={revision} onChange={setEdition} choices={choices} />
          ) : null
        ) : given.data ? (
          <Text>
            {given.data.revision.stamp.editionNumber && !draft
              ? `${given.data.revision.title}, edition ${given.data.revision.stamp.editionNumber}`
              : `${given.data.revision.title}, revision ${given.data.revision.number}`}
          </Text>
        ) : null}
        {draft ? (
          <Notice kind="warning" title="Draft, not for the bench.">
            The pack says so in its name, its manifest and its card. Only you can download it.
          </Notice>
        ) : null}
        {(benches.data?.items.length ?? 0) > 0 ? (
          <ChoiceField
            label="Bench profile"
            value={benchId}
            onChange={setBench}
            choices={(benches.data?.items ?? []).map((item) => ({
              value: item.benchId,
              label: `${item.name}, version ${item.newest.version}`,
            }))}
          />
        ) : null}
        {missing ? <Text tone="quiet">{missing}</Text> : null}
        {make.error ? (
          <Notice kind="danger" title="The pack was not begun.">
            <View>
              <Text>{make.error.message}</Text>
              {(make.error.problem?.issues ?? []).map((issue) => (
                <Text key={issue.pointer + issue.message} variant="small">
                  {issue.message}
                </Text>
              ))}
            </View>
          </Notice>
        ) : null}
        {shown ? <JobRow job={shown} seenAtMs={job.dataUpdatedAt || make.submittedAt} /> : null}
        {shown && (shown.state === 'waiting' || shown.state === 'running') ? (
          <Text variant="small" tone="quiet">
            You can close this; it goes on and stands in the list.
          </Text>
        ) : null}
      </View>
    </Sheet>
  );
}

const styles = StyleSheet.create({ body: { gap: 14, paddingTop: 4 } });
