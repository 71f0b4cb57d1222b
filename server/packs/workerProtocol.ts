import type { BenchProfile, WaveformDocument } from '@/lib/synth';
import type { PackProgress, PackResult, PackState } from './packTypes.ts';

/** What the thread is started with. `outFile` lies on the same disk as `tmpFolder`. */
export interface RenderTask {
  document: WaveformDocument;
  profile: BenchProfile;
  state: PackState;
  tmpFolder: string;
  outFile: string;
}

export type ToRenderWorker = { kind: 'cancel' };

export type FromRenderWorker = { kind: 'progress'; progress: PackProgress } | { kind: 'result'; result: PackResult };
