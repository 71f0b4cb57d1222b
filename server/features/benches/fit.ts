import type { Fit } from '@/lib/contracts/fit';
import type { Actor } from '../../auth/actor.ts';
import { authorizeRead } from '../../auth/authorized.ts';
import type { Deps } from '../../deps.ts';
import type { Figures } from '../../figures/figures.ts';
import type { JudgedFit } from '../../fit/askFit.ts';
import { createAskFit, type AskFit } from '../../fit/fitThread.ts';
import { visibleRevision } from '../../revisions/access.ts';
import { documentText } from '../../revisions/documents.ts';
import { findVersion } from './repo.ts';

const KEPT_MOST = 200;

/** The fit of a revision on a bench. Kept by the digests that it follows from, since both pages and remedies ask for it again and again. */
export function createFitReader(deps: Deps, figures: Figures, ask: AskFit = createAskFit(deps.config.buildDir)) {
  const { db } = deps.store;
  const kept = new Map<string, JudgedFit>();

  return async (actor: Actor, revisionId: string, benchId: string, version?: number): Promise<Fit> => {
    const revision = visibleRevision(db, actor, revisionId);
    const row = authorizeRead(actor, 'readBenches', findVersion(db, benchId, version));
    const levels = figures.levelsOf(revision.contentDigest);
    const hasLevels = levels !== 'measuring' && levels !== null;
    const key = `${revision.documentDigest} ${row.fileDigest} ${hasLevels ? 'measured' : levels}`;
    let judged = kept.get(key);
    if (!judged) {
      judged = await ask({
        kind: 'fit',
        documentText: await documentText(db, revision),
        profileJson: row.profileJson,
        levels,
      });
      kept.set(key, judged);
      const [oldest] = kept.keys();
      if (kept.size > KEPT_MOST && oldest !== undefined) kept.delete(oldest);
    }
    return {
      revisionId,
      bench: { benchId, version: row.version, name: row.name, isNewest: row.isNewest },
      findings: judged.findings,
      notSupportedYet: judged.unwritten,
      levels: hasLevels ? 'measured' : (levels ?? 'unknown'),
      seam: hasLevels ? (levels.seam ?? null) : null,
    };
  };
}
