import type {
  CaptureLayout,
  CaptureResult,
  CaptureStage,
  ChannelSource,
  LayoutOutcome,
  Likeness,
  NullPower,
  WaveformContent,
} from '@/lib/synth';

/** What a page asks of the thread that reads captures. The files stay on the device: only their handles are handed over. */
export type CaptureRequest =
  | { kind: 'guess'; files: File[]; meta: File | null; expected: CaptureLayout | null }
  | {
      kind: 'measure';
      files: File[];
      layout: CaptureLayout;
      clockHz: number | null;
      channel: ChannelSource;
      content: WaveformContent;
      /** How the pack's integers were made, for what its own file has in the null cells; null: not asked. */
      words: { scale: number; fullScale: number } | null;
    }
  | { kind: 'compare'; files: File[]; layout: CaptureLayout; clockHz: number | null; contents: WaveformContent[] };

export type CaptureAnswer =
  | { kind: 'guessed'; outcome: LayoutOutcome }
  | { kind: 'progress'; stage: CaptureStage | 'comparing'; doneRatio: number }
  /** `readingWords`: how the bytes were understood, "" as they were given. */
  | { kind: 'measured'; result: CaptureResult; readingWords: string; samples: number; fileNulls: NullPower | null }
  | { kind: 'compared'; alike: Likeness[] }
  | { kind: 'failed'; words: string };
