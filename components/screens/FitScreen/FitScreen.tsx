import { useRouter } from 'expo-router';
import { useEffect, useState } from 'react';
import { Button } from '@/components/ui/Button';
import { Empty, Failing, Forbidden, Loading, NotThere } from '@/components/ui/states';
import { useApi } from '@/lib/client/useApi';
import { useMay } from '@/lib/client/useSession';
import { listBenches } from '@/lib/contracts/benches';
import { showFit } from '@/lib/contracts/fit';
import { showRevision, showWaveform } from '@/lib/contracts/waveforms';
import { Page } from '../Page';
import { LoadedFit } from './LoadedFit';
import { useRemedies } from './useRemedies';

/** A revision against a bench: what misses, by how much, and the remedy that is one press away. */
export function FitScreen({ waveformId, revisionId }: { waveformId: string; revisionId: string | null }) {
  const router = useRouter();
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
  // what was saved here is the head of its waveform: the page goes on with it
  const remedies = useRemedies(waveformId, (id) => {
    if (id !== waveformId || revisionId !== null)
      router.replace({ pathname: '/waveforms/[waveformId]/fit', params: { waveformId: id } });
  });
  useUndoKey(remedies.busy ? null : remedies.undo);
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
      remedies={remedies}
      undo={
        remedies.undo ? (
          <Button kind="plain" busy={remedies.busy} onPress={remedies.undo}>
            Undo
          </Button>
        ) : null
      }
    />
  );
}

/** Ctrl+Z takes back what was saved last, but not while somebody types. */
function useUndoKey(undo: (() => void) | null): void {
  useEffect(() => {
    if (!undo) return;
    const onKey = (event: KeyboardEvent) => {
      if (event.key.toLowerCase() !== 'z' || !(event.ctrlKey || event.metaKey) || event.shiftKey || event.altKey)
        return;
      if (event.target instanceof HTMLElement && event.target.closest('input, textarea, [role=dialog]')) return;
      event.preventDefault();
      undo();
    };
    window.addEventListener('keydown', onKey);
    return () => window.removeEventListener('keydown', onKey);
  }, [undo]);
}
