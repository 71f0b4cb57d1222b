import { useEffect, useRef, useState } from 'react';
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

function stateWords(job: PackJob, leftSec: number | null): string {
  if (job.state === 'waiting') return 'Waiting for its turn';
  const done = `${job.step ? steps[job.step] : 'Beginning'} ${formatNumber(100 * job.doneRatio)} %`;
  return leftSec === null ? done : `${done}, about ${durationWords(leftSec)} left`;
}

const durationWords = (sec: number) => (sec < 90 ? `${Math.max(1, Math.ceil(sec))} s` : `${Math.ceil(sec / 60)} min`);

/** Too little was seen for a guess before this. */
const GUESS_FROM = { ratio: 0.05, ms: 2000 };

/** Seconds that are left, from how fast it went since this page first saw it at work; null while nobody can know. */
function useSecondsLeft({ state, doneRatio }: PackJob, seenAtMs: number): number | null {
  const [first, setFirst] = useState<{ atMs: number; ratio: number } | null>(null);
  const isRunning = state === 'running';
  if (isRunning && first === null) setFirst({ atMs: seenAtMs, ratio: doneRatio });
  if (!isRunning && first !== null) setFirst(null);
  if (!isRunning || first === null) return null;
  const ms = seenAtMs - first.atMs;
  const ratio = doneRatio - first.ratio;
  return ratio < GUESS_FROM.ratio || ms < GUESS_FROM.ms ? null : ((1 - doneRatio) * ms) / ratio / 1000;
}

/** Packs being made, and what became of those that were not. */
export function PackJobs({ jobs, seenAtMs }: { jobs: readonly PackJob[]; seenAtMs: number }) {
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
          <JobRow job={job} seenAtMs={seenAtMs} />
        </View>
      ))}
    </View>
  );
}

/** `seenAtMs`: when the server answered so. */
export function JobRow({ job, seenAtMs }: { job: PackJob; seenAtMs: number }) {
  const cancel = useAct(cancelPackJob, [listPackJobs]);
  const words = stateWords(job, useSecondsLeft(job, seenAtMs));
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
            {job.startedAgain ? `Started again after a stop. ${words}` : words}
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
