import { useRouter } from 'expo-router';
import type { ReactNode } from 'react';
import { StyleSheet, View } from 'react-native';
import { Button } from '@/components/ui/Button';
import { ChoiceField } from '@/components/ui/ChoiceField';
import { DigestChip } from '@/components/ui/DigestChip';
import { FigureRow } from '@/components/ui/Figure';
import { Notice } from '@/components/ui/Notice';
import { Stamp } from '@/components/ui/Stamp';
import { Failing, Loading } from '@/components/ui/states';
import { Text } from '@/components/ui/Text';
import { TextLink } from '@/components/ui/TextLink';
import { color } from '@/components/ui/theme';
import { useBreakpoint } from '@/components/ui/useBreakpoint';
import { useMay } from '@/lib/client/useSession';
import type { Fit } from '@/lib/contracts/fit';
import type { OpenedRevision } from '@/lib/contracts/waveforms';
import { Page } from '../Page';
import { FindingCard, verdictWord, type Finding } from './FindingCard';
import { FitPictures } from './FitPictures';
import { pressOf, whyFixed } from './pressOf';
import type { Remedies } from './useRemedies';

interface LoadedProps {
  waveformId: string;
  opened: OpenedRevision;
  benches: { value: string; label: string }[];
  benchId: string;
  onBench: (benchId: string) => void;
  fit: Fit | null;
  failure: { words: string; retry: () => void } | null;
  remedies: Remedies;
  undo: ReactNode;
}

function headline(fit: Fit, misses: number, unjudged: number): string {
  const all = fit.findings.length;
  if (misses > 0) return `${misses} of ${all} checks ${misses === 1 ? 'needs' : 'need'} a change`;
  return unjudged > 0
    ? `Nothing misses; ${unjudged} of ${all} checks cannot be judged`
    : `Everything fits ${fit.bench.name}.`;
}

export function LoadedFit({
  waveformId,
  opened,
  benches,
  benchId,
  onBench,
  fit,
  failure,
  remedies,
  undo,
}: LoadedProps) {
  const phone = useBreakpoint() === 'phone';
  const maySave = useMay('saveWaveforms');
  const { revision } = opened;
  const of = (verdict: Finding['verdict']) => fit?.findings.filter((finding) => finding.verdict === verdict) ?? [];
  const [misses, unjudged, met] = [of('misses'), of('cannotJudge'), of('meets')];
  const press = pressOf(opened, maySave, remedies);
  const table = { pathname: '/waveforms/[waveformId]' as const, params: { waveformId } };
  const why = whyFixed(revision, maySave);
  const primary = <Primary {...{ waveformId, opened, fit, benchId, remedies }} maySave={maySave} />;
  return (
    <Page
      title="Fit"
      backTo={table}
      headAside={undo}
      actions={
        <View style={styles.actions}>
          {undo}
          {primary}
        </View>
      }
      foot={phone ? <View style={styles.foot}>{primary}</View> : undefined}
    >
      <View style={phone ? styles.stack : styles.columns}>
        <View style={phone ? styles.stack : styles.left}>
          <ChoiceField label="Bench profile" value={benchId} onChange={onBench} choices={benches} />
          {failure ? <Failing what={failure.words} onRetry={failure.retry} /> : null}
          {fit ? (
            <View role="status">
              <Text variant="title" heading={2} tone="strong">
                {headline(fit, misses.length, unjudged.length)}
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
          {remedies.problem ? (
            <Notice
              kind="danger"
              title="The change was not saved."
              actions={<TextLink href={table}>Open the newer</TextLink>}
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
              press={press}
              ruler={phone}
              tableHref={maySave && revision.isHead ? table : undefined}
            />
          ))}
        </View>
        <View style={phone ? styles.stack : styles.right}>
          {fit && !phone ? <FitPictures fit={fit} withLength /> : null}
          {met.length > 0 ? <MetChecks met={met} press={press} busy={remedies.busy} /> : null}
          {fit && phone ? <FitPictures fit={fit} withLength={false} /> : null}
        </View>
      </View>
    </Page>
  );
}

function MetChecks({ met, press, busy }: { met: Finding[]; press: ReturnType<typeof pressOf>; busy: boolean }) {
  return (
    <View>
      <Text variant="small" tone="quiet" style={styles.metHead}>
        {met.length === 1 ? '1 check met' : `${met.length} checks met`}
      </Text>
      {met.map((finding) => (
        <View key={finding.check}>
          <FigureRow name={finding.title} value={finding.found} verdict={verdictWord(finding)} />
          {press?.label === null
            ? finding.remedies.map((remedy) => (
                <View key={remedy.label} style={styles.offer}>
                  <Button busy={busy} onPress={() => press.press(remedy)}>
                    {remedy.label}
                  </Button>
                  <Text variant="small" tone="quiet">
                    {remedy.cost}
                  </Text>
                </View>
              ))
            : null}
        </View>
      ))}
    </View>
  );
}

/** Apply what mends, then ask for a review; on an edition make a pack. */
function Primary({
  waveformId,
  opened,
  fit,
  benchId,
  remedies,
  maySave,
}: Pick<LoadedProps, 'waveformId' | 'opened' | 'fit' | 'benchId' | 'remedies'> & { maySave: boolean }) {
  const router = useRouter();
  const phone = useBreakpoint() === 'phone';
  const { revision } = opened;
  const { state } = revision.stamp;
  const misses = fit?.findings.filter((finding) => finding.verdict === 'misses') ?? [];
  const first = misses.flatMap((finding) => (finding.remedies[0] ? [finding.remedies[0]] : []));
  const size = phone ? 'foot' : 'usual';
  if (state === 'released')
    return (
      <Button
        kind="filled"
        size={size}
        fill={phone}
        disabledBecause={
          misses.some((finding) => finding.hard) ? 'A hard limit of this bench is missed: choose another bench.' : null
        }
        onPress={() => router.push({ pathname: '/packs', params: { revisionId: revision.revisionId } })}
      >
        Make a pack
      </Button>
    );
  if (!maySave || !revision.isHead || state !== 'draft' || !fit) return null;
  if (first.length > 0) {
    const count = first.length;
    const words = count === 1 ? 'Change applied' : `${count} changes applied`;
    return (
      <Button
        kind="filled"
        size={size}
        fill={phone}
        busy={remedies.busy}
        onPress={() => void remedies.applyAll(opened, benchId, first[0]!.changes, words)}
      >
        {count === 1 ? 'Apply 1 change' : count === 2 ? 'Apply both changes' : `Apply ${count} changes`}
      </Button>
    );
  }
  return (
    <Button
      kind="filled"
      size={size}
      fill={phone}
      onPress={() => router.push({ pathname: '/waveforms/[waveformId]/history', params: { waveformId, ask: '1' } })}
    >
      Ask for review
    </Button>
  );
}

const styles = StyleSheet.create({
  columns: { flexDirection: 'row', alignItems: 'flex-start', gap: 40 },
  stack: { gap: 10 },
  left: { width: 640, flexShrink: 1, gap: 12 },
  right: { flexGrow: 1, flexShrink: 1, flexBasis: 320, gap: 20 },
  actions: { flexDirection: 'row', alignItems: 'center', gap: 12 },
  titleRow: { flexDirection: 'row', flexWrap: 'wrap', alignItems: 'center', gap: 10 },
  shrink: { flexShrink: 1 },
  metHead: { paddingBottom: 6, borderBottomWidth: 1.5, borderBottomColor: color.rule.strong },
  offer: {
    gap: 4,
    paddingVertical: 8,
    alignItems: 'flex-start',
    borderBottomWidth: 1,
    borderBottomColor: color.rule.hair,
  },
  foot: {
    padding: 10,
    paddingHorizontal: 12,
    flexDirection: 'row',
    backgroundColor: color.surface.trough,
    borderTopWidth: 1,
    borderTopColor: color.rule.line,
  },
});
