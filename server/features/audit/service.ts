import type { AuditAct } from '@/lib/contracts/audit';
import { requireRight, type Actor } from '../../auth/actor.ts';
import type { Deps } from '../../deps.ts';
import * as repo from './repo.ts';

export function createAuditService({ store }: Deps) {
  return {
    list(actor: Actor, { limit, ...filter }: repo.AuditFilter & { limit: number }) {
      requireRight(actor, 'readAudit');
      // One more than asked tells whether there is a next page.
      const found = repo.listActs(store.db, filter, limit + 1);
      const acts = found.slice(0, limit).map(({ row, personName }): AuditAct => {
        return {
          seq: row.seq,
          atMs: row.atMs,
          person: row.personId === null ? null : { personId: row.personId, name: personName ?? '' },
          act: row.act,
          objectKind: row.objectKind,
          objectId: row.objectId,
          objectLabel: row.objectLabel,
          detail: JSON.parse(row.detailJson) as Record<string, unknown>,
        };
      });
      const nextBefore = found.length > limit ? (acts.at(-1)?.seq ?? null) : null;
      return { acts, nextBefore, knownActs: repo.listKnownActs(store.db) };
    },
  };
}
