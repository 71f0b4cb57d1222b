import {
  addLevelParts,
  createFrameStretches,
  createFrameSum,
  createStatsCollector,
  frameLayout,
  interpolationOf,
  type FrameLayout,
  type FrameMeasure,
  type LevelParts,
  type ReferenceLevels,
  type VectorStats,
  type WaveformContent,
} from '@/lib/synth';
import { throwIfCancelled } from './packError.ts';
import { cutEvenly, planFile, stretchMost, type Stretch } from './pool/stretchPlan.ts';
import { inOrder, type WorkPool } from './pool/workPool.ts';

/** What the first pass finds: levels in units of x, and the frame's PAPR on the interpolated waveform. */
export interface RenderingMeasure {
  stats: VectorStats;
  levels: ReferenceLevels;
  frame: FrameMeasure;
}

export interface StepOptions {
  signal?: AbortSignal | undefined;
  onProgress?: ((ratio: number) => void) | undefined;
}

/** lib/synth closes its sums each so many samples: stretches that end there add up to the same bits. */
const partSamples = 128;
/** Most sums of a cycle that are kept to be added again, 32 MB of numbers. */
const keptPartsMost = 2 ** 22 / 3;

const partsDown = (samples: number): number => Math.floor(samples / partSamples) * partSamples;
const partsUp = (samples: number): number => Math.ceil(samples / partSamples) * partSamples;

/** What has to be measured of a whole rendering: the rest has the levels of `cycle`, again and again up to `copiesEnd`. */
interface LevelPlan {
  before: Stretch;
  cycle: Stretch;
  copiesEnd: number;
  after: Stretch;
}

function planLevels(content: WaveformContent): LevelPlan {
  const { layout, copies } = planFile(content);
  const { samples } = layout;
  if (copies !== null) {
    const { cycleSamples } = copies;
    let cycle = cycleSamples;
    while (cycle % partSamples !== 0) cycle += cycle; // 128 is a power of two: at most seven times
    const from = partsUp(copies.from - cycleSamples);
    const copiesEnd = partsDown(copies.end);
    if (from + 2 * cycle <= copiesEnd && cycle / partSamples <= keptPartsMost) {
      return {
        before: { from: 0, end: from },
        cycle: { from, end: from + cycle },
        copiesEnd,
        after: { from: copiesEnd, end: samples },
      };
    }
  }
  const nothing = { from: samples, end: samples };
  return { before: { from: 0, end: samples }, cycle: nothing, copiesEnd: samples, after: nothing };
}

/** Sums of a cycle added again up to where the copies end; their peaks were there before. */
function addCopies(collector: ReturnType<typeof createStatsCollector>, cycle: LevelParts[], samples: number): void {
  for (let left = samples; left > 0;) {
    for (const part of cycle) {
      const count = Math.min(left, part.samples);
      if (count === 0) break;
      const sums = part.sums.subarray(0, (3 * count) / partSamples);
      addLevelParts(collector, { ...part, samples: count, sums, peakPower: 0 });
      left -= count;
    }
  }
}

/**
 * Pass one of a pack: peaks and RMS, the same bits as lib/synth's own whole measure gives: those are what the drawing table's words are
 * scaled by. Samples that are copies of earlier ones are not rendered again, their sums are added again.
 */
export async function measureRendering(
  pool: WorkPool,
  content: WaveformContent,
  options: StepOptions = {},
): Promise<RenderingMeasure> {
  const { oversampling } = content;
  const interpolation = interpolationOf(oversampling);
  const layout = frameLayout(content);
  const fineLayout = frameLayout(content, interpolation);
  const own = planLevels(content);
  const frameStretches: Stretch[] = [];
  const frames = createFrameStretches(content, { keepBytes: 0 });
  const most = stretchMost(fineLayout);
  for (let from = 0; from < frames.samples;) {
    const end = frames.endOf(from, most);
    frameStretches.push({ from, end });
    from = end;
  }
  // an offset turns samples and rounds them: only without one do both measures see the same peak
  const turned =
    interpolation !== oversampling && content.frequencyOffsetHz !== 0 ? distinct(content, interpolation) : [];

  const lengthOf = ({ from, end }: Stretch): number => end - from;
  const all = [own.before, own.cycle, own.after, ...turned, ...frameStretches].reduce((sum, s) => sum + lengthOf(s), 0);
  let done = 0;
  const note = (stretch: Stretch): void => {
    done += lengthOf(stretch);
    options.onProgress?.(done / all);
    throwIfCancelled(options.signal);
  };
  const measure = (pieces: Stretch[], at: FrameLayout, take: (parts: LevelParts) => void): Promise<void> => {
    const cuts = pieces.flatMap((piece) => [...cutEvenly(at, piece)]);
    const tasks = cuts.map((stretch) => ({
      task: { kind: 'levels' as const, oversampling: at.oversampling, stretch },
    }));
    return inOrder(pool, tasks, (parts, { stretch }) => {
      take(parts);
      note(stretch);
    });
  };

  await pool.begin();
  const collector = createStatsCollector();
  const cycle: LevelParts[] = [];
  const add = (parts: LevelParts) => addLevelParts(collector, parts);
  await measure([own.before], layout, add);
  await measure([own.cycle], layout, (parts) => {
    cycle.push(parts);
    add(parts);
  });
  addCopies(collector, cycle, own.copiesEnd - own.cycle.end);
  await measure([own.after], layout, add);
  const { repeats, activeSamples, lastActiveSamples } = layout;
  const stats = collector.stats((repeats - 1) * activeSamples + lastActiveSamples);

  const sum = createFrameSum(content);
  const frameTasks = frameStretches.map((stretch) => ({ task: { kind: 'frame' as const, stretch } }));
  await inOrder(pool, frameTasks, (found, { stretch }) => {
    sum.add(found);
    note(stretch);
  });
  const frame = sum.result();

  let interpolatedPeak = interpolation === oversampling ? stats.samplePeak : Math.sqrt(frame.power.peakPower);
  if (turned.length > 0) {
    let peakPower = 0;
    await measure(turned, fineLayout, (parts) => (peakPower = Math.max(peakPower, parts.peakPower)));
    interpolatedPeak = Math.sqrt(peakPower);
  }
  const { samplePeak, componentPeak, rms } = stats;
  return { stats, levels: { interpolatedPeak, samplePeak, componentPeak, rms }, frame };
}

/** The samples of a rendering that are no copies of earlier ones, in whole parts. */
function distinct(content: WaveformContent, oversampling: number): Stretch[] {
  const { layout, copies } = planFile(content, oversampling);
  if (copies === null) return [{ from: 0, end: layout.samples }];
  const headEnd = Math.min(layout.samples, partsUp(copies.from));
  const tailFrom = Math.max(headEnd, partsDown(copies.end));
  return [
    { from: 0, end: headEnd },
    { from: tailFrom, end: layout.samples },
  ];
}
