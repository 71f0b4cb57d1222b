import { createHash, type Hash } from 'node:crypto';
import {
  collectLevelParts,
  createFrameStretches,
  createSynthesis,
  createWordWriter,
  meanPowerBefore,
} from '@/lib/synth';
import { sampleEngine } from '../../sampleEngine.ts';
import { blocksOf } from './bytePlaces.ts';
import { findFilePeak } from './filePeak.ts';
import { createStretchProof } from './stretchProof.ts';
import type { TaskOf, WorkInput, WorkResults, WorkTask } from './workTasks.ts';

/** Makes a thing when it is first asked for. */
function lazily<Thing>(make: () => Thing): () => Thing {
  let thing: Thing | undefined;
  return () => (thing ??= make());
}

/**
 * Does one task after another; what several tasks need (renderings with their tables) is made once. Everything in a result follows from
 * the input and the task alone, so that it does not matter who did what before.
 */
export function createWorkshop(input: WorkInput) {
  const { content, bench, keepBytes } = input;
  const engine = sampleEngine();
  const renderings = new Map<number, ReturnType<typeof createSynthesis>>();
  const powerBefore = lazily(() => input.powerBefore ?? meanPowerBefore(content, { engine }));
  const options = { engine, keepBytes, powerBefore };
  const renderingAt = (oversampling: number) => {
    const rendering = renderings.get(oversampling) ?? createSynthesis(content, { ...options, oversampling });
    renderings.set(oversampling, rendering);
    return rendering;
  };
  const frame = lazily(() => createFrameStretches(content, { ...options, counts: false }));
  const proof = lazily(() => createStretchProof(content, bench, renderingAt(content.oversampling), powerBefore));
  const digests = new Map<string, Hash>();

  const work: { [Kind in WorkTask['kind']]: (task: TaskOf<Kind>) => WorkResults[Kind] } = {
    power: powerBefore,
    levels({ oversampling, stretch: { from, end } }) {
      const synthesis = renderingAt(oversampling);
      if (synthesis.position !== from) synthesis.seek(from);
      return collectLevelParts(synthesis, end - from);
    },
    frame: ({ stretch: { from, end } }) => frame().measure(from, end),
    words({ scale, stretch: { from, end }, room }) {
      const synthesis = renderingAt(content.oversampling);
      if (synthesis.position !== from) synthesis.seek(from);
      const writer = createWordWriter(bench, scale);
      synthesis.readWords(writer, end - from, new Uint8Array(room));
      return { room, saturated: { ...writer.saturated } };
    },
    proof: (task) => proof()(task),
    peak: ({ scale, files, samples }) => findFilePeak(content, bench, scale, files, samples),
    digest({ name, algorithm, place, isLast }) {
      const hash = digests.get(name) ?? createHash(algorithm);
      digests.set(name, hash);
      for (const block of blocksOf(place)) hash.update(block);
      if (!isLast) return '';
      digests.delete(name);
      return hash.digest('hex');
    },
  };
  return <Kind extends WorkTask['kind']>(task: TaskOf<Kind>): WorkResults[Kind] =>
    (work[task.kind] as (task: TaskOf<Kind>) => WorkResults[Kind])(task);
}
