import { gunzipSync } from 'node:zlib';
import type { Queryable } from '@/db/openDatabase';
import { numbersOf, type SavedDocument } from '@/lib/contracts/savedDocument';
import type { RevisionFigures } from '@/lib/contracts/waveforms';
import { gridPicture } from '@/lib/drawing/gridPicture';
import { synthVersion, type WaveformContent } from '@/lib/synth';
import type { Deps } from '../deps.ts';
import { readContentBytes } from '../revisions/contentRepo.ts';
import {
  insertFigures,
  isShownContent,
  listUnmeasured,
  readFigures,
  updateFigures,
  type StoredFigures,
} from './figuresRepo.ts';
import type { RenderedLevels } from './measure.ts';
import type { MeasureAnswer, Measuring } from './measureThread.ts';
import { PICTURE_COLUMNS, PICTURE_ROWS } from './picture.ts';

/** Up to this a grid is drawn small at once, in the server's own thread. */
const SMALL_JSON = 64 * 1024;

/** Raised where more is measured of the same samples. */
const MEASURES = 2;

const version = `${synthVersion}.${MEASURES}`;

export interface Figures {
  /** In the transaction of a save: the numbers stand at once, the rest follows. */
  begin(tx: Queryable, saved: SavedDocument): void;
  /** Measures soon; the last one wanted comes first, since somebody is looking at it. */
  want(digest: string): void;
  /** Of all the contents named; what is not measured yet is wanted by being read. */
  readAll(digests: readonly string[]): (digest: string) => RevisionFigures;
  /** Levels of the whole rendering; `measuring` while they are to come, null where they cannot be had. */
  levelsOf(digest: string): RenderedLevels | 'measuring' | null;
  /** For tests and for the first start: nothing waits any more. */
  settled(): Promise<void>;
}

/**
 * Figures of contents, measured one after the other off the request path and kept by digest and engine version. Nothing here is the truth
 * of anything: a row may be lost and is made again.
 */
export function createFigures(deps: Deps, measuring: Measuring): Figures {
  const { store, clock, lifecycle, log } = deps;
  const wanted = new Set<string>();
  /** The thread failed, maybe for want of memory: not tried again by this process, and not held against the content for ever. */
  const failedHere = new Map<string, string>();
  let running: Promise<void> | null = null;

  lifecycle.onStop(async () => {
    wanted.clear();
    await measuring.stop();
    await running;
  });

  function keep(digest: string, change: Partial<StoredFigures>): void {
    const known = readFigures(store.db, [digest], version).get(digest);
    if (known) store.write((tx) => updateFigures(tx, digest, version, { ...known, ...change }, clock.nowMs()));
  }

  function onAnswer(digest: string, answer: MeasureAnswer): void {
    if (lifecycle.isStopping) return;
    if (answer.kind === 'picture') keep(digest, { picture: answer.picture });
    else if (answer.kind === 'failed') keep(digest, { measureFailed: answer.words });
    else keep(digest, { measured: answer.measures.figures, levels: answer.measures.levels });
  }

  async function measureAll(): Promise<void> {
    for (;;) {
      const digest = [...wanted].pop();
      if (digest === undefined || lifecycle.isStopping) return;
      wanted.delete(digest);
      // An autosave that the next one overtook: nobody will look at it soon.
      if (!isShownContent(store.db, digest)) continue;
      const known = readFigures(store.db, [digest], version).get(digest);
      if (known && (known.measured ?? known.measureFailed) !== null) continue;
      try {
        await measuring.measure(readContentBytes(store.db, digest), (answer) => onAnswer(digest, answer));
      } catch (error) {
        if (lifecycle.isStopping) return;
        log.warn({ err: error, digest }, 'measuring failed');
        failedHere.set(digest, 'The measurement did not end.');
      }
    }
  }

  function want(digest: string): void {
    if (lifecycle.isStopping || failedHere.has(digest)) return;
    wanted.delete(digest);
    wanted.add(digest);
    running ??= measureAll()
      .catch((error: unknown) => log.error({ err: error }, 'measuring stopped'))
      .finally(() => {
        running = null;
      });
  }

  function begin(tx: Queryable, saved: SavedDocument): void {
    const picture =
      saved.contentJson.length <= SMALL_JSON ? draw(JSON.parse(saved.contentJson) as WaveformContent) : null;
    insertFigures(tx, saved.contentDigest, version, fresh(saved.numbers, picture), clock.nowMs());
  }

  /** A content of an older engine, or whose row was lost: its numbers are read again. */
  function beginAgain(digest: string): StoredFigures {
    const content = JSON.parse(gunzipSync(readContentBytes(store.db, digest)).toString('utf8')) as WaveformContent;
    const figures = fresh(numbersOf(content), draw(content));
    store.write((tx) => insertFigures(tx, digest, version, figures, clock.nowMs()));
    return figures;
  }

  for (const digest of listUnmeasured(store.db, version)) want(digest);

  return {
    begin,
    want,
    readAll(digests) {
      const found = readFigures(store.db, digests, version);
      return (digest) => {
        const { levels: _ours, ...figures } = found.get(digest) ?? beginAgain(digest);
        if (figures.measured !== null || figures.measureFailed !== null) return figures;
        want(digest);
        return { ...figures, measureFailed: failedHere.get(digest) ?? null };
      };
    },
    levelsOf(digest) {
      const figures = this.readAll([digest])(digest);
      if (figures.measured === null && figures.measureFailed === null) return 'measuring';
      return readFigures(store.db, [digest], version).get(digest)?.levels ?? null;
    },
    async settled() {
      while (running) await running;
    },
  };
}

function draw(content: WaveformContent) {
  return gridPicture(content, PICTURE_COLUMNS, PICTURE_ROWS);
}

function fresh(numbers: RevisionFigures['numbers'], picture: RevisionFigures['picture']): StoredFigures {
  return { numbers, picture, measured: null, measureFailed: null, levels: null };
}
