import { useCallback, useMemo, useState } from 'react';
import { StyleSheet, View } from 'react-native';
import { useQueryClient } from '@tanstack/react-query';
import { useCapture } from '@/components/live/useCapture';
import { Notice } from '@/components/ui/Notice';
import { Failing, Loading, NotThere } from '@/components/ui/states';
import { Stamp } from '@/components/ui/Stamp';
import { Text } from '@/components/ui/Text';
import { useBreakpoint } from '@/components/ui/useBreakpoint';
import { ask, keyOf, useApi } from '@/lib/client/useApi';
import { listPacks, showPack, type Pack, type PackDetail } from '@/lib/contracts/packs';
import { showRevision } from '@/lib/contracts/waveforms';
import { layoutOfBench, type WaveformContent } from '@/lib/synth';
import { Page } from '../Page';
import { CaptureForm, type CaptureChoices } from './CaptureForm';
import { CaptureFoot } from './CaptureFoot';
import { CaptureProgress } from './CaptureProgress';
import { CaptureResultView } from './CaptureResultView';
import { shortNameOf } from './editionWords';
import { RefusedCaptureView } from './RefusedCaptureView';

/** Editions that are compared with a capture that does not look like its own. */
const comparedMost = 24;

/** The operator's second half of a run: what came back from the device, read against the pack's edition on this device. */
export function CaptureScreen({ packId }: { packId: string }) {
  const pack = useApi(showPack, { params: { packId } });
  const revisionId = pack.data?.revisionId;
  const revision = useApi(
    showRevision,
    { params: { revisionId: revisionId ?? '' } },
    { enabled: revisionId !== undefined, staleTime: Infinity },
  );
  if (pack.data && revision.data)
    return <OpenCapture key={packId} pack={pack.data} content={revision.data.document.content} />;
  const failed = pack.error ?? revision.error;
  const retry = () => void (pack.error ? pack.refetch() : revision.refetch());
  return (
    <Page title="Capture" backTo={{ pathname: '/packs/[packId]', params: { packId } }}>
      {failed === null ? <Loading what="the pack" rows={2} rowHeight={120} /> : null}
      {failed?.problem?.code === 'not_found' ? <NotThere /> : null}
      {failed && failed.problem?.code !== 'not_found' ? (
        <Failing what={`The pack did not load. ${failed.message}`} onRetry={retry} />
      ) : null}
    </Page>
  );
}

interface OtherEdition {
  pack: Pack;
  content: WaveformContent;
}

function OpenCapture({ pack, content }: { pack: PackDetail; content: WaveformContent }) {
  const phone = useBreakpoint() === 'phone';
  const capture = useCapture();
  const { state, chosen } = capture;
  const [others, setOthers] = useState<OtherEdition[]>([]);
  /** Another edition that a capture is read against, since it looks like that one. */
  const [against, setAgainst] = useState<OtherEdition | null>(null);
  const target = against ?? { pack, content };
  const [choices, setChoices] = useState<CaptureChoices>({ clockHz: null, channel: 'allKnown', limitPercent: null });
  const expected = useMemo(() => layoutOfBench(pack.benchProfile.content), [pack]);
  const findOthers = useOtherContents(pack, setOthers);
  const choose = (files: readonly File[]) => {
    setChoices((before) => ({ ...before, clockHz: null }));
    setAgainst(null);
    capture.choose(files, expected);
  };
  const readAgainst = (other: OtherEdition) => {
    if (!chosen) return;
    const clockHz = choices.clockHz ?? chosen.clockHz;
    capture.measure(
      chosen,
      { content: other.content, clockHz, channel: choices.channel, words: other.pack === pack ? wordsOf(pack) : null },
      findOthers,
    );
  };
  const isDone = state.kind === 'done';
  const result = state.kind === 'done' ? state.result : null;
  const alike = state.kind === 'done' ? (state.alike ?? []) : [];
  const likeliest = result?.kind === 'unrecognised' ? (alike.find(({ isFound }) => isFound) ?? null) : null;
  const suggested = likeliest ? (others[likeliest.content] ?? null) : null;
  const title = isDone ? 'Capture' : 'Add a capture';
  const foot = (
    <CaptureFoot
      state={state}
      hasChosen={chosen !== null}
      phone={phone}
      onChoose={choose}
      onRead={() => readAgainst(target)}
      onCancel={capture.cancel}
      suggestion={
        suggested
          ? {
              words: `Read it against ${shortNameOf(suggested.pack, pack)}`,
              onPress: () => {
                setAgainst(suggested);
                readAgainst(suggested);
              },
            }
          : null
      }
    />
  );
  return (
    <Page
      title={title}
      backTo={{ pathname: '/packs/[packId]', params: { packId: pack.packId } }}
      bare
      foot={phone ? foot : undefined}
    >
      <View style={phone ? styles.phone : styles.wide}>
        {phone ? null : (
          <View style={styles.head}>
            <Text variant="display" heading={1} tone="strong" style={styles.shrink}>
              {isDone ? `Capture of ${target.pack.title}` : title}
            </Text>
            <View style={styles.acts}>{foot}</View>
          </View>
        )}
        <View style={styles.stampRow}>
          <Stamp state={target.pack.state} edition={target.pack.editionNumber} />
          <Text variant={isDone ? 'figureSmall' : 'small'} tone="quiet" style={styles.shrink} numberOfLines={1}>
            {chosen?.name ?? pack.title}
          </Text>
        </View>
        {state.kind === 'running' ? <CaptureProgress step={state.step} doneRatio={state.doneRatio} /> : null}
        {!isDone && state.kind !== 'running' ? (
          <CaptureForm
            pack={pack}
            state={state}
            chosen={chosen}
            hasPilots={content.tray.some(({ role }) => role === 'pilot')}
            choices={choices}
            onChoices={setChoices}
            onLayout={(layout) => chosen && capture.setChosen({ ...chosen, layout, from: 'you' })}
          />
        ) : null}
        {result?.kind === 'measured' && state.kind === 'done' ? (
          <CaptureResultView
            capture={result}
            content={target.content}
            readingWords={state.readingWords}
            fileNulls={state.fileNulls}
            limitPercent={choices.limitPercent}
          />
        ) : null}
        {result?.kind === 'unrecognised' && state.kind === 'done' ? (
          <RefusedCaptureView
            capture={result}
            samples={state.samples}
            pack={pack}
            target={target.pack}
            others={others.map((other) => other.pack)}
            alike={alike}
          />
        ) : null}
        {isDone ? <Notice>The capture stays on this device: nothing of it was sent or stored.</Notice> : null}
      </View>
    </Page>
  );
}

/** How the pack's integers were made, from its manifest; null for floats. */
function wordsOf({ manifest }: PackDetail): { scale: number; fullScale: number } | null {
  const word = manifest.word as { word?: string; scaleLsbPerUnit?: number; fullScale?: number } | undefined;
  if (word?.word === 'float32' || !word?.scaleLsbPerUnit || !word.fullScale) return null;
  return { scale: word.scaleLsbPerUnit, fullScale: word.fullScale };
}

/** The contents of the packs that this person sees, this waveform's own editions first; what they are stands in `onFound`. */
function useOtherContents(
  pack: PackDetail,
  onFound: (others: OtherEdition[]) => void,
): () => Promise<WaveformContent[]> {
  const queries = useQueryClient();
  return useCallback(async () => {
    const { items } = await queries.fetchQuery({
      queryKey: keyOf(listPacks, { query: {} }),
      queryFn: () => ask(listPacks, { query: {} }),
    });
    const seen = new Set([pack.revisionId]);
    const different = [...items]
      .sort((a, b) => Number(b.waveformId === pack.waveformId) - Number(a.waveformId === pack.waveformId))
      .filter(({ revisionId }) => !seen.has(revisionId) && seen.add(revisionId))
      .slice(0, comparedMost);
    const opened = await Promise.all(
      different.map(async (other) => {
        const params = { revisionId: other.revisionId };
        try {
          const { document } = await queries.fetchQuery({
            queryKey: keyOf(showRevision, { params }),
            queryFn: () => ask(showRevision, { params }),
            staleTime: Infinity,
          });
          return { pack: other, content: document.content };
        } catch {
          return null; // withdrawn meanwhile, or not for these eyes
        }
      }),
    );
    const found = opened.filter((one) => one !== null);
    onFound(found);
    return found.map(({ content }) => content);
  }, [pack, queries, onFound]);
}

const styles = StyleSheet.create({
  phone: { padding: 12, paddingTop: 8, gap: 10, flexGrow: 1 },
  wide: { padding: 24, paddingHorizontal: 40, gap: 16, maxWidth: 1520, width: '100%', alignSelf: 'center' },
  head: { flexDirection: 'row', alignItems: 'center', gap: 16, minHeight: 40 },
  shrink: { flexShrink: 1, flexGrow: 1 },
  acts: { flexShrink: 0 },
  stampRow: { flexDirection: 'row', alignItems: 'center', gap: 10 },
});
