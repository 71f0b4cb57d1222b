import type { Revision } from '@/lib/contracts/waveforms';

export interface RevisionGroup {
  /** The newest of the group: what the line opens. */
  last: Revision;
  /** Newest first. */
  revisions: Revision[];
}

const togetherMs = 10 * 60_000;

/**
 * One person's revisions less than 10 minutes apart as one line. A revision with a state of its own, or off the head's line, stands alone.
 * Takes and gives newest first.
 */
export function groupRevisions(revisions: readonly Revision[]): RevisionGroup[] {
  const groups: RevisionGroup[] = [];
  for (const revision of revisions) {
    const group = groups.at(-1);
    const later = group?.revisions.at(-1);
    const alone = (one: Revision) => one.isSide || one.stamp.state !== 'draft' || one.stamp.cameBack !== null;
    if (
      group &&
      later &&
      later.savedBy.personId === revision.savedBy.personId &&
      later.savedAtMs - revision.savedAtMs < togetherMs &&
      !alone(revision) &&
      !alone(later)
    ) {
      group.revisions.push(revision);
    } else {
      groups.push({ last: revision, revisions: [revision] });
    }
  }
  return groups;
}
