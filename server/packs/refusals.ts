import type { Issue } from '@/lib/document/issues';
import { layoutIssues } from '@/lib/document/layoutIssues';
import { notSupportedYet } from '@/lib/document/notSupportedYet';
import { checkFit, type BenchProfile, type FitFinding, type MeasuredLevels, type WaveformDocument } from '@/lib/synth';
import { PackError, type PackIssue } from './packError.ts';

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
 * What refuses a pack before anything is rendered: a part that is not built yet, a file that cannot be written (a WAV file of 4 GiB), or a hard
 * limit of the profile that is missed (clock, length, granularity, mode, markers). Headroom and level are said, not refused: they may be meant.
 */
export function refusalOf(document: WaveformDocument, profile: BenchProfile): PackError | null {
  const missing = notSupportedYet(document).map(at('document'));
  if (missing.length > 0) return new PackError('not_supported_yet', 'This version cannot make the pack yet.', missing);
  const unwritten = layoutIssues(profile.content, document.content);
  if (unwritten.length > 0)
    return new PackError('limit_missed', unwritten.map(({ message }) => message).join(' '), unwritten.map(at('bench')));
  const missed = checkFit(document, profile, unmeasured).filter(
    (finding) => finding.hard && finding.verdict === 'misses',
  );
  if (missed.length === 0) return null;
  return new PackError(
    'limit_missed',
    missed.map((finding) => finding.words).join(' '),
    missed.map((finding) => ({ where: 'bench', pointer: limitPointer[finding.check] ?? '', message: finding.words })),
  );
}

/** What a person should know though the pack was made: soft findings, and saturation that the document asked for. */
export function noticesOf(document: WaveformDocument, profile: BenchProfile, measured: MeasuredLevels): string[] {
  return checkFit(document, profile, measured)
    .filter(
      ({ check, hard, verdict }) =>
        (!hard && verdict === 'misses') || (check === 'word' && (measured.saturatedComponents ?? 0) > 0),
    )
    .map((finding) => finding.words);
}
