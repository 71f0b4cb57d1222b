import { and, eq, inArray, sql } from 'drizzle-orm';
import type { Queryable } from '@/db/openDatabase';
import { contentFigures } from '@/db/schema/waveforms';
import type { RevisionFigures } from '@/lib/contracts/waveforms';
import type { RenderedLevels } from './measure.ts';

/** What is kept beside a content: what the API shows, and the levels that the fit needs. */
export interface StoredFigures extends RevisionFigures {
  levels: RenderedLevels | null;
}

/** A cache, so a row may change or go. */
export function insertFigures(
  tx: Queryable,
  digest: string,
  synthVersion: string,
  figures: StoredFigures,
  nowMs: number,
): void {
  tx.insert(contentFigures)
    .values({ digest, synthVersion, figuresJson: JSON.stringify(figures), measuredAtMs: nowMs })
    .onConflictDoNothing()
    .run();
}

export function updateFigures(
  tx: Queryable,
  digest: string,
  synthVersion: string,
  figures: StoredFigures,
  nowMs: number,
): void {
  tx.update(contentFigures)
    .set({ figuresJson: JSON.stringify(figures), measuredAtMs: nowMs })
    .where(and(eq(contentFigures.digest, digest), eq(contentFigures.synthVersion, synthVersion)))
    .run();
}

export function readFigures(
  db: Queryable,
  digests: readonly string[],
  synthVersion: string,
): Map<string, StoredFigures> {
  const found = new Map<string, StoredFigures>();
  for (let at = 0; at < digests.length; at += 10_000) {
    const rows = db
      .select({ digest: contentFigures.digest, figuresJson: contentFigures.figuresJson })
      .from(contentFigures)
      .where(
        and(
          inArray(contentFigures.digest, digests.slice(at, at + 10_000)),
          eq(contentFigures.synthVersion, synthVersion),
        ),
      )
      .all();
    for (const row of rows) found.set(row.digest, JSON.parse(row.figuresJson) as StoredFigures);
  }
  return found;
}

/** True where the content is still somebody's business: a head's, an edition's or one in review. An autosave that was overtaken is not. */
export function isShownContent(db: Queryable, digest: string): boolean {
  const row = db.get<{ found: number }>(sql`
    select 1 as found from revisions r
    where r.content_digest = ${digest}
      and (
        exists (select 1 from waveforms w where w.head_revision_id = r.id)
        or exists (select 1 from editions e where e.revision_id = r.id)
        or exists (select 1 from review_requests q where q.revision_id = r.id and q.outcome is null)
      )
    limit 1
  `);
  return row !== undefined;
}

/** Heads' contents that a stop or a new engine left without figures. */
export function listUnmeasured(db: Queryable, synthVersion: string): string[] {
  const rows = db.all<{ digest: string }>(sql`
    select distinct r.content_digest as digest
    from waveforms w
    join revisions r on r.id = w.head_revision_id
    join content_figures f on f.digest = r.content_digest and f.synth_version = ${synthVersion}
    where json_extract(f.figures_json, '$.measured') is null
      and json_extract(f.figures_json, '$.measureFailed') is null
  `);
  return rows.map((row) => row.digest);
}
