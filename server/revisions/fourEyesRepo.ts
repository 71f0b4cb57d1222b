import { asc, eq, isNotNull, or, sql } from 'drizzle-orm';
import type { Queryable } from '@/db/openDatabase';
import { userRoles, users } from '@/db/schema/people';

/**
 * Everybody who must not release the revision: who saved it, or any ancestor back to the last edition, or a revision of equal content in
 * any waveform. The line goes through copies and imports, since these name their source as parent; an edition that was withdrawn is no
 * checked ground any more, so the line goes on through it.
 */
export function peopleBarredBy(db: Queryable, revisionId: string): ReadonlySet<string> {
  const rows = db.all<{ personId: string }>(sql`
    with recursive line(id, parent_id, author_id) as (
      select id, parent_id, author_id from revisions where id = ${revisionId}
      union
      select parent.id, parent.parent_id, parent.author_id
      from line
      join revisions parent on parent.id = line.parent_id
      where not exists (
        select 1 from editions
        where editions.revision_id = parent.id
          and not exists (select 1 from withdrawals where withdrawals.edition_id = editions.id)
      )
    )
    select author_id as personId from line
    union
    select equal.author_id from revisions equal
    where equal.content_digest = (select content_digest from revisions where id = ${revisionId})
  `);
  return new Set(rows.map((row) => row.personId));
}

/** People who hold the reviewer role and can sign in, by name. */
export function listReviewers(db: Queryable): { personId: string; name: string }[] {
  return db
    .select({ personId: users.id, name: users.name })
    .from(users)
    .innerJoin(userRoles, eq(userRoles.userId, users.id))
    .where(sql`${userRoles.role} = 'reviewer' and ${or(isNotNull(users.passwordHash), eq(users.isDemo, true))}`)
    .orderBy(asc(users.name), asc(users.id))
    .all();
}
