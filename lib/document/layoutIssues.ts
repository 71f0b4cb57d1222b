import { layoutRefusals, vectorRefusals, type BenchContent, type WaveformContent } from '@/lib/synth/index';
import type { Issue } from './issues';

/**
 * Why no file can be written for a document in a profile's layout, in whole sentences at the profile's fields; empty where one
 * can. Without a document: what the profile contradicts itself in, which a profile of an earlier version may.
 */
export function layoutIssues(bench: BenchContent, content?: WaveformContent): Issue[] {
  const own = layoutRefusals(bench).map(({ path, words }) => ({
    path,
    words: `The profile's ${path.at(-1)} ${words}.`,
  }));
  const refusals = own.length > 0 || content === undefined ? own : vectorRefusals(content, bench);
  return refusals.map(({ path, words }) => ({
    pointer: `/content/${path.join('/')}`,
    message: words,
    code: 'invalid',
  }));
}
