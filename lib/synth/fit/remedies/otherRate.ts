import { fileSamples } from '../../numerology';
import type { WaveformDocument } from '../../types';
import { applyChanges } from '../changes';
import { allowedLength } from '../limits';
import type { PlainChange } from '../types';
import { counted } from '../words';
import { change, scaledMarkers, type Case } from './draft';

/**
 * `changes` at a sample rate that is to/from of the present one, with marks and pad in step: once with the pad's own time, once filled up
 * to a length that loads. Nothing where a mark has no whole sample there.
 */
export function* atOtherRate(
  { document, bench }: Case,
  changes: PlainChange[],
  [from, to]: [from: number, to: number],
): Iterable<PlainChange[]> {
  const { markers, timing } = document.content;
  const moved = scaledMarkers(markers, from, to);
  if (!moved) return;
  const all = [...changes];
  if (markers.length > 0) all.push(change(document, '/content/markers', moved));
  const plain = Math.round((timing.padSamples * to) / from);
  const padded = (pad: number): PlainChange[] =>
    pad === timing.padSamples ? all : [...all, change(document, '/content/timing/padSamples', pad)];
  const length = fileSamples(applyChanges(document, padded(plain)).content);
  for (const pad of new Set([plain, plain + allowedLength(length, bench.content) - length])) yield padded(pad);
}

export function padWords(document: WaveformDocument, changes: PlainChange[], from: number, to: number): string {
  const pad = changes.find((one) => one.pointer === '/content/timing/padSamples');
  const more = pad ? (pad.after as number) - Math.round((document.content.timing.padSamples * to) / from) : 0;
  return more > 0 ? ` ${counted(more, 'silent sample')} fill it up.` : '';
}
