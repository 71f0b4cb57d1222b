import type {
  CaptureLayout,
  CaptureResult,
  CaptureStage,
  ChannelSource,
  LayoutOutcome,
  Likeness,
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
    }
  | { kind: 'compare'; files: File[]; layout: CaptureLayout; clockHz: number | null; contents: WaveformContent[] };

export type CaptureAnswer =
  | { kind: 'guessed'; outcome: LayoutOutcome }
  | { kind: 'progress'; stage: CaptureStage | 'comparing'; doneRatio: number }
  /** `readingWords`: how the bytes were understood, "" as they were given. */
  | { kind: 'measured'; result: CaptureResult; readingWords: string; samples: number }
  | { kind: 'compared'; alike: Likeness[] }
  | { kind: 'failed'; words: string };
