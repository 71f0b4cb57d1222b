import { createHash } from 'node:crypto';
import { and, eq, lt } from 'drizzle-orm';
import type { Queryable } from '@/db/openDatabase';
import { idempotencyKeys } from '@/db/schema/people';
import { DomainError } from './problem.ts';

/** One request with an Idempotency-Key: who, to which endpoint, and what it asked in full. */
export interface KeyedRequest {
  personId: string;
  endpoint: string;
  key: string;
  /** All that tells this request from another one: ids of the path and the query, the body or its digest. */
  asked: readonly string[];
}

const digestOf = (request: KeyedRequest) => createHash('sha256').update(JSON.stringify(request.asked)).digest('hex');

/** The id of what the first request with this key made; null where there was none. Another request with the same key is refused. */
export function findResult(tx: Queryable, request: KeyedRequest): string | null {
  const { personId, endpoint, key } = request;
  const row = tx
    .select()
    .from(idempotencyKeys)
    .where(
      and(eq(idempotencyKeys.personId, personId), eq(idempotencyKeys.endpoint, endpoint), eq(idempotencyKeys.key, key)),
    )
    .get();
  if (!row) return null;
  if (row.requestDigest !== digestOf(request))
    throw new DomainError('state_conflict', 'This Idempotency-Key was used for another request.');
  return row.resultId;
}

/** Longer than any client goes on retrying. Autosaves leave a key each, so they must not pile up for ever. */
const KEPT_MS = 7 * 24 * 3_600_000;

/** Call it in the transaction that makes the thing, so that a killed server leaves both or neither. */
export function rememberResult(tx: Queryable, request: KeyedRequest, resultId: string, nowMs: number): void {
  const { personId, endpoint, key } = request;
  tx.delete(idempotencyKeys)
    .where(lt(idempotencyKeys.createdAtMs, nowMs - KEPT_MS))
    .run();
  tx.insert(idempotencyKeys)
    .values({ personId, endpoint, key, requestDigest: digestOf(request), resultId, createdAtMs: nowMs })
    .run();
}
