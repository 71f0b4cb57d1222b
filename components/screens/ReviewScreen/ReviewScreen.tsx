import { useRouter } from 'expo-router';
import { useState } from 'react';
import { StyleSheet, View } from 'react-native';
import { FigureBlock } from '@/components/drawing/FigureBlock';
import { GridSheet } from '@/components/drawing/GridSheet';
import { TrayList } from '@/components/drawing/TrayList';
import { useSpectrum } from '@/components/drawing/useSpectrum';
import { Button } from '@/components/ui/Button';
import { DigestChip } from '@/components/ui/DigestChip';
import { Empty, Failing, Forbidden, Loading, NotThere } from '@/components/ui/states';
import { Notice } from '@/components/ui/Notice';
import { Stamp } from '@/components/ui/Stamp';
import { Text } from '@/components/ui/Text';
import { color } from '@/components/ui/theme';
import { useBreakpoint } from '@/components/ui/useBreakpoint';
import { OneOf } from '@/components/ui/WordsToPress';
import { useApi } from '@/lib/client/useApi';
import { useMay } from '@/lib/client/useSession';
import { showReview, type OpenReview } from '@/lib/contracts/reviews';
import { showRevision, showWaveform, type OpenedRevision } from '@/lib/contracts/waveforms';
import { formatNumber } from '@/lib/drawing/quantities';
import { contentFigures, measuredFigures, reachSentences } from '../figureWords';
import { Page } from '../Page';
import { when } from '../when';
import { ReleaseDialog } from './ReleaseDialog';
import { ReturnSheet } from './ReturnSheet';
import { ReviewFit } from './ReviewFit';

/** What was painted, what it makes, and whether it fits: released or returned by somebody who did not draw it. */
export function ReviewScreen({ waveformId }: { waveformId: string }) {
  const mayRead = useMay('readWaveforms');
  const review = useApi(showReview, { params: { waveformId } }, { enabled: mayRead, refetchInterval: 20_000 });
  const waveform = useApi(showWaveform, { params: { waveformId } }, { enabled: mayRead });
  const open = review.data?.openReview ?? null;
  const revision = useApi(showRevision, { params: { revisionId: open?.revisionId ?? '' } }, { enabled: open !== null });
  const failure = review.error ?? waveform.error ?? revision.error;
  const back = { pathname: '/waveforms/[waveformId]' as const, params: { waveformId } };
  if (!mayRead)
    return (
      <Page title="Review" backTo="/waveforms">
        <Forbidden />
      </Page>
    );
  if (open && revision.data) return <OpenedReview waveformId={waveformId} review={open} opened={revision.data} />;
  return (
    <Page title={waveform.data?.title ?? 'Review'} backTo={back}>
      {failure?.problem?.code === 'not_found' ? <NotThere /> : null}
      {failure && failure.problem?.code !== 'not_found' ? (
        <Failing
          what={`The review did not load. ${failure.message}`}
          onRetry={() => void Promise.all([review.refetch(), waveform.refetch(), revision.refetch()])}
        />
      ) : null}
      {!failure && review.data && !open ? <Empty>No review is open for this waveform.</Empty> : null}
      {!failure && !(review.data && !open) ? <Loading what="the review" rows={2} rowHeight={240} /> : null}
    </Page>
  );
}

function OpenedReview({
  waveformId,
  review,
  opened,
}: {
  waveformId: string;
  review: OpenReview;
  opened: OpenedRevision;
}) {
  const router = useRouter();
  const size = useBreakpoint();
  const phone = size === 'phone';
  const mayReview = useMay('reviewWaveforms');
  const [asking, setAsking] = useState<'release' | 'return' | null>(null);
  const [page, setPage] = useState<'grid' | 'figures' | 'fit'>('grid');
  const { content } = opened.document;
  const spectrum = useSpectrum(content);
  const { revision } = opened;
  const done = () => router.replace({ pathname: '/waveforms/[waveformId]/history', params: { waveformId } });
  const mayRelease = review.releasableBy.you === 'yes';
  const own = review.releasableBy.you === 'ownWork';
  const buttons = mayReview ? (
    <>
      <Button size={phone ? 'foot' : 'usual'} onPress={() => setAsking('return')}>
        {phone ? 'Return' : 'Return with a note'}
      </Button>
      {mayRelease ? (
        <Button kind="filled" size={phone ? 'foot' : 'usual'} fill={phone} onPress={() => setAsking('release')}>
          {`Release edition ${review.nextEditionNumber}`}
        </Button>
      ) : own ? (
        <Text variant="small" weight={600} style={styles.own}>
          You drew this. Somebody else releases it.
        </Text>
      ) : null}
    </>
  ) : null;

  const grid = (
    <View style={styles.part}>
      <GridSheet
        content={content}
        gridHeightPx={phone ? 168 : 280}
        spectrum={spectrum ?? []}
        spectrumHeightPx={phone ? 140 : 240}
        label={`Grid and spectrum of revision ${revision.number}`}
      />
      <View style={styles.under}>
        <TrayList content={content} />
        {phone ? <DigestChip digest={revision.contentDigest} /> : null}
      </View>
      <Text variant="small" tone="quiet">
        Spectrum of the rendered samples, over a 0 dB cell; a released file is measured again in its pack.
      </Text>
    </View>
  );
  const figures = (
    <View style={styles.part}>
      <FigureBlock figures={[...measuredFigures(opened.figures), ...contentFigures(content)]} columns={2} />
      <Text variant="bodyStrong" heading={2} tone="strong">
        Reach of the pilots
      </Text>
      {reachSentences(content).map((sentence) => (
        <Text key={sentence}>{sentence}</Text>
      ))}
      <Text variant="bodyStrong" heading={2} tone="strong">
        Meant at the device
      </Text>
      <Intent opened={opened} />
    </View>
  );
  const fit = <ReviewFit waveformId={waveformId} revisionId={revision.revisionId} />;
  return (
    <Page
      title={revision.title}
      backTo="/waveforms"
      bare
      headAside={<Stamp state={revision.stamp.state} />}
      foot={phone && buttons ? <View style={styles.foot}>{buttons}</View> : undefined}
    >
      <View style={phone ? styles.phone : styles.wide}>
        <View style={styles.head}>
          <View style={styles.grow}>
            {phone ? null : (
              <View style={styles.titleRow}>
                <Text variant="title" heading={1} tone="strong">
                  {revision.title}
                </Text>
                <Stamp state={revision.stamp.state} />
                <DigestChip digest={revision.contentDigest} />
              </View>
            )}
            <Text variant="small">
              <Text variant="small" tone="quiet">
                {`Asked by ${review.askedBy.name}, ${when(review.askedAtMs)}. `}
              </Text>
              {review.note ? `“${review.note}”` : ''}
            </Text>
          </View>
          {phone ? null : buttons}
        </View>
        {review.newer ? (
          <Notice title={`${review.newer.savedBy.name} saved a newer revision, ${when(review.newer.savedAtMs)}.`}>
            The request stays on revision {review.revisionNumber}.
          </Notice>
        ) : null}
        {review.releasableBy.words ? <Notice kind="warning">{review.releasableBy.words}</Notice> : null}
        {phone ? (
          <>
            <OneOf
              label="Page"
              bare
              choices={[
                { value: 'grid', label: 'Grid' },
                { value: 'figures', label: 'Figures' },
                { value: 'fit', label: 'Fit' },
              ]}
              value={page}
              onChange={setPage}
            />
            {page === 'grid' ? grid : page === 'figures' ? figures : fit}
          </>
        ) : (
          <View style={size === 'wide' ? styles.columns : styles.part}>
            <View style={styles.left}>{grid}</View>
            <View style={size === 'wide' ? styles.right : null}>
              {figures}
              {fit}
            </View>
          </View>
        )}
      </View>
      {asking === 'release' ? (
        <ReleaseDialog waveformId={waveformId} review={review} onClose={() => setAsking(null)} onDone={done} />
      ) : null}
      {asking === 'return' ? (
        <ReturnSheet waveformId={waveformId} review={review} onClose={() => setAsking(null)} onDone={done} />
      ) : null}
    </Page>
  );
}

function Intent({ opened }: { opened: OpenedRevision }) {
  const { intent } = opened.document;
  const say = (name: string, dbm: number | null) =>
    `${name} ${dbm === null ? 'not given' : `${formatNumber(dbm, 2)} dBm`}`;
  return (
    <Text>
      {`${say('Mean wanted', intent.outputRmsDbm)}, loss ${formatNumber(intent.lossDb, 2)} dB, ${say('peak limit', intent.devicePeakLimitDbm)}, ${say('mean limit', intent.deviceMeanLimitDbm)}.`}
    </Text>
  );
}

const styles = StyleSheet.create({
  phone: { padding: 12, gap: 12 },
  wide: { padding: 20, gap: 14, maxWidth: 1520, width: '100%', alignSelf: 'center' },
  head: { flexDirection: 'row', alignItems: 'center', gap: 12 },
  grow: { flexGrow: 1, flexShrink: 1, minWidth: 0, gap: 4 },
  titleRow: { flexDirection: 'row', flexWrap: 'wrap', alignItems: 'center', gap: 12 },
  own: { maxWidth: 200, flexShrink: 1 },
  under: { flexDirection: 'row', flexWrap: 'wrap', alignItems: 'center', justifyContent: 'space-between', gap: 8 },
  columns: { flexDirection: 'row', alignItems: 'flex-start', gap: 24 },
  left: { flexGrow: 1, flexShrink: 1, minWidth: 0 },
  right: { width: 436, flexShrink: 0, gap: 20 },
  part: { gap: 12 },
  foot: {
    padding: 10,
    paddingHorizontal: 12,
    flexDirection: 'row',
    alignItems: 'center',
    gap: 10,
    backgroundColor: color.surface.trough,
    borderTopWidth: 1,
    borderTopColor: color.rule.line,
  },
});
