import { promisify } from 'node:util';
import { gunzip } from 'node:zlib';
import type { Queryable } from '@/db/openDatabase';
import type { WaveformDocument } from '@/lib/synth';
import { readContentBytes } from './contentRepo.ts';
import { readAboutAndIntent, type RevisionRow } from './revisionRepo.ts';

const inflate = promisify(gunzip);

/** The document of a revision as the text of a file, keys in the order of a file; nothing is parsed. */
export async function documentText(
  db: Queryable,
  revision: Pick<RevisionRow, 'id' | 'contentDigest'>,
): Promise<string> {
  const { aboutJson, intentJson } = readAboutAndIntent(db, revision.id);
  const contentJson = (await inflate(readContentBytes(db, revision.contentDigest))).toString('utf8');
  return `{"format":"combwright.waveform","version":1,"about":${aboutJson},"content":${contentJson},"intent":${intentJson}}`;
}

/** Checked when it was saved, so it is read without a second check. */
export async function readDocument(
  db: Queryable,
  revision: Pick<RevisionRow, 'id' | 'contentDigest'>,
): Promise<WaveformDocument> {
  return JSON.parse(await documentText(db, revision)) as WaveformDocument;
}
