import type { MeasuredCapture, WaveformContent } from '@/lib/synth';

/** What every page of a result shows from. */
export interface ResultProps {
  capture: MeasuredCapture;
  content: WaveformContent;
  limitPercent: number | null;
}
