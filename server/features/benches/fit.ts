import type { Fit } from '@/lib/contracts/fit';
import type { Issue } from '@/lib/document/issues';
import { layoutIssues } from '@/lib/document/layoutIssues';
import {
  checkFit,
  levelsInDbfs,
  wordScale,
  type BenchProfile,
  type FitFinding,
  type MeasuredLevels,
  type WaveformContent,
} from '@/lib/synth';
import type { Actor } from '../../auth/actor.ts';
import { authorizeRead } from '../../auth/authorized.ts';
import type { Deps } from '../../deps.ts';
import type { Figures } from '../../figures/figures.ts';
import type { RenderedLevels } from '../../figures/measure.ts';
import { visibleRevision } from '../../revisions/access.ts';
import { readDocument } from '../../revisions/documents.ts';
import { findVersion } from './repo.ts';

/** A rendering's levels as this bench's words would carry them. What saturates is not counted here: 0 where nothing can. */
function levelsOn(bench: BenchProfile, content: WaveformContent, levels: RenderedLevels): MeasuredLevels {
  const { scale, fullScale } = wordScale(content.level, levels, bench.content);
  return levelsInDbfs({
    fileMeanPower: levels.rms ** 2,
    activeMeanPower: levels.activeRms ** 2,
    renderedPeakPower: levels.interpolatedPeak ** 2,
    reconstructedPower: (levels.reconstructedPeak * scale) ** 2,
    saturatedComponents: levels.componentPeak * scale <= fullScale ? 0 : null,
    scale,
    fullScale,
  });
}

const KEPT_MOST = 200;

/** The fit of a revision on a bench. Kept by the digests that it follows from, since both pages and remedies ask for it again and again. */
export function createFitReader(deps: Deps, figures: Figures) {
  const { db } = deps.store;
  const kept = new Map<string, { findings: FitFinding[]; unwritten: Issue[] }>();

  return async (actor: Actor, revisionId: string, benchId: string, version?: number): Promise<Fit> => {
    const revision = visibleRevision(db, actor, revisionId);
    const row = authorizeRead(actor, 'readBenches', findVersion(db, benchId, version));
    const bench = JSON.parse(row.profileJson) as BenchProfile;
    const levels = figures.levelsOf(revision.contentDigest);
    const hasLevels = levels !== 'measuring' && levels !== null;
    const key = `${revision.documentDigest} ${row.fileDigest} ${hasLevels}`;
    let judged = kept.get(key);
    if (!judged) {
      const document = await readDocument(db, revision);
      judged = {
        findings: checkFit(document, bench, hasLevels ? levelsOn(bench, document.content, levels) : null),
        unwritten: layoutIssues(bench.content, document.content),
      };
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
    };
  };
}
