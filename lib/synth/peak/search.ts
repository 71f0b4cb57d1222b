import { createFrameMeasure, type FrameMeasuring } from '../measure/frameMeasure';
import type { RenderOptions } from '../synthesize/types';
import type { WaveformContent } from '../types';

/** The best of several contents, by the PAPR of their frames. Taken in steps, so that its caller may yield, show and cancel. */
export interface PeakSearch<Choice> {
  /** Candidates in all, and measured so far. */
  readonly total: number;
  readonly done: number;
  /** The content's own frame, measured first; null before, and when nothing is painted. */
  readonly nowPaprDb: number | null;
  /** The best so far that lies below the content's own; null while there is none: "no better one in 200 tries". */
  readonly best: { choice: Choice; content: WaveformContent; paprDb: number } | null;
  /** A block of samples on; false when nothing is left. */
  step(): boolean;
}

/**
 * Measures `content`, then `contentOf` of each choice in order. Equal figures: the first one stays. Every frame is measured whole, on the
 * interpolated waveform, with the peak reduction that the content has.
 */
export function createPeakSearch<Choice>(
  content: WaveformContent,
  choices: readonly Choice[],
  contentOf: (choice: Choice) => WaveformContent,
  options: Pick<RenderOptions, 'cells' | 'engine'> = {},
): PeakSearch<Choice> {
  let at = -1; // the content itself
  let candidate = content;
  let measuring: FrameMeasuring | null = createFrameMeasure(content, options);
  let nowPaprDb: number | null = null;
  let best: PeakSearch<Choice>['best'] = null;

  function close(paprDb: number | null): void {
    if (at < 0) nowPaprDb = paprDb;
    else if (paprDb !== null && paprDb < (best?.paprDb ?? nowPaprDb ?? -Infinity))
      best = { choice: choices[at]!, content: candidate, paprDb };
    at++;
    measuring = null;
    if (at >= choices.length || nowPaprDb === null) return;
    candidate = contentOf(choices[at]!);
    measuring = createFrameMeasure(candidate, options);
  }

  return {
    total: choices.length,
    get done() {
      return Math.max(0, at);
    },
    get nowPaprDb() {
      return nowPaprDb;
    },
    get best() {
      return best;
    },
    step() {
      if (measuring === null) return false;
      if (!measuring.step()) close(measuring.result().power.paprDb);
      return measuring !== null;
    },
  };
}
