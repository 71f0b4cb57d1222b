import type { BenchProfile, WaveformDocument } from '@/lib/synth';
import type { WorkThreads } from './pool/workPool.ts';
import type { PackProgress, PackResult, PackState } from './packTypes.ts';

/** What the thread is started with. `outFile` lies on the same disk as `tmpFolder`. */
export interface RenderTask {
  document: WaveformDocument;
  profile: BenchProfile;
  state: PackState;
  tmpFolder: string;
  outFile: string;
  threads: WorkThreads;
}

export type ToRenderWorker = { kind: 'cancel' };

export type FromRenderWorker = { kind: 'progress'; progress: PackProgress } | { kind: 'result'; result: PackResult };
