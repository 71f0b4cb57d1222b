import { useQueryClient } from '@tanstack/react-query';
import { useState } from 'react';
import { showToast } from '@/components/ui/toast';
import { ask, keyOf, ProblemError } from '@/lib/client/useApi';
import { showFit } from '@/lib/contracts/fit';
import {
  createWaveform,
  listRevisions,
  listWaveforms,
  saveRevision,
  showRevision,
  showWaveform,
  type OpenedRevision,
} from '@/lib/contracts/waveforms';
import { applyChanges, type PlainChange, type WaveformDocument } from '@/lib/synth';

/** More remedies than there are checks with one would go round in circles. */
const roundsMost = 6;

const newKey = () => crypto.getRandomValues(new Uint32Array(4)).join('-');

/** What was saved here last, and the document that stood before it. */
interface Saved {
  revisionId: string;
  before: WaveformDocument;
}

/**
 * Applies remedies as the next revision of what is open, and takes them back by saving what stood before. What is open may be an edition
 * or in review: the next revision is a new draft then. Kept by the screen, which outlives the revision that it shows.
 */
export function useRemedies(waveformId: string, onSaved: (waveformId: string) => void) {
  const queries = useQueryClient();
  const [busy, setBusy] = useState(false);
  const [problem, setProblem] = useState<string | null>(null);
  const [last, setLast] = useState<Saved | null>(null);

  async function acting<T>(act: () => Promise<T>): Promise<T | null> {
    setBusy(true);
    setProblem(null);
    try {
      const answer = await act();
      await Promise.all(
        [showWaveform, showRevision, showFit, listRevisions, listWaveforms].map((one) =>
          queries.invalidateQueries({ queryKey: keyOf(one) }),
        ),
      );
      return answer;
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
  }

  async function put(document: WaveformDocument, parentId: string): Promise<string> {
    const answer = await ask(saveRevision, {
      params: { waveformId },
      query: { parentId },
      body: document,
      idempotencyKey: newKey(),
    });
    return answer.revision.revisionId;
  }

  /** Saves through `chain`, which answers the revision that stands then. */
  async function keep(before: WaveformDocument, words: string, chain: () => Promise<string>): Promise<void> {
    const revisionId = await acting(chain);
    if (revisionId === null) return;
    const saved = { revisionId, before };
    setLast(saved);
    onSaved(waveformId);
    showToast(words, () => void takeBack(saved));
  }

  async function takeBack(saved: Saved): Promise<void> {
    if ((await acting(() => put(saved.before, saved.revisionId))) === null) return;
    setLast(null);
    onSaved(waveformId);
  }

  return {
    busy,
    problem,
    apply: ({ document, revision }: OpenedRevision, changes: readonly PlainChange[], words: string): Promise<void> =>
      keep(document, words, () => put(applyChanges(document, changes), revision.revisionId)),
    /**
     * The first remedy of each finding that misses, one after the other, the fit checked again between: a remedy is judged alone, and one
     * may change what the next should be.
     */
    applyAll: (
      { document, revision }: OpenedRevision,
      benchId: string,
      first: readonly PlainChange[],
      words: string,
    ): Promise<void> =>
      keep(document, words, async () => {
        let now = document;
        let revisionId = revision.revisionId;
        let changes: readonly PlainChange[] | undefined = first;
        for (let round = 0; changes && round < roundsMost; round++) {
          now = applyChanges(now, changes);
          revisionId = await put(now, revisionId);
          const fit = await ask(showFit, { params: { revisionId }, query: { benchId } });
          changes = fit.findings.find(({ verdict, remedies }) => verdict === 'misses' && remedies.length > 0)
            ?.remedies[0]?.changes;
        }
        return revisionId;
      }),
    /** Where a newer revision stands already: a waveform of its own that names its source. */
    applyInCopy: async ({ document, revision }: OpenedRevision, changes: readonly PlainChange[]): Promise<void> => {
      const made = await acting(() =>
        ask(createWaveform, {
          query: { sourceRevisionId: revision.revisionId },
          body: applyChanges(document, changes),
          idempotencyKey: newKey(),
        }),
      );
      if (made) onSaved(made.waveformId);
    },
    /** Takes back what was saved here last; null where nothing was. */
    undo: last === null ? null : (): void => void takeBack(last),
  };
}

export type Remedies = ReturnType<typeof useRemedies>;
