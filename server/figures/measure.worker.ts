import path from 'node:path';
import { parentPort } from 'node:worker_threads';
import { gunzipSync } from 'node:zlib';
import { gridPicture } from '@/lib/drawing/gridPicture';
import type { WaveformContent } from '@/lib/synth';
import { loadSampleEngine } from '../sampleEngine.ts';
import type { MeasureAnswer, MeasureRequest } from './measureThread.ts';
import { measureContent } from './measure.ts';
import { PICTURE_COLUMNS, PICTURE_ROWS } from './picture.ts';

loadSampleEngine(path.resolve(import.meta.dirname, '..', 'public', 'wasm', 'engine.wasm')); // beside build/

// One content at a time, in the order asked. The small picture comes first: it is what a list waits for.
parentPort?.on('message', ({ bytes }: MeasureRequest) => {
  const answer = (message: MeasureAnswer) => parentPort?.postMessage(message);
  try {
    const content = JSON.parse(gunzipSync(bytes).toString('utf8')) as WaveformContent;
    answer({ kind: 'picture', picture: gridPicture(content, PICTURE_COLUMNS, PICTURE_ROWS) });
    answer({ kind: 'measured', measures: measureContent(content) });
  } catch (error) {
    answer({ kind: 'failed', words: error instanceof Error ? error.message : String(error) });
  }
});
