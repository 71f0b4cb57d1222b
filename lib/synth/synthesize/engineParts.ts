import { createTransformPlan } from '../engine/transformPlan';
import type { EngineExports, SampleEngine } from '../engine/types';
import type { BitWindow } from './bitWindow';
import type { RunSink } from './cellValues';
import { LEVEL_STATE_LENGTH } from './levelState';
import type { PartPlan, SampleWork, UsefulParts } from './partTypes';

const BLOCK_SAMPLES = 4096;
const RUNS_MOST = 512;
const RUN_NUMBERS = 8;
const LEAST_WINDOW_WORDS = 514;
const MOST_BITS = 12; // of a cell, or from an anchored cell to the next
const SPARE = 64; // what the kernel may read or write beyond an end

/** Where everything lies in a room, in bytes from its beginning. */
interface RoomMap {
  plan: number;
  scratch: number;
  other: number;
  spectrum: number;
  part: number;
  flat: number;
  runs: number;
  windows: number[];
  points: number[];
  state: number;
  counts: number;
  block: number;
  words: number;
  kept: number;
  bytes: number;
}

function mapRoom({ values, layout }: PartPlan, planBytes: number, slots: number): RoomMap {
  const size = layout.usefulSamples;
  const { content, inks } = values;
  let end = 0;
  const take = (bytes: number): number => {
    const at = end;
    end += Math.ceil((bytes + SPARE) / 64) * 64;
    return at;
  };
  const windowWords = Math.max(LEAST_WINDOW_WORDS, Math.ceil((MOST_BITS * content.fftSize) / 32) + 4);
  const map = {
    plan: take(planBytes),
    scratch: take(16 * size),
    other: take(16 * size),
    spectrum: take(16 * size),
    part: take(16 * size),
    flat: take(16 * size),
    runs: take(4 * RUN_NUMBERS * RUNS_MOST),
    windows: content.streams.map(() => take(4 * windowWords)),
    points: inks.map((plan) => (plan.kind === 'data' ? take(8 * plan.points.length) : 0)),
    state: take(8 * LEVEL_STATE_LENGTH),
    counts: take(16),
    block: take(16 * BLOCK_SAMPLES),
    words: take(16 * BLOCK_SAMPLES),
    kept: take(16 * size * slots),
  };
  return { ...map, bytes: end };
}

/**
 * Useful parts made in the engine's memory: values that are not payload are written there, payload runs are listed and put
 * on their points in one call, transformed in another.
 */
export function createEngineParts(plan: PartPlan, engine: SampleEngine, slots: number): UsefulParts {
  const { values, layout, placement, low, high } = plan;
  const { inks, content } = values;
  const size = layout.usefulSamples;
  const transformPlan = createTransformPlan(size);
  const map = mapRoom(plan, transformPlan.bytes, slots);
  const tenant = {};
  const isKept = new Uint8Array(slots);
  const copied = new Float64Array(content.streams.length);
  let tenancy = -1;
  let start = 0;
  let kernel: EngineExports;
  let memory = new ArrayBuffer(0);
  let numbers: Float64Array = new Float64Array(0); // the whole memory
  let integers = new Int32Array(0);
  let spectrum: Float64Array = new Float64Array(0);
  let runs = 0;
  let lastRow = -1;
  let present = -1; // the slot whose part lies in the room for those that are not kept

  const view = (at: number, length: number): Float64Array => new Float64Array(memory, start + at, length);

  /** Lays out a room that holds nothing of ours. */
  function furnish(): void {
    ({ buffer: memory } = kernel.memory);
    numbers = new Float64Array(memory);
    integers = new Int32Array(memory);
    spectrum = view(map.spectrum, 2 * size);
    spectrum.fill(0);
    transformPlan.place(memory, start + map.plan, start + map.scratch, start + map.other);
    inks.forEach((ink, number) => {
      if (ink.kind === 'data') view(map.points[number]!, ink.points.length).set(ink.points);
    });
    isKept.fill(0);
    copied.fill(-1);
    runs = 0;
    lastRow = -1;
    present = -1;
    work.block = view(map.block, 2 * BLOCK_SAMPLES);
  }

  function flush(): void {
    if (runs > 0) kernel.mapRuns(start + map.runs, runs);
    runs = 0;
  }

  const sink: RunSink = {
    take(ink, window: BitWindow, offset, step, to, count, parity) {
      const data = inks[ink]!;
      if (data.kind !== 'data') return;
      const wordsAt = start + map.windows[data.stream]!;
      if (copied[data.stream] !== window.version) {
        flush();
        integers.set(window.words, wordsAt / 4);
        copied[data.stream] = window.version;
      }
      if (runs === RUNS_MOST) flush();
      const at = (start + map.runs) / 4 + RUN_NUMBERS * runs++;
      integers[at] = wordsAt;
      integers[at + 1] = offset;
      integers[at + 2] = step;
      integers[at + 3] = data.bits;
      integers[at + 4] = start + map.points[ink]!;
      integers[at + 5] = start + map.spectrum + 16 * to;
      integers[at + 6] = count;
      integers[at + 7] = parity;
    },
  };

  function rowOfPart(repeat: number, symbol: number, slot: number): number {
    const isKeeping = slot >= 0 && slot < slots;
    const part = start + (isKeeping ? map.kept + 16 * size * slot : map.part);
    if (isKeeping ? isKept[slot] === 1 : slot >= 0 && slot === present) return part;
    const row = values.rowOf(symbol);
    if (row < 0 || row !== lastRow) {
      spectrum.fill(0, 0, 2 * low);
      spectrum.fill(0, 2 * (size - high));
      lastRow = row;
    } // else each value of the symbol before is written over
    values.writePlaced(repeat, symbol, spectrum, placement, sink);
    flush();
    kernel.transform(start + map.plan, start + map.spectrum, part, low, high);
    if (isKeeping) isKept[slot] = 1;
    else present = slot;
    return part;
  }

  const work: SampleWork & { block: Float64Array } = {
    block: spectrum,
    lend: (collector) => numbers.set(collector.state, (start + map.state) / 8),
    measure: (row, from, count) => kernel.measure(start + map.state, row, from, count),
    giveBack(collector) {
      const state = (start + map.state) / 8;
      collector.state.set(numbers.subarray(state, state + LEVEL_STATE_LENGTH));
    },
    rowOfBlock(count) {
      const row = start + map.block;
      kernel.regroup(row, Math.ceil(count / 2), row);
      return row;
    },
    rowOfPart,
    write(writer, row, from, count, bytes, to) {
      const { direct, bytesPerSample } = writer;
      const counts = start + map.counts;
      const words = start + map.words;
      numbers[counts / 8] = 0;
      numbers[counts / 8 + 1] = 0;
      for (let done = 0; done < count; done += BLOCK_SAMPLES) {
        const part = Math.min(count - done, BLOCK_SAMPLES);
        const first = from + done;
        const at = to + done * bytesPerSample;
        if (direct === null) {
          const skipped = first % 2;
          kernel.regroup(row + 16 * (first - skipped), Math.ceil((part + skipped) / 2), words);
          writer.write(new Float64Array(memory, words + 16 * skipped, 2 * part), part, bytes, at);
          continue;
        }
        if (direct.word === 'int16') {
          kernel.integerWords(row, first, part, words, direct.scale, -direct.most - 1, direct.most, counts);
        } else kernel.floatWords(row, first, part, words, direct.scale, counts);
        bytes.set(new Uint8Array(memory, words, part * bytesPerSample), at);
      }
      writer.saturated.components += numbers[counts / 8]!;
      writer.saturated.samples += numbers[counts / 8 + 1]!;
    },
  };

  return {
    onSamples: work,
    enter() {
      const room = engine.rent(tenant, map.bytes);
      if (room.tenancy === tenancy) return true;
      ({ start, tenancy, exports: kernel } = room);
      furnish();
      return false;
    },
    rest: () => engine.rest(tenant),
    part(repeat, symbol, slot) {
      kernel.regroup(rowOfPart(repeat, symbol, slot), size / 2, start + map.flat);
      return view(map.flat, 2 * size);
    },
  };
}
