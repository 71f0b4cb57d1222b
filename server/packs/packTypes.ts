import type { Manifest } from '@/lib/document/manifestSchema';
import type { BenchProfile, WaveformDocument } from '@/lib/synth';
import type { PackErrorCode, PackIssue } from './packError.ts';

/** What a pack is made from: a revision that nobody released, or the number of an edition. */
export type PackState = 'draft' | number;

export type PackStep = 'rendering' | 'quantizing' | 'readingBack' | 'writing';

/** `doneRatio` runs over the whole job, 0…1, and never back. */
export interface PackProgress {
  step: PackStep;
  doneRatio: number;
}

export interface PackRequest {
  document: WaveformDocument;
  profile: BenchProfile;
  state: PackState;
  /** Temporaries lie here, in a folder of their own; on the same disk as the finished file. */
  tmpFolder: string;
  /** Where the finished pack goes, given the name it has of itself ("x-draft-6ecf12ab.zip"). */
  outFile: (fileName: string) => string;
  onProgress?: (progress: PackProgress) => void;
  signal?: AbortSignal;
}

export interface MadePack {
  file: string;
  fileName: string;
  fileBytes: number;
  fileSha256: string;
  baseName: string;
  /** Of the one file, or of the first of two. */
  vectorName: string;
  /** Of the one file; of two: of I's bytes with Q's behind them. */
  vectorSha256: string;
  manifest: Manifest;
  /** manifest.json as it stands in the pack. */
  manifestText: string;
  /** What a person should know though the pack was made: headroom or level missed, what saturated. */
  notices: string[];
}

export type PackResult =
  { ok: true; pack: MadePack } | { ok: false; code: PackErrorCode; message: string; issues: PackIssue[] };
