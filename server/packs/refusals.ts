import type { Issue } from '@/lib/document/issues';
import { layoutIssues } from '@/lib/document/layoutIssues';
import {
  checkFit,
  judgeFit,
  type BenchProfile,
  type FitFinding,
  type MeasuredLevels,
  type SymbolPeaks,
  type WaveformDocument,
} from '@/lib/synth';
import { PackError, type PackIssue } from '@/server/packs/packError';

const unmeasured: MeasuredLevels = {
  fileRmsDbfs: null,
  activeRmsDbfs: null,
  renderedPeakDbfs: null,
  reconstructedPeakDbfs: null,
  saturatedComponents: null,
};

/** Which field of the profile a hard finding's limit stands in. */
const limitPointer: Partial<Record<FitFinding['check'], string>> = {
  clock: '/content/sampleClockHz',
  granularity: '/content/granularitySamples',
  leastLength: '/content/leastSamples',
  memory: '/content/mostSamples',
  mode: '/content/modes',
  markers: '/content/markers',
};

const at =
  (where: PackIssue['where']) =>
  (issue: Issue): PackIssue => ({
    where,
    pointer: issue.pointer,
    message: issue.message,
  });

/**
 * What refuses a pack before anything is rendered: a file that cannot be written (a WAV file of 4 GiB), or a hard
 * limit of the profile that is missed (clock, length, granularity, mode, markers). Headroom and level are said, not refused: they may be meant.
 */
export function refusalOf(document: WaveformDocument, profile: BenchProfile): PackError | null {
  const unwritten = layoutIssues(profile.content, document.content).map(at('bench'));
  const missed = checkFit(document, profile, unmeasured)
    .filter(({ check, hard, verdict }) => hard && verdict === 'misses' && !(check === 'word' && unwritten.length > 0))
    .map(({ check, words }): PackIssue => ({ where: 'bench', pointer: limitPointer[check] ?? '', message: words }));
  const issues = [...unwritten, ...missed];
  if (issues.length === 0) return null;
  return new PackError('limit_missed', issues.map(({ message }) => message).join(' '), issues);
}

/**
 * What a person should know though the pack was made, in the fit's own words: soft limits that are missed, since they may be meant, and
 * saturation that the document asked for. Stands in manifest and level card.
 */
export function noticesOf(
  document: WaveformDocument,
  profile: BenchProfile,
  measured: MeasuredLevels,
  symbolPeaks: SymbolPeaks | null,
): string[] {
  return judgeFit(document, profile, measured, { wave: { seam: null, symbolPeaks } })
    .filter(
      ({ check, hard, verdict }) =>
        (!hard && verdict === 'misses') || (check === 'word' && (measured.saturatedComponents ?? 0) > 0),
    )
    .map(({ title, words }) => `${title}: ${words}`);
}
