import { fileSamples } from '../../numerology';
import type { BenchContent, Marker, WaveformContent } from '../../types';
import { markerStarts } from '../markerFinding';
import { counted } from '../words';
import { change, type Alternatives, type Case } from './draft';

/** Marks moved to the step, made long enough, and into the burst. One of too many markers has to go: that is nobody's press. */
export function markerRemedies({ document, bench }: Case): Alternatives[] {
  const { content } = document;
  const limits = bench.content.markers;
  if (content.markers.length > limits.count) return [];
  const moved: Marker[] = [];
  for (const marker of content.markers) {
    const other = movedMarker(content, marker, limits);
    if (!other) return [];
    moved.push(other);
  }
  const by = (a: Marker, b: Marker): number =>
    Math.max(Math.abs(a.offsetSamples - b.offsetSamples), Math.abs(a.lengthSamples - b.lengthSamples));
  const touched = moved.filter((marker, i) => by(marker, content.markers[i]!) > 0);
  if (touched.length === 0) return [];
  const most = Math.max(...moved.map((marker, i) => by(marker, content.markers[i]!)));
  const names = touched.map((marker) => `“${marker.name}”`).join(', ');
  return [
    [
      {
        kind: 'markers',
        label: touched.length === 1 ? 'Move the mark' : `Move ${counted(touched.length, 'mark')}`,
        changes: [change(document, '/content/markers', moved)],
        effect: `Begin or end of ${names} moves by ${touched.length === 1 ? '' : 'up to '}${counted(most, 'sample')}.`,
      },
    ],
  ];
}

/** The nearest place on the step; null where the marks of one marker lie on different places of it, or the burst is too short. */
function movedMarker(content: WaveformContent, marker: Marker, limits: BenchContent['markers']): Marker | null {
  const step = limits.stepSamples;
  const lengthSamples = Math.ceil(Math.max(marker.lengthSamples, limits.leastSamples) / step) * step;
  const starts = markerStarts(content, marker);
  const over = (start: number): number => ((start % step) + step) % step;
  const rest = over(starts[0]!);
  if (starts.some((start) => over(start) !== rest)) return null;
  let by = rest <= step / 2 ? -rest : step - rest;
  if (content.timing.mode === 'burst') {
    const first = Math.min(...starts);
    const end = Math.max(...starts) + lengthSamples;
    if (first + by < 0) by += Math.ceil(-(first + by) / step) * step;
    const beyond = end + by - fileSamples(content);
    if (beyond > 0) by -= Math.ceil(beyond / step) * step;
    if (first + by < 0) return null;
  }
  return { ...marker, offsetSamples: marker.offsetSamples + by + 0, lengthSamples };
}
