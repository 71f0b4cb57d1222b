import type { Revision } from './waveforms';

/** One line of History: one person's revisions less than 10 minutes apart, or one that has something of its own to say. */
export interface HistoryLine {
  /** The newest of the line: what is opened by pressing it. */
  newest: Revision;
  /** All of the line, newest first. */
  revisions: Revision[];
}

const APART_MS = 10 * 60_000;

/** Side revisions, and whatever was ever asked for, stand by themselves: nobody should have to unfold a line to find an edition. */
const standsAlone = ({ isSide, stamp }: Revision) => isSide || stamp.state !== 'draft' || stamp.cameBack !== null;

/** Groups revisions for History, newest first by number. Autosaves of one sitting become one line. */
export function groupHistory(newestFirst: readonly Revision[]): HistoryLine[] {
  const lines: HistoryLine[] = [];
  for (const revision of newestFirst) {
    const line = lines.at(-1);
    const above = line?.revisions.at(-1);
    const joins =
      above !== undefined &&
      !standsAlone(above) &&
      !standsAlone(revision) &&
      above.savedBy.personId === revision.savedBy.personId &&
      // A clock that jumped back between two saves does not join what is hours apart.
      Math.abs(above.savedAtMs - revision.savedAtMs) < APART_MS;
    if (joins) line!.revisions.push(revision);
    else lines.push({ newest: revision, revisions: [revision] });
  }
  return lines;
}
