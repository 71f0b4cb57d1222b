import type { OpenedRevision } from '@/lib/contracts/waveforms';
import type { RemedyPress } from './FindingCard';
import type { Remedies } from './useRemedies';

/** Why a remedy cannot be applied to what is open; null where it can. */
export function whyFixed(revision: OpenedRevision['revision'], maySave: boolean): string | null {
  if (!maySave) return 'You can look. Changing needs the author role.';
  const { state } = revision.stamp;
  if (state === 'released' || state === 'withdrawn') return 'This edition cannot change.';
  if (state === 'inReview') return 'This revision is in review and cannot change.';
  return revision.isHead ? null : 'A newer revision exists.';
}

/**
 * Own draft: the remedy is applied. An edition or a revision in review: it makes a new draft. Where a newer revision stands already, a new
 * waveform that names its source. Without the author's right nothing can be pressed.
 */
export function pressOf(opened: OpenedRevision, maySave: boolean, remedies: Remedies): RemedyPress | null {
  if (!maySave) return null;
  const { revision } = opened;
  if (!revision.isHead)
    return {
      label: 'Make a new waveform with this remedy',
      press: (remedy) => void remedies.applyInCopy(opened, remedy.changes),
    };
  const apply = (words: string) => (remedy: { changes: Parameters<Remedies['apply']>[1] }) =>
    void remedies.apply(opened, remedy.changes, words);
  return revision.stamp.state === 'draft'
    ? { label: null, press: apply('Change applied') }
    : { label: 'Make a new draft with this remedy', press: apply('New draft made') };
}
