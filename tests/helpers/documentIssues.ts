import { parseWaveformDocument } from '@/lib/document/parse';
import { smallDocument } from './documents';

/** Documents are edited as loose JSON: most cases are wrong on purpose. */
export type Loose = any;
export type Edit = (content: Loose, document: Loose) => void;

/** What is wrong with the small document after an edit; empty where nothing is. */
export function issuesAfter(edit: Edit) {
  const document: Loose = structuredClone(smallDocument());
  edit(document.content, document);
  const result = parseWaveformDocument(document);
  return result.ok ? [] : result.issues;
}
