import type { DirectWords, WordWriter } from '../files/wordWriter';
import { BLOCK_SAMPLES, STAGED_SAMPLES, type OpenRoom, type RoomMap } from './engineRoom';
import { LEVEL_STATE_LENGTH, PART_SAMPLES, takePart, type PartSums } from './levelState';
import type { SampleWork } from './partTypes';

const BOUND = 1073741824; // 2^30, half of what the kernel wants

/** What the engine does with finished samples in a room. */
export function createSampleWork(map: RoomMap, room: OpenRoom): Omit<SampleWork, 'rowOfPart'> {
  let partSums: PartSums | undefined;
  let writer: WordWriter | null = null;
  let direct: DirectWords | null = null;
  let isBounded = 0;
  let bytes: Uint8Array = new Uint8Array(0);
  let to = 0; // where the next bytes go
  let staged = 0; // samples whose words wait

  /** As the kernel's measure, a part at a time, so that each one's sums can be taken away. */
  function measureParts(sums: PartSums, row: number, from: number, count: number): void {
    const { kernel, numbers, start } = room;
    const state = (start + map.state) / 8;
    for (let done = 0; done < count;) {
      const left = PART_SAMPLES - numbers[state + 8]!;
      const part = Math.min(count - done, left);
      kernel.measure(start + map.state, row, from + done, part);
      if (part === left) takePart(numbers, state, sums);
      done += part;
    }
  }

  /** Words of a layout that the kernel does not know, by the writer itself. */
  function writeIndirectly(row: number, from: number, count: number): void {
    const { kernel, start, memory } = room;
    const block = start + map.block;
    for (let done = 0; done < count;) {
      const skipped = (from + done) % 2;
      const part = Math.min(count - done, BLOCK_SAMPLES - skipped);
      kernel.regroup(row + 16 * (from + done - skipped), Math.ceil((part + skipped) / 2), block);
      to += writer!.write(new Float64Array(memory, block + 16 * skipped, 2 * part), part, bytes, to);
      done += part;
    }
  }

  function copyOut(): void {
    const size = writer!.bytesPerSample;
    const isFull = staged === STAGED_SAMPLES && size === 8;
    bytes.set(isFull ? room.staged : room.staged.subarray(0, staged * size), to);
    to += staged * size;
    staged = 0;
  }

  return {
    openBlock: () => room.block,
    rowOfBlock(count) {
      const { kernel, start } = room;
      kernel.regroup(start + map.block, Math.ceil(count / 2), start + map.block);
      return start + map.block;
    },
    lend(collector) {
      ({ partSums } = collector);
      room.numbers.set(collector.state, (room.start + map.state) / 8);
    },
    measure(row, from, count) {
      if (partSums === undefined) room.kernel.measure(room.start + map.state, row, from, count);
      else measureParts(partSums, row, from, count);
    },
    giveBack(collector) {
      const state = (room.start + map.state) / 8;
      collector.state.set(room.numbers.subarray(state, state + LEVEL_STATE_LENGTH));
    },
    beginWords(wordWriter, out, at, most) {
      writer = wordWriter;
      ({ direct } = wordWriter);
      isBounded = direct !== null && most * direct.scale < BOUND ? 1 : 0;
      bytes = out;
      to = at;
      const counts = (room.start + map.counts) / 8;
      room.numbers[counts] = 0;
      room.numbers[counts + 1] = 0;
    },
    write(row, from, count) {
      if (direct === null) {
        writeIndirectly(row, from, count);
        return;
      }
      const { kernel, start } = room;
      const { word, scale, most } = direct;
      const counts = start + map.counts;
      for (let done = 0; done < count;) {
        const part = Math.min(count - done, STAGED_SAMPLES - staged);
        const words = start + map.words;
        if (word === 'int16') {
          kernel.integerWords(row, from + done, part, words + 4 * staged, scale, -most - 1, most, counts, isBounded);
        } else kernel.floatWords(row, from + done, part, words + 8 * staged, scale, counts);
        staged += part;
        done += part;
        if (staged === STAGED_SAMPLES) copyOut();
      }
    },
    endWords() {
      if (staged > 0) copyOut();
      const counts = (room.start + map.counts) / 8;
      writer!.saturated.components += room.numbers[counts]!;
      writer!.saturated.samples += room.numbers[counts + 1]!;
      writer = null;
      bytes = new Uint8Array(0);
    },
  };
}
