import { gunzipSync } from 'node:zlib';
import { gridPicture } from '@/lib/drawing/gridPicture';
import type { WaveformContent } from '@/lib/synth/index';
import { measureContent } from '@/server/figures/measure';
import type { Measuring } from '@/server/figures/measureThread';

/** What the thread does, done in place; tells what it was given. */
export function measuringInPlace(): Measuring & { measured: WaveformContent[] } {
  const measured: WaveformContent[] = [];
  return {
    measured,
    stop: () => Promise.resolve(),
    async measure(bytes, onAnswer) {
      await Promise.resolve();
      const content = JSON.parse(gunzipSync(bytes).toString('utf8')) as WaveformContent;
      measured.push(content);
      onAnswer({ kind: 'picture', picture: gridPicture(content, 72, 18) });
      onAnswer({ kind: 'measured', measures: measureContent(content) });
    },
  };
}
