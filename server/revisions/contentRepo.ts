import { eq } from 'drizzle-orm';
import type { Queryable } from '@/db/openDatabase';
import { contents } from '@/db/schema/waveforms';

export interface PackedContent {
  digest: string;
  /** Canonical JSON of `content`, gzip. */
  bytes: Buffer;
  jsonBytes: number;
}

/** Equal contents are one row: a second save of one adds nothing. */
export function putContent(tx: Queryable, content: PackedContent, nowMs: number): void {
  tx.insert(contents)
    .values({ ...content, createdAtMs: nowMs })
    .onConflictDoNothing()
    .run();
}

/** The stored bytes (gzip) of a content that a revision names; foreign keys keep it there. */
export function readContentBytes(db: Queryable, digest: string): Buffer {
  const row = db.select({ bytes: contents.bytes }).from(contents).where(eq(contents.digest, digest)).get();
  if (!row) throw new Error(`The content ${digest} is missing.`);
  return row.bytes;
}
