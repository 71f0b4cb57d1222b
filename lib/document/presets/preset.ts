import type { WaveformDocument } from '@/lib/synth/index';

/** A built-in starting layout, made from the numbers of a public standard. */
export interface Preset {
  presetId: string;
  title: string;
  /** Standard and clauses, as `about.basedOn` keeps it. */
  basedOn: string;
  /** What of the clause the layout holds, in one sentence. */
  holds: string;
  /** What a real signal of the standard has and this layout has not. */
  leftOut: readonly string[];
  build: () => WaveformDocument;
}
