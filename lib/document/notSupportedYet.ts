import type { BenchProfile, WaveformDocument } from '@/lib/synth/index';
import type { Issue } from './issues';

const issue = (pointer: string, message: string): Issue => ({ pointer, message, code: 'not_supported_yet' });

/** The fields of a right document that this version cannot render: refused at save, never ignored. Empty: all is rendered. */
export function notSupportedYet(document: WaveformDocument): Issue[] {
  if (document.content.peakReduction.kind === 'none') return [];
  return [
    issue('/content/peakReduction/kind', 'can only be "none" in this version: peak reduction is not rendered yet'),
  ];
}

/** The fields of a right bench profile that no pack can be written in yet. The profile is saved whole; fit and pack refuse it. */
export function benchNotSupportedYet(profile: BenchProfile): Issue[] {
  const { content } = profile;
  const issues: Issue[] = [];
  const need = (isMet: boolean, pointer: string, message: string): void => {
    if (!isMet) issues.push(issue(`/content/${pointer}`, message));
  };
  need(content.word !== 'int8', 'word', 'can only be "int16" or "float32" in this version');
  need(content.numberFormat === 'twosComplement', 'numberFormat', 'can only be "twosComplement" in this version');
  need(content.layout === 'interleaved', 'layout', 'can only be "interleaved" in this version');
  need(content.container === 'raw', 'container', 'can only be "raw" in this version');
  need(!content.swapIq, 'swapIq', 'can only be false in this version: I is written first');
  need(!content.negateQ, 'negateQ', 'can only be false in this version: Q keeps its sign');
  need(content.markers.packing !== 'lowBits', 'markers/packing', 'can only be "none" or "bytes" in this version');
  return issues;
}
