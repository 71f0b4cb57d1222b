import { useEffect, useState } from 'react';
import { useApi } from '@/lib/client/useApi';
import { listWaveforms, showRevision } from '@/lib/contracts/waveforms';
import { createLevelsJob } from '@/lib/editor/live/digest';
import {
  createSynthesis,
  deriveFigures,
  interpolationOf,
  type ReferenceLevels,
  type WaveformContent,
} from '@/lib/synth';

/** An edition that may be shown. */
export interface EditionChoice {
  revisionId: string;
  label: string;
}

/** How an edition's vector begins, before any scale. */
export interface EditionStart {
  label: string;
  content: WaveformContent;
  levels: ReferenceLevels;
  /** The first samples, interleaved, in units of x. */
  samples: Float64Array;
}

export type EditionState =
  | { kind: 'none' }
  | { kind: 'measuring' }
  | { kind: 'refused'; words: string }
  | { kind: 'there'; start: EditionStart };

const FIRST_SAMPLES = 16;
/** Some seconds of work on a phone; a longer edition's pack names its first words itself. */
const MEASURED_MOST = 2 ** 24;
const SLICE_MS = 12;

/** Editions that were not withdrawn, newest waveform first. */
export function useEditionChoices(): EditionChoice[] {
  const list = useApi(listWaveforms, { query: {} });
  return (list.data?.items ?? []).flatMap(({ title, newestEdition }) =>
    newestEdition === null
      ? []
      : [{ revisionId: newestEdition.revisionId, label: `${title}, edition ${newestEdition.number}` }],
  );
}

/** The start of the chosen edition's vector and the levels that its scale needs, computed here in slices. */
export function useEditionStart(chosen: EditionChoice | null): EditionState {
  const revisionId = chosen?.revisionId ?? null;
  const label = chosen?.label ?? '';
  const opened = useApi(
    showRevision,
    { params: { revisionId: revisionId ?? '' } },
    { enabled: revisionId !== null, staleTime: Infinity },
  );
  const [state, setState] = useState<EditionState & { of?: string | null }>({ kind: 'none' });
  const content = opened.data?.document.content;
  useEffect(() => {
    if (revisionId === null || !content) return;
    return measure(content, label, (next) => setState({ ...next, of: revisionId }));
  }, [revisionId, content, label]);
  if (revisionId === null) return { kind: 'none' };
  if (opened.error) return { kind: 'refused', words: `The edition did not load. ${opened.error.message}` };
  return state.of === revisionId ? state : { kind: 'measuring' };
}

/** Reports until it is done; the answer stops it. */
function measure(content: WaveformContent, label: string, report: (state: EditionState) => void): () => void {
  const { fileSamples } = deriveFigures(content);
  const work = (fileSamples * (interpolationOf(content.oversampling) + content.oversampling)) / content.oversampling;
  if (work > MEASURED_MOST) {
    report({
      kind: 'refused',
      words: 'This edition is too long to be measured here: the manifest of its pack has its first words.',
    });
    return () => undefined;
  }
  const fail = (error: unknown) =>
    report({ kind: 'refused', words: error instanceof Error ? error.message : 'The edition cannot be rendered.' });
  let timer: ReturnType<typeof setTimeout> | null = null;
  try {
    const job = createLevelsJob(content);
    const slice = () => {
      try {
        const until = performance.now() + SLICE_MS;
        while (job.step()) {
          if (performance.now() < until) continue;
          timer = setTimeout(slice, 0);
          return;
        }
        const samples = new Float64Array(2 * Math.min(FIRST_SAMPLES, fileSamples));
        createSynthesis(content).read(samples);
        report({ kind: 'there', start: { label, content, levels: job.levels(), samples } });
      } catch (error) {
        fail(error);
      }
    };
    report({ kind: 'measuring' });
    timer = setTimeout(slice, 0);
  } catch (error) {
    fail(error);
  }
  return () => {
    if (timer !== null) clearTimeout(timer);
  };
}
