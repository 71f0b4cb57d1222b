import type { Queryable } from '@/db/openDatabase';
import type { QueryOf } from '@/lib/contracts/endpoint';
import type { Edition } from '@/lib/contracts/reviews';
import type { listWaveforms, WaveformItem, WaveformList } from '@/lib/contracts/waveforms';
import { may, type Actor } from '../../auth/actor.ts';
import type { Figures } from '../../figures/figures.ts';
import { listAllEditions } from '../../revisions/editionRepo.ts';
import { peopleBarredBy } from '../../revisions/fourEyesRepo.ts';
import { toEdition, toStamp } from '../../revisions/stamps.ts';
import { listOpenRequests, newestStates } from '../../revisions/stateRepo.ts';
import { listHeads, waveformsOf, waveformsOfPacks, type HeadRow } from './repo.ts';
import { shownEdition } from './show.ts';

type Asked = QueryOf<typeof listWaveforms>;
type ShownItem = Omit<WaveformItem, 'figures'>;

/** Letters compared as a person reads them. */
const folded = (text: string) => text.normalize('NFC').toLocaleLowerCase('en');

/** By a part of the title or the first digits of a digest: of the content, of an edition's, of a pack's vector or zip that the person may see. */
function finder(
  db: Queryable,
  actor: Actor,
  asked: string | undefined,
): (item: ShownItem, editions: readonly Edition[]) => boolean {
  if (!asked) return () => true;
  const words = folded(asked);
  const digits = words.replace(/^sha256:/, '');
  if (!/^[0-9a-f]{4,64}$/.test(digits)) return (item) => folded(item.title).includes(words);
  const begins = (digest: string) => digest.startsWith(`sha256:${digits}`);
  const ofPacks = waveformsOfPacks(db, digits, actor.personId);
  return (item, editions) =>
    folded(item.title).includes(words) ||
    begins(item.contentDigest) ||
    editions.some((edition) => begins(edition.contentDigest)) ||
    ofPacks.has(item.waveformId);
}

/** What a row is about: the head for those who read drafts, else the edition that stands for the waveform. */
interface Shown {
  head: HeadRow;
  title: string;
  revisionId: string;
  contentDigest: string;
}

function shownTo(readsDrafts: boolean, head: HeadRow, editions: readonly Edition[]): Shown | null {
  if (readsDrafts) return { head, title: head.title, revisionId: head.revisionId, contentDigest: head.contentDigest };
  const edition = shownEdition(editions);
  return edition
    ? { head, title: edition.title, revisionId: edition.revisionId, contentDigest: edition.contentDigest }
    : null;
}

export function listWaveformsTo(db: Queryable, actor: Actor, figures: Figures, asked: Asked): WaveformList {
  const editionsOf = new Map<string, Edition[]>();
  const numberOf = new Map<string, number>();
  for (const edition of listAllEditions(db).map(toEdition)) {
    const known = editionsOf.get(edition.waveformId);
    if (known) known.push(edition);
    else editionsOf.set(edition.waveformId, [edition]);
    numberOf.set(edition.revisionId, edition.number);
  }

  const readsDrafts = may(actor, 'readWaveforms');
  const own = asked.mine ? waveformsOf(db, actor.personId) : null;
  const shown = listHeads(db)
    .filter((head) => own === null || own.has(head.waveformId))
    .flatMap((head) => shownTo(readsDrafts, head, editionsOf.get(head.waveformId) ?? []) ?? []);
  const states = newestStates(
    db,
    shown.map((row) => row.revisionId),
  );
  const waiting = waveformsWaitingFor(db, actor);

  const isFound = finder(db, actor, asked.find);
  const found = shown
    .map(({ head, ...row }): ShownItem => {
      const stamp = toStamp(head, states.get(row.revisionId), numberOf.get(row.revisionId) ?? null);
      const newest = editionsOf.get(head.waveformId)?.find((edition) => edition.withdrawn === null);
      return {
        ...row,
        waveformId: head.waveformId,
        stamp,
        newestEdition: newest
          ? { number: newest.number, revisionId: newest.revisionId, contentDigest: newest.contentDigest }
          : null,
        changedBy: stamp.by,
        changedAtMs: stamp.atMs,
        waitsForYourReview: waiting.has(head.waveformId),
        withdrawnReason: stamp.state === 'withdrawn' ? stamp.reason : null,
      };
    })
    .filter((item) => isFound(item, editionsOf.get(item.waveformId) ?? []));

  const counts = { all: found.length, draft: 0, inReview: 0, released: 0, withdrawn: 0 };
  for (const item of found) counts[item.stamp.state] += 1;
  const items = found
    .filter((item) => asked.state === undefined || item.stamp.state === asked.state)
    .sort((a, b) => b.changedAtMs - a.changedAtMs || (a.waveformId < b.waveformId ? 1 : -1));
  const figuresOf = figures.readAll(items.map((item) => item.contentDigest));
  return { items: items.map((item) => ({ ...item, figures: figuresOf(item.contentDigest) })), counts };
}

/** Open requests that the person may answer: a reviewer whom four eyes do not bar. */
function waveformsWaitingFor(db: Queryable, actor: Actor): ReadonlySet<string> {
  if (!may(actor, 'reviewWaveforms')) return new Set();
  const open = listOpenRequests(db).filter(({ revisionId }) => !peopleBarredBy(db, revisionId).has(actor.personId));
  return new Set(open.map((request) => request.waveformId));
}
