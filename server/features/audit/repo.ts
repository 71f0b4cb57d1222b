import { and, desc, eq, gte, lt, lte, or, type SQL } from 'drizzle-orm';
import type { Queryable } from '@/db/openDatabase';
import { audit, users } from '@/db/schema/people';

export interface AuditFilter {
  fromMs?: number;
  toMs?: number;
  personId?: string;
  act?: string;
  before?: number;
}

export function listActs(db: Queryable, filter: AuditFilter, limit: number) {
  const conditions: (SQL | undefined)[] = [
    filter.fromMs === undefined ? undefined : gte(audit.atMs, filter.fromMs),
    filter.toMs === undefined ? undefined : lte(audit.atMs, filter.toMs),
    filter.personId === undefined ? undefined : eq(audit.personId, filter.personId),
    filter.act === undefined ? undefined : or(eq(audit.act, filter.act), eq(audit.objectKind, filter.act)),
    filter.before === undefined ? undefined : lt(audit.seq, filter.before),
  ];
  return db
    .select({ row: audit, personName: users.name })
    .from(audit)
    .leftJoin(users, eq(users.id, audit.personId))
    .where(and(...conditions))
    .orderBy(desc(audit.seq))
    .limit(limit)
    .all();
}

export function listKnownActs(db: Queryable): string[] {
  return db
    .selectDistinct({ act: audit.act })
    .from(audit)
    .orderBy(audit.act)
    .all()
    .map((row) => row.act);
}
