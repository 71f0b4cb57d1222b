import type {
  BenchContent,
  CellPowerSums,
  EvmSums,
  FrameStretch,
  LevelParts,
  ReconstructedPeak,
  SaturationCount,
  WaveformContent,
  WordScale,
} from '@/lib/synth';
import type { Stretch } from './stretchPlan.ts';

/** What all tasks of one pack are about; each thread gets it once. */
export interface WorkInput {
  content: WaveformContent;
  bench: BenchContent;
  /** Most bytes of rendered symbols that each rendering of each thread may keep. */
  keepBytes: number;
  /** What targets of peak reduction stand over, once it is known: long to measure, the same for all. */
  powerBefore: number | null;
}

/** Where bytes of a vector lie: an open file (its number is good in every thread of the process) and a place in it. */
export interface BytePlace {
  fd: number;
  offsetBytes: number;
  bytes: number;
}

/** Plain values throughout: they go from thread to thread. */
export type WorkTask =
  | { kind: 'power' }
  | { kind: 'levels'; oversampling: number; stretch: Stretch }
  | { kind: 'frame'; stretch: Stretch }
  | { kind: 'words'; scale: WordScale; stretch: Stretch; room: ArrayBuffer }
  | { kind: 'proof'; scale: WordScale; stretch: Stretch; files: BytePlace[] }
  | { kind: 'peak'; scale: WordScale; files: BytePlace[]; samples: number }
  | { kind: 'digest'; name: string; algorithm: 'sha256' | 'sha512'; place: BytePlace; isLast: boolean };

/** What reading a stretch of the finished file back gave. */
export interface StretchProof {
  wordsDifferent: number;
  saturated: SaturationCount;
  sumI: number;
  sumQ: number;
  evm: EvmSums;
  lines: CellPowerSums;
}

export interface WorkResults {
  power: number;
  levels: LevelParts;
  frame: FrameStretch;
  words: { room: ArrayBuffer; saturated: SaturationCount };
  proof: StretchProof;
  peak: ReconstructedPeak;
  /** Hexadecimal behind the last piece, else empty. */
  digest: string;
}

export type TaskOf<Kind extends WorkTask['kind']> = Extract<WorkTask, { kind: Kind }>;
