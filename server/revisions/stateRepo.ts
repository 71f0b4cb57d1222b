import { and, eq, inArray, isNull, sql } from 'drizzle-orm';
import type { Queryable } from '@/db/openDatabase';
import { users } from '@/db/schema/people';
import { reviewRequests, revisionStates } from '@/db/schema/waveforms';

const stateColumns = {
  revisionId: revisionStates.revisionId,
  state: revisionStates.state,
  act: revisionStates.act,
  note: revisionStates.note,
  personId: revisionStates.personId,
  personName: users.name,
  atMs: revisionStates.atMs,
};

/** The newest transition of each revision named; one without any is a draft as it was saved. */
export type StateRow = ReturnType<typeof newestStates> extends Map<string, infer Row> ? Row : never;

export function newestStates(db: Queryable, revisionIds: readonly string[]) {
  const byRevision = new Map<string, ReturnType<typeof selectNewest>[number]>();
  // SQLite takes 32 766 variables; lists of revisions are cut well below that, lists of heads may not be.
  for (let at = 0; at < revisionIds.length; at += 10_000) {
    for (const row of selectNewest(db, revisionIds.slice(at, at + 10_000))) byRevision.set(row.revisionId, row);
  }
  return byRevision;
}

function selectNewest(db: Queryable, revisionIds: readonly string[]) {
  return db
    .select(stateColumns)
    .from(revisionStates)
    .innerJoin(users, eq(users.id, revisionStates.personId))
    .where(
      and(
        inArray(revisionStates.revisionId, [...revisionIds]),
        sql`${revisionStates.seq} = (select max(newest.seq) from revision_states newest where newest.revision_id = ${revisionStates.revisionId})`,
      ),
    )
    .all();
}

export interface Transition {
  revisionId: string;
  state: 'draft' | 'inReview' | 'released' | 'withdrawn';
  act: 'asked' | 'takenBack' | 'returned' | 'released' | 'withdrawn';
  note: string;
  personId: string;
  atMs: number;
}

export function addTransition(tx: Queryable, transition: Transition): void {
  tx.insert(revisionStates).values(transition).run();
}

export type RequestRow = NonNullable<ReturnType<typeof findOpenRequest>>;

export function findOpenRequest(db: Queryable, waveformId: string) {
  return db
    .select({
      id: reviewRequests.id,
      waveformId: reviewRequests.waveformId,
      revisionId: reviewRequests.revisionId,
      note: reviewRequests.note,
      askedBy: reviewRequests.askedBy,
      askedByName: users.name,
      askedAtMs: reviewRequests.askedAtMs,
    })
    .from(reviewRequests)
    .innerJoin(users, eq(users.id, reviewRequests.askedBy))
    .where(and(eq(reviewRequests.waveformId, waveformId), isNull(reviewRequests.outcome)))
    .get();
}

export function listOpenRequests(db: Queryable): { waveformId: string; revisionId: string }[] {
  return db
    .select({ waveformId: reviewRequests.waveformId, revisionId: reviewRequests.revisionId })
    .from(reviewRequests)
    .where(isNull(reviewRequests.outcome))
    .all();
}
