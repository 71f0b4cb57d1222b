import { useQueryClient } from '@tanstack/react-query';
import { useState } from 'react';
import { ask, keyOf, ProblemError } from '@/lib/client/useApi';
import { showFit } from '@/lib/contracts/fit';
import {
  listWaveforms,
  saveRevision,
  showRevision,
  showWaveform,
  type OpenedRevision,
} from '@/lib/contracts/waveforms';
import { applyChanges, type PlainChange, type WaveformDocument } from '@/lib/synth';

/** More remedies than there are checks with one would go round in circles. */
const roundsMost = 4;

/** Applies remedies as the next revision, and takes them back by saving what stood before. */
export function useRemedies(opened: OpenedRevision, waveformId: string) {
  const queries = useQueryClient();
  const [busy, setBusy] = useState(false);
  const [problem, setProblem] = useState<string | null>(null);
  const save = async (document: WaveformDocument, parentId: string): Promise<string | null> => {
    setBusy(true);
    setProblem(null);
    try {
      const answer = await ask(saveRevision, {
        params: { waveformId },
        query: { parentId },
        body: document,
        idempotencyKey: crypto.getRandomValues(new Uint32Array(4)).join('-'),
      });
      await Promise.all(
        [showWaveform, showRevision, showFit, listWaveforms].map((one) =>
          queries.invalidateQueries({ queryKey: keyOf(one) }),
        ),
      );
      return answer.revision.revisionId;
    } catch (error) {
      setProblem(
        error instanceof ProblemError && error.problem?.code === 'stale_revision'
          ? 'Somebody saved a newer revision first. Yours was kept beside it.'
          : error instanceof Error
            ? error.message
            : String(error),
      );
      return null;
    } finally {
      setBusy(false);
    }
  };
  /** Answers the way back, or null where nothing was saved. */
  const apply = async (changes: readonly PlainChange[]): Promise<(() => void) | null> => {
    const saved = await save(applyChanges(opened.document, changes), opened.revision.revisionId);
    return saved === null ? null : () => void save(opened.document, saved);
  };
  /**
   * The first remedy of each finding that misses, one after the other, the fit checked again between: a remedy is judged alone, and one
   * may change what the next should be.
   */
  const applyAll = async (benchId: string, first: readonly PlainChange[]): Promise<(() => void) | null> => {
    let document = opened.document;
    let revisionId = opened.revision.revisionId;
    let changes: readonly PlainChange[] | undefined = first;
    for (let round = 0; changes && round < roundsMost; round++) {
      document = applyChanges(document, changes);
      const saved = await save(document, revisionId);
      if (saved === null) return null;
      revisionId = saved;
      const fit = await ask(showFit, { params: { revisionId }, query: { benchId } });
      changes = fit.findings.find((finding) => finding.verdict === 'misses' && finding.remedies.length > 0)?.remedies[0]
        ?.changes;
    }
    return () => void save(opened.document, revisionId);
  };
  return { apply, applyAll, busy, problem };
}
