import { createTransformPlan } from '../engine/transformPlan';
import type { SampleEngine } from '../engine/types';
import type { BitWindow } from './bitWindow';
import type { RunSink } from './cellValues';
import { BLOCK_SAMPLES, mapRoom, RUN_NUMBERS, RUNS_MOST, STAGED_SAMPLES, type OpenRoom } from './engineRoom';
import type { PartPlan, UsefulParts } from './partTypes';
import { createSampleWork } from './sampleWork';

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
  const none = new Float64Array(0);
  const room = { numbers: none, block: none, start: 0 } as OpenRoom;
  let tenancy = -1;
  let spectrum: Float64Array = none;
  let runs = 0;
  let lastRow = -1;
  let present = -1; // the slot whose part lies in the room for those that are not kept

  const view = (at: number, length: number): Float64Array => new Float64Array(room.memory, room.start + at, length);

  /** Lays out a room that holds nothing of ours; `hasPlan`: but the transform's plan. */
  function furnish(hasPlan: boolean): void {
    const { start, memory } = room;
    room.numbers = new Float64Array(memory);
    room.integers = new Int32Array(memory);
    room.block = view(map.block, 2 * BLOCK_SAMPLES);
    room.staged = new Uint8Array(memory, start + map.words, 8 * STAGED_SAMPLES);
    spectrum = view(map.spectrum, 2 * size);
    if (!hasPlan) transformPlan.place(memory, start + map.plan, start + map.scratch, start + map.other);
    inks.forEach((ink, number) => {
      if (ink.kind === 'data') view(map.points[number]!, ink.points.length).set(ink.points);
    });
    isKept.fill(0);
    copied.fill(-1);
    runs = 0;
    lastRow = -1;
    present = -1;
    symbolsAhead = 0;
  }

  function flush(): void {
    if (runs > 0) room.kernel.mapRuns(room.start + map.runs, runs, 0);
    runs = 0;
  }

  // A steady row's runs stay listed: as long as the windows reach, the next symbol of it asks nobody for its values.
  let listed = 0;
  let nextRepeat = -1;
  let nextSymbol = -1;
  let symbolsAhead = 0;

  function writeNext(row: number, repeat: number, symbol: number): boolean {
    if (symbolsAhead <= 0 || row !== lastRow || symbol !== nextSymbol || repeat !== nextRepeat) return false;
    room.kernel.mapRuns(room.start + map.runs, listed, 1);
    symbolsAhead--;
    nextSymbol++;
    return true;
  }

  function write(row: number, repeat: number, symbol: number): void {
    if (row < 0 || row !== lastRow) {
      spectrum.fill(0, 0, 2 * low);
      spectrum.fill(0, 2 * (size - high));
      lastRow = row;
    } // else each value of the symbol before is written over
    const isSteady = row >= 0 && values.isSteadyRow(row);
    symbolsAhead = isSteady ? Infinity : 0;
    nextRepeat = repeat;
    nextSymbol = symbol + 1;
    values.writePlaced(repeat, symbol, spectrum, placement, sink);
    listed = runs;
    flush();
  }

  function flushEarly(): void {
    if (runs > 0) symbolsAhead = 0; // the list is not whole any more
    flush();
  }

  const sink: RunSink = {
    take(ink, window: BitWindow, offset, step, to, count, parity) {
      const data = inks[ink]!;
      if (data.kind !== 'data') return;
      const { start, integers } = room;
      const wordsAt = start + map.windows[data.stream]!;
      if (copied[data.stream] !== window.version) {
        flushEarly();
        integers.set(window.words, wordsAt / 4);
        copied[data.stream] = window.version;
      }
      if (runs === RUNS_MOST) flushEarly();
      const at = (start + map.runs) / 4 + RUN_NUMBERS * runs++;
      integers[at] = wordsAt;
      integers[at + 1] = offset;
      integers[at + 2] = step;
      integers[at + 3] = data.bits;
      integers[at + 4] = start + map.points[ink]!;
      integers[at + 5] = start + map.spectrum + 16 * to;
      integers[at + 6] = count;
      integers[at + 7] = parity;
      if (symbolsAhead === 0) return;
      const bits = values.bitsOfSymbol(data.stream, nextSymbol - 1);
      integers[at + 8] = bits;
      symbolsAhead = Math.min(symbolsAhead, Math.floor((window.heldBits - offset - step * count) / bits));
    },
  };

  function rowOfPart(repeat: number, symbol: number, slot: number): number {
    const { kernel, start } = room;
    const isKeeping = slot >= 0 && slot < slots;
    const part = start + (isKeeping ? map.kept + 16 * size * slot : map.part);
    if (isKeeping ? isKept[slot] === 1 : slot >= 0 && slot === present) return part;
    const row = values.rowOf(symbol);
    if (!writeNext(row, repeat, symbol)) write(row, repeat, symbol);
    kernel.transform(start + map.plan, start + map.spectrum, part, low, high);
    if (isKeeping) isKept[slot] = 1;
    else present = slot;
    return part;
  }

  return {
    onSamples: { ...createSampleWork(map, room), rowOfPart },
    enter() {
      const rented = engine.rent(tenant, map.bytes);
      if (rented.tenancy === tenancy) return true;
      ({ start: room.start, tenancy, exports: room.kernel } = rented);
      room.memory = room.kernel.memory.buffer;
      furnish(rented.planSize === size);
      rented.planSize = size;
      return false;
    },
    rest: () => engine.rest(tenant),
    part(repeat, symbol, slot) {
      room.kernel.regroup(rowOfPart(repeat, symbol, slot), size / 2, room.start + map.flat);
      return view(map.flat, 2 * size);
    },
  };
}
