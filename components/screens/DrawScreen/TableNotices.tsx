import { StyleSheet, View } from 'react-native';
import { Button } from '@/components/ui/Button';
import { Notice } from '@/components/ui/Notice';
import { color } from '@/components/ui/theme';
import type { FoundCopy } from '@/lib/client/localCopies';
import { requestOf } from '@/lib/client/problemWords';
import { clockTime, when } from '../when';
import { useLive } from './liveReader';
import type { TableContext } from './tableContext';

export interface NoticeActs {
  openTheirs: () => void;
  keepMine: () => void;
  drawOn: () => void;
  /** An earlier revision stands open. */
  older: { words: string; openNewest: () => void; drawOnFromHere: (() => void) | null } | null;
  copy: FoundCopy | null;
  takeCopy: () => void;
  leaveCopy: () => void;
  downloadCopy: () => void;
  isBusy: boolean;
}

/** What stands over the table when something is not as it should be; the table stays usable under it. */
export function TableNotices({ table, acts }: { table: TableContext; acts: NoticeActs }) {
  const { rights, saveState, live } = table;
  const hasStopped = useLive(live, (state) => state.hasStopped);
  const message = useLive(live, (state) => state.message);
  const notices = [
    rights.because === 'role' ? <Notice key="role">You can look. Drawing needs the author role.</Notice> : null,
    acts.older ? (
      <Notice
        key="older"
        actions={
          <>
            {acts.older.drawOnFromHere ? (
              <Button size="small" onPress={acts.older.drawOnFromHere}>
                Draw on from here
              </Button>
            ) : null}
            <Button size="small" onPress={acts.older.openNewest}>
              Open the newest
            </Button>
          </>
        }
      >
        {acts.older.words}
      </Notice>
    ) : null,
    rights.because === 'state' ? (
      <Notice
        key="state"
        actions={
          <Button size="small" onPress={acts.drawOn}>
            Draw on in a new draft
          </Button>
        }
      >
        This revision cannot change.
      </Notice>
    ) : null,
    saveState.kind === 'stale' ? (
      <Notice
        key="stale"
        kind="warning"
        actions={
          <>
            <Button size="small" onPress={acts.openTheirs}>
              Open theirs
            </Button>
            <Button size="small" busy={acts.isBusy} onPress={acts.keepMine}>
              Keep mine as a copy
            </Button>
          </>
        }
      >
        {`${saveState.facts.newer.savedBy.name} saved a newer revision ${when(saveState.facts.newer.savedAtMs)}. Yours is kept as revision ${saveState.facts.kept.number}.`}
      </Notice>
    ) : null,
    saveState.kind === 'offline' ? (
      <Notice key="offline" kind="warning">
        No connection. Your strokes are kept on this device and saved when the connection is back.
      </Notice>
    ) : null,
    saveState.kind === 'refused' ? (
      <Notice key="refused" kind="danger">
        {`Not saved. ${saveState.problem.detail || saveState.problem.title} Request ${requestOf(saveState.problem)}.`}
      </Notice>
    ) : null,
    acts.copy?.kind === 'copy' && rights.because !== 'role' && rights.because !== 'older' ? (
      <Notice
        key="copy"
        kind="warning"
        actions={
          <>
            <Button size="small" onPress={acts.takeCopy}>
              Go on with the copy
            </Button>
            <Button size="small" onPress={acts.leaveCopy}>
              Leave it
            </Button>
          </>
        }
      >
        {`A copy from ${clockTime(acts.copy.copy.atMs)} on this device was not saved.`}
      </Notice>
    ) : null,
    acts.copy?.kind === 'damaged' ? (
      <Notice
        key="damaged"
        kind="warning"
        actions={
          <>
            <Button size="small" onPress={acts.downloadCopy}>
              Download it
            </Button>
            <Button size="small" onPress={acts.leaveCopy}>
              Close
            </Button>
          </>
        }
      >
        {`A copy from ${clockTime(acts.copy.atMs)} could not be read and was set aside.`}
      </Notice>
    ) : null,
    hasStopped ? (
      <Notice
        key="stopped"
        kind="danger"
        actions={
          <Button size="small" onPress={live.restart}>
            Start them again
          </Button>
        }
      >
        {message ?? 'The live views stopped. Your drawing is safe.'}
      </Notice>
    ) : null,
  ].filter((notice) => notice !== null);
  return notices.length > 0 ? <View style={styles.notices}>{notices}</View> : null;
}

const styles = StyleSheet.create({
  notices: { backgroundColor: color.surface.sheet, borderBottomWidth: 1, borderBottomColor: color.rule.line },
});
