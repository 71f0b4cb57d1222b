import { useEffect, useMemo, useState } from 'react';
import { Failing, Forbidden, Loading, NotThere } from '@/components/ui/states';
import { findLocalCopy, settleFoundCopy, type FoundCopy } from '@/lib/client/localCopies';
import { ask, type ProblemError } from '@/lib/client/useApi';
import { useMay, useMe } from '@/lib/client/useSession';
import { showRevision, showWaveform } from '@/lib/contracts/waveforms';
import { canonicalJson } from '@/lib/document/digest';
import { Page } from '../Page';
import { serverStore, takeHandedOver, type DrawingStore, type OpenedDrawing } from './drawingStore';
import { DrawTable } from './DrawTable';

type Opening =
  | { kind: 'loading' }
  | { kind: 'failed'; error: ProblemError }
  | { kind: 'open'; opened: OpenedDrawing; found: FoundCopy | null; times: number };

/**
 * Fetches a waveform's newest revision (or its newest edition, for people who read editions only) and what this device kept of it; or the
 * one asked for, as it was.
 */
async function openDrawing(
  waveformId: string,
  asked: string | null,
  personId: string,
): Promise<{ opened: OpenedDrawing; found: FoundCopy | null }> {
  const waveform = await ask(showWaveform, { params: { waveformId } });
  const edition = waveform.editions.find((one) => one.withdrawn === null) ?? waveform.editions[0];
  const newestId = waveform.head?.revisionId ?? edition?.revisionId ?? '';
  const { revision, document } = await ask(showRevision, { params: { revisionId: asked ?? newestId } });
  const opened: OpenedDrawing = {
    revision,
    document,
    editionNumber: revision.stamp.editionNumber,
    openReview: waveform.openReview,
    isUnsaved: false,
    newestNumber: waveform.head && revision.revisionId !== newestId ? waveform.head.number : null,
    drawsOn: false,
  };
  if (opened.newestNumber !== null) return { opened, found: null };
  const found = await findLocalCopy(personId, waveformId).catch(() => null);
  // What was saved after all, with the answer lost on the way, is no copy worth a question.
  const isSame = found?.kind === 'copy' && canonicalJson(found.copy.document) === canonicalJson(document);
  if (found?.kind === 'copy' && isSame) {
    await settleFoundCopy(personId, found.copy, false).catch(() => undefined);
    return { opened, found: null };
  }
  return { opened, found };
}

/** The drawing table of one waveform: its newest revision, or the one named. */
export function DrawScreen({
  waveformId,
  revisionId = null,
  store,
}: {
  waveformId: string;
  revisionId?: string | null;
  store?: DrawingStore;
}) {
  const { personId } = useMe();
  const mayDraw = useMay('saveWaveforms');
  const [times, setTimes] = useState(0);
  const [opening, setOpening] = useState<Opening>({ kind: 'loading' });
  const [handed] = useState(() => (revisionId === null ? takeHandedOver(waveformId) : null));
  const server = useMemo(() => store ?? serverStore(waveformId), [store, waveformId]);

  useEffect(() => {
    let isCurrent = true;
    openDrawing(waveformId, revisionId, personId).then(
      ({ opened, found }) => {
        if (!isCurrent) return;
        const taken = times === 0 && handed ? { ...opened, document: handed, isUnsaved: true, drawsOn: true } : opened;
        setOpening({ kind: 'open', opened: taken, found, times });
      },
      (error: ProblemError) => isCurrent && setOpening({ kind: 'failed', error }),
    );
    return () => {
      isCurrent = false;
    };
  }, [waveformId, revisionId, personId, times, handed]);

  const reopen = () => {
    setOpening({ kind: 'loading' });
    setTimes((before) => before + 1);
  };

  if (opening.kind === 'open') {
    const { opened, found } = opening;
    const settle = (isTaken: boolean) => {
      if (found?.kind === 'copy') void settleFoundCopy(personId, found.copy, isTaken).catch(() => undefined);
      const taken: OpenedDrawing | null =
        isTaken && found?.kind === 'copy'
          ? {
              ...opened,
              document: found.copy.document,
              // Its own parent: where somebody saved meanwhile, the server says so and keeps both.
              revision: { ...opened.revision, revisionId: found.copy.parentId },
              isUnsaved: true,
            }
          : null;
      setOpening({
        ...opening,
        opened: taken ?? opened,
        found: null,
        times: taken ? opening.times + 0.5 : opening.times,
      });
    };
    return (
      <DrawTable
        key={`${waveformId} ${opening.times}`}
        opened={opened}
        store={server}
        mayDraw={mayDraw}
        onReopen={reopen}
        found={found}
        onFound={settle}
      />
    );
  }
  return (
    <Page title="Drawing table" backTo="/waveforms">
      {opening.kind === 'loading' ? (
        <Loading what="the drawing table" rows={3} />
      ) : (
        <OpeningFailed error={opening.error} onRetry={reopen} />
      )}
    </Page>
  );
}

function OpeningFailed({ error, onRetry }: { error: ProblemError; onRetry: () => void }) {
  const code = error.problem?.code;
  if (code === 'not_found') return <NotThere />;
  if (code === 'action_forbidden') return <Forbidden />;
  return <Failing what={`The waveform did not load. ${error.message}`} onRetry={onRetry} />;
}
