import { eq } from 'drizzle-orm';
import type { Queryable } from '@/db/openDatabase';
import { editions, reviewRequests } from '@/db/schema/waveforms';

export function insertRequest(
  tx: Queryable,
  request: { id: string; waveformId: string; revisionId: string; note: string; askedBy: string; askedAtMs: number },
): void {
  tx.insert(reviewRequests).values(request).run();
}

export function closeRequest(
  tx: Queryable,
  requestId: string,
  end: { outcome: 'released' | 'returned' | 'takenBack'; closedBy: string; closedAtMs: number; reason: string | null },
): void {
  tx.update(reviewRequests).set(end).where(eq(reviewRequests.id, requestId)).run();
}

export function insertEdition(tx: Queryable, edition: typeof editions.$inferInsert): void {
  tx.insert(editions).values(edition).run();
}
