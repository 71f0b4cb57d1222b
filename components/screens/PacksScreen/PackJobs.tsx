import { useEffect, useRef } from 'react';
import { StyleSheet, View } from 'react-native';
import { useQueryClient } from '@tanstack/react-query';
import { Button } from '@/components/ui/Button';
import { Notice } from '@/components/ui/Notice';
import { Progress } from '@/components/ui/Progress';
import { Text } from '@/components/ui/Text';
import { TextLink } from '@/components/ui/TextLink';
import { color } from '@/components/ui/theme';
import { keyOf, useAct } from '@/lib/client/useApi';
import { cancelPackJob, listPackJobs, listPacks, type PackJob } from '@/lib/contracts/packs';
import { formatNumber } from '@/lib/drawing/quantities';

const steps = { rendering: 'Rendering', quantizing: 'Quantizing', writing: 'Writing', readingBack: 'Reading back' };

function stateWords(job: PackJob): string {
  if (job.state === 'waiting') return 'Waiting for its turn';
  return `${job.step ? steps[job.step] : 'Beginning'} ${formatNumber(100 * job.doneRatio)} %`;
}

/** Packs being made, and what became of those that were not. */
export function PackJobs({ jobs }: { jobs: readonly PackJob[] }) {
  const queries = useQueryClient();
  const openIds = jobs.filter((job) => job.state === 'waiting' || job.state === 'running').map((job) => job.jobId);
  const before = useRef<string[]>([]);
  useEffect(() => {
    const ended = before.current.some((id) => !openIds.includes(id));
    before.current = openIds;
    if (ended) void queries.invalidateQueries({ queryKey: keyOf(listPacks) });
  });
  const shown = jobs.filter((job) => job.state !== 'done');
  if (shown.length === 0) return null;
  return (
    <View role="list" aria-label="Packs being made" style={styles.list}>
      {shown.map((job) => (
        <View key={job.jobId} role="listitem">
          <JobRow job={job} />
        </View>
      ))}
    </View>
  );
}

export function JobRow({ job }: { job: PackJob }) {
  const cancel = useAct(cancelPackJob, [listPackJobs]);
  const name = `${job.title}${job.editionNumber ? `, edition ${job.editionNumber}` : ', draft'}, for ${job.bench.name}`;
  if (job.state === 'failed' || job.state === 'cancelled') {
    return (
      <Notice kind={job.state === 'failed' ? 'danger' : 'plain'} title={name}>
        {job.state === 'cancelled' ? 'Cancelled. Nothing was kept.' : (job.problem?.detail ?? 'It failed.')}
      </Notice>
    );
  }
  if (job.state === 'done' && job.packId) {
    return (
      <Notice
        kind="success"
        title={name}
        actions={
          <TextLink href={{ pathname: '/packs/[packId]', params: { packId: job.packId } }}>Open the pack</TextLink>
        }
      >
        Read back and proven.
      </Notice>
    );
  }
  return (
    <View style={styles.job}>
      <View style={styles.row}>
        <View style={styles.grow}>
          <Text variant="bodyStrong" tone="strong" numberOfLines={1}>
            {name}
          </Text>
          <Text variant="small" tone="quiet" role="status">
            {job.startedAgain ? `Started again after a stop. ${stateWords(job)}` : stateWords(job)}
          </Text>
        </View>
        <Button busy={cancel.isPending} onPress={() => cancel.mutate({ params: { jobId: job.jobId } })}>
          Cancel
        </Button>
      </View>
      <Progress label={`Making the pack of ${name}`} doneRatio={job.doneRatio} />
      {cancel.error ? (
        <Text variant="small" tone="danger" role="alert">
          {cancel.error.message}
        </Text>
      ) : null}
    </View>
  );
}

const styles = StyleSheet.create({
  list: { gap: 8 },
  job: { padding: 12, gap: 8, backgroundColor: color.surface.sheet, borderWidth: 1, borderColor: color.rule.line },
  row: { flexDirection: 'row', alignItems: 'center', gap: 12 },
  grow: { flexGrow: 1, flexShrink: 1, minWidth: 0 },
});
