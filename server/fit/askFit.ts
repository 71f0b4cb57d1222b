import type { Issue } from '@/lib/document/issues';
import { layoutIssues } from '@/lib/document/layoutIssues';
import type { BenchProfile, FitFinding, WaveformDocument } from '@/lib/synth';
import { packBytesOf } from '../packs/estimate.ts';
import { packKeyOf } from '../packs/manifest/manifest.ts';
import type { PackErrorCode, PackIssue } from '../packs/packError.ts';
import type { PackState } from '../packs/packTypes.ts';
import { refusalOf } from '../packs/refusals.ts';
import { fitOf, type KnownLevels } from './fitOf.ts';

/** What is asked about a document and a profile, both as JSON text; plain data, so that a thread can take it. */
export type FitQuestion =
  | { kind: 'fit'; documentText: string; profileJson: string; levels: KnownLevels }
  | { kind: 'pack'; documentText: string; profileJson: string; state: PackState };

export interface JudgedFit {
  findings: FitFinding[];
  /** Why no file can be written, at the profile's fields. */
  unwritten: Issue[];
}

/** What a pack of them would be, or why there can be none. */
export interface PackPrecheck {
  refusal: { code: PackErrorCode; message: string; issues: PackIssue[] } | null;
  packKey: string;
  bytes: number;
}

export type FitAnswer<Q extends FitQuestion> = Q extends { kind: 'fit' } ? JudgedFit : PackPrecheck;

export function answerQuestion(question: FitQuestion): JudgedFit | PackPrecheck {
  const document = JSON.parse(question.documentText) as WaveformDocument;
  const profile = JSON.parse(question.profileJson) as BenchProfile;
  if (question.kind === 'fit')
    return {
      findings: fitOf(document, profile, question.levels),
      unwritten: layoutIssues(profile.content, document.content),
    };
  const refusal = refusalOf(document, profile);
  return {
    refusal: refusal && { code: refusal.code, message: refusal.message, issues: refusal.issues },
    packKey: packKeyOf(document, profile, question.state),
    bytes: packBytesOf(document.content, profile.content),
  };
}
