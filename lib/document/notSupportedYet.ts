import type { WaveformDocument } from '@/lib/synth/index';
import type { Issue } from './issues';

const issue = (pointer: string, message: string): Issue => ({ pointer, message, code: 'not_supported_yet' });

/** The fields of a right document that this version cannot render: refused at save, never ignored. Empty: all is rendered. */
export function notSupportedYet(document: WaveformDocument): Issue[] {
  if (document.content.peakReduction.kind === 'none') return [];
  return [
    issue('/content/peakReduction/kind', 'can only be "none" in this version: peak reduction is not rendered yet'),
  ];
}
