import { useRouter } from 'expo-router';
import { useState } from 'react';
import { StyleSheet, View } from 'react-native';
import { Button } from '@/components/ui/Button';
import { ChoiceField } from '@/components/ui/ChoiceField';
import { DigestChip } from '@/components/ui/DigestChip';
import { FigureRow } from '@/components/ui/Figure';
import { Empty, Failing, Forbidden, Loading, NotThere } from '@/components/ui/states';
import { Notice } from '@/components/ui/Notice';
import { Stamp } from '@/components/ui/Stamp';
import { Text } from '@/components/ui/Text';
import { TextLink } from '@/components/ui/TextLink';
import { color } from '@/components/ui/theme';
import { showToast } from '@/components/ui/toast';
import { useBreakpoint } from '@/components/ui/useBreakpoint';
import { useApi } from '@/lib/client/useApi';
import { useMay } from '@/lib/client/useSession';
import { listBenches } from '@/lib/contracts/benches';
import { showFit, type Fit } from '@/lib/contracts/fit';
import { showRevision, showWaveform, type OpenedRevision } from '@/lib/contracts/waveforms';
import { Page } from '../Page';
import { FindingCard, verdictWord } from './FindingCard';
import { useRemedies } from './useRemedies';

/** A revision against a bench: what misses, by how much, and the remedy that is one press away. */
export function FitScreen({ waveformId, revisionId }: { waveformId: string; revisionId: string | null }) {
  const mayRead = useMay('readWaveforms');
  const waveform = useApi(showWaveform, { params: { waveformId } }, { enabled: mayRead });
  const benches = useApi(listBenches, {}, { enabled: mayRead });
  const [benchId, setBenchId] = useState<string | null>(null);
  const wanted = revisionId ?? waveform.data?.head?.revisionId ?? null;
  const revision = useApi(showRevision, { params: { revisionId: wanted ?? '' } }, { enabled: wanted !== null });
  const bench = benchId ?? benches.data?.items[0]?.benchId ?? null;
  const fit = useApi(
    showFit,
    { params: { revisionId: wanted ?? '' }, query: { benchId: bench ?? '' } },
    {
      enabled: wanted !== null && bench !== null,
      placeholderData: (before) => before,
      refetchInterval: (query) => (query.state.data?.levels === 'measuring' ? 1000 : false),
    },
  );
  const failure = waveform.error ?? benches.error ?? revision.error;
  const back = { pathname: '/waveforms/[waveformId]' as const, params: { waveformId } };
  if (!mayRead)
    return (
      <Page title="Fit" backTo="/waveforms">
        <Forbidden />
      </Page>
    );
  if (failure)
    return (
      <Page title="Fit" backTo="/waveforms">
        {failure.problem?.code === 'not_found' ? (
          <NotThere />
        ) : (
          <Failing
            what={`The fit did not load. ${failure.message}`}
            onRetry={() => void Promise.all([waveform.refetch(), benches.refetch(), revision.refetch()])}
          />
        )}
      </Page>
    );
  if (!revision.data || !benches.data)
    return (
      <Page title="Fit" backTo={back}>
        <Loading what="the fit" rows={4} rowHeight={90} />
      </Page>
    );
  if (benches.data.items.length === 0)
    return (
      <Page title="Fit" backTo={back}>
        <Empty>No bench profile yet. An admin can add one.</Empty>
      </Page>
    );
  return (
    <LoadedFit
      waveformId={waveformId}
      opened={revision.data}
      benches={benches.data.items.map((item) => ({
        value: item.benchId,
        label: `${item.name}, version ${item.newest.version}`,
      }))}
      benchId={bench!}
      onBench={setBenchId}
      fit={fit.data ?? null}
      failure={
        fit.error ? { words: `The fit did not load. ${fit.error.message}`, retry: () => void fit.refetch() } : null
      }
    />
  );
}

interface LoadedProps {
  waveformId: string;
  opened: OpenedRevision;
  benches: { value: string; label: string }[];
  benchId: string;
  onBench: (benchId: string) => void;
  fit: Fit | null;
  failure: { words: string; retry: () => void } | null;
}

function LoadedFit({ waveformId, opened, benches, benchId, onBench, fit, failure }: LoadedProps) {
  const router = useRouter();
  const phone = useBreakpoint() === 'phone';
  const maySave = useMay('saveWaveforms');
  const { revision } = opened;
  const mayChange = maySave && revision.isHead && revision.stamp.state === 'draft';
  const remedies = useRemedies(opened, waveformId);
  const misses = fit?.findings.filter((finding) => finding.verdict === 'misses') ?? [];
  const unjudged = fit?.findings.filter((finding) => finding.verdict === 'cannotJudge') ?? [];
  const met = fit?.findings.filter((finding) => finding.verdict === 'meets') ?? [];
  const first = misses.flatMap((finding) => (finding.remedies[0] ? [finding.remedies[0]] : []));
  const current = { waveformId: waveformId, revisionId: revision.revisionId };
  const why =
    revision.stamp.state === 'released' || revision.stamp.state === 'withdrawn'
      ? 'This edition cannot change. Make a new draft with this remedy.'
      : !mayChange
        ? revision.stamp.state === 'inReview'
          ? 'This revision is in review and cannot change. Draw on in a new draft.'
          : !revision.isHead
            ? 'A newer revision exists. Open it to change it.'
            : 'You can look. Changing needs the author role.'
        : null;
  const applyAll = async () => {
    if (first.length === 0) return;
    const undo = await remedies.applyAll(benchId, first[0]!.changes);
    if (undo) showToast(first.length === 1 ? 'Change applied' : `${first.length} changes applied`, undo);
  };
  const primary =
    mayChange && first.length > 0 ? (
      <Button
        kind="filled"
        size={phone ? 'foot' : 'usual'}
        fill={phone}
        busy={remedies.busy}
        onPress={() => void applyAll()}
      >
        {first.length === 1
          ? 'Apply 1 change'
          : first.length === 2
            ? 'Apply both changes'
            : `Apply ${first.length} changes`}
      </Button>
    ) : revision.stamp.state === 'released' ? (
      <Button
        kind="filled"
        size={phone ? 'foot' : 'usual'}
        fill={phone}
        disabledBecause={
          misses.some((finding) => finding.hard) ? 'A hard limit of this bench is missed: choose another bench.' : null
        }
        onPress={() => router.push({ pathname: '/packs', params: { revisionId: current.revisionId } })}
      >
        Make a pack
      </Button>
    ) : mayChange && fit && misses.length === 0 ? (
      <Button
        kind="filled"
        size={phone ? 'foot' : 'usual'}
        fill={phone}
        onPress={() => router.push({ pathname: '/waveforms/[waveformId]/history', params: { waveformId, ask: '1' } })}
      >
        Ask for review
      </Button>
    ) : null;
  return (
    <Page
      title="Fit"
      backTo={{ pathname: '/waveforms/[waveformId]', params: { waveformId } }}
      actions={primary}
      foot={phone && primary ? <View style={styles.foot}>{primary}</View> : undefined}
    >
      <View style={phone ? styles.stack : styles.columns}>
        <View style={phone ? styles.stack : styles.left}>
          <ChoiceField label="Bench profile" value={benchId} onChange={onBench} choices={benches} />
          {failure ? <Failing what={failure.words} onRetry={failure.retry} /> : null}
          {fit ? (
            <View role="status">
              <Text variant="title" heading={2} tone="strong">
                {misses.length === 0
                  ? unjudged.length > 0
                    ? `Nothing misses; ${unjudged.length} of ${fit.findings.length} checks cannot be judged`
                    : `Everything fits ${fit.bench.name}.`
                  : `${misses.length} of ${fit.findings.length} checks ${misses.length === 1 ? 'needs' : 'need'} a change`}
              </Text>
            </View>
          ) : failure ? null : (
            <Loading what="the fit" rows={3} rowHeight={110} />
          )}
          <View style={styles.titleRow}>
            <Text variant="small" tone="quiet" style={styles.shrink}>
              {revision.title}
            </Text>
            <Stamp state={revision.stamp.state} edition={revision.stamp.editionNumber} />
            <DigestChip digest={revision.contentDigest} />
          </View>
          {fit && !fit.bench.isNewest ? <Notice>{`${fit.bench.name} changed. Check again.`}</Notice> : null}
          {fit && fit.notSupportedYet.length > 0 ? (
            <Notice kind="warning" title="No pack can be made for this bench yet.">
              <View>
                {fit.notSupportedYet.map((issue) => (
                  <Text key={issue.pointer} variant="small">
                    {`${issue.pointer}: ${issue.message}`}
                  </Text>
                ))}
              </View>
            </Notice>
          ) : null}
          {remedies.problem ? (
            <Notice
              kind="danger"
              title="The change was not saved."
              actions={
                <TextLink href={{ pathname: '/waveforms/[waveformId]', params: { waveformId } }}>
                  Open the newer
                </TextLink>
              }
            >
              {remedies.problem}
            </Notice>
          ) : null}
          {why && misses.some((finding) => finding.remedies.length > 0) ? <Notice>{why}</Notice> : null}
          {[...misses, ...unjudged].map((finding) => (
            <FindingCard
              key={finding.check}
              finding={finding}
              busy={remedies.busy}
              onApply={
                mayChange
                  ? (remedy) =>
                      void remedies.apply(remedy.changes).then((undo) => {
                        if (undo) showToast('Change applied', undo);
                      })
                  : null
              }
            />
          ))}
        </View>
        {met.length > 0 ? (
          <View style={phone ? null : styles.right}>
            <Text variant="small" tone="quiet" style={styles.metHead}>
              {met.length === 1 ? '1 check met' : `${met.length} checks met`}
            </Text>
            {met.map((finding) => (
              <FigureRow
                key={finding.check}
                name={finding.title}
                value={finding.found}
                verdict={verdictWord(finding)}
              />
            ))}
          </View>
        ) : null}
      </View>
    </Page>
  );
}

const styles = StyleSheet.create({
  columns: { flexDirection: 'row', alignItems: 'flex-start', gap: 40 },
  stack: { gap: 10 },
  left: { width: 640, flexShrink: 1, gap: 12 },
  right: { flexGrow: 1, flexShrink: 1, flexBasis: 320 },
  titleRow: { flexDirection: 'row', flexWrap: 'wrap', alignItems: 'center', gap: 10 },
  shrink: { flexShrink: 1 },
  metHead: { paddingBottom: 6, borderBottomWidth: 1.5, borderBottomColor: color.rule.strong },
  foot: {
    padding: 10,
    paddingHorizontal: 12,
    flexDirection: 'row',
    backgroundColor: color.surface.trough,
    borderTopWidth: 1,
    borderTopColor: color.rule.line,
  },
});
