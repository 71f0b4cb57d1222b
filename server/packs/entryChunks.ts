import { bitsPerCell, createBitSource, type CellValues, type PayloadSource, type WaveformContent } from '@/lib/synth';

const chunkBytes = 1 << 18;
/** Most bits of all payload files together; more repeats are left out whole. */
const mostPayloadBits = 2 ** 27;
/** Most cells that are listed one by one. */
const mostListedCells = 2 ** 17;

/** Gathers small pieces into chunks of a good size for writing; a chunk handed out is not touched again. */
class ChunkBuffer {
  private bytes = new Uint8Array(chunkBytes);
  private filled = 0;

  /** Room for `count` ≤ chunk size bytes, after handing out what is full. */
  *room(count: number): Generator<Uint8Array, Uint8Array> {
    if (this.filled + count > this.bytes.length) yield* this.rest();
    if (count > this.bytes.length) this.bytes = new Uint8Array(count);
    this.filled += count;
    return this.bytes.subarray(this.filled - count, this.filled);
  }

  *rest(): Generator<Uint8Array> {
    if (this.filled > 0) yield this.bytes.subarray(0, this.filled);
    this.bytes = new Uint8Array(chunkBytes);
    this.filled = 0;
  }
}

/** Numbers of the streams that a painted cell takes bits of. */
export function usedStreams(values: CellValues): number[] {
  return values.content.streams.map((_, stream) => stream).filter((stream) => values.bitsPerRepeat(stream) > 0);
}

/** One repeat where every used stream restarts, else all of them as far as 2^27 bits reach. */
export function listedRepeats(values: CellValues): number {
  const { content } = values;
  const used = usedStreams(values);
  if (used.every((stream) => content.streams[stream]?.acrossRepeats === 'restart')) return 1;
  const bits = used.reduce((sum, stream) => sum + values.bitsPerRepeat(stream), 0);
  return Math.max(1, Math.min(content.timing.repeats, Math.floor(mostPayloadBits / bits)));
}

export interface PayloadCount {
  bits: number;
  ones: number;
}

/** The source's first bits, packed as they are: cells of a running fill take them as they come, repeat after repeat. */
function* sourceChunks(source: PayloadSource, bits: number, count: PayloadCount): Generator<Uint8Array> {
  const bitSource = createBitSource(source);
  const words = new Uint32Array(chunkBytes / 4);
  count.bits = bits;
  count.ones = 0;
  for (let from = 0; from < bits; from += 8 * chunkBytes) {
    const left = Math.min(bits - from, 8 * chunkBytes);
    const used = Math.ceil(left / 32);
    bitSource.readWords(from / 32, used, words, 0);
    if (left % 32 !== 0) words[used - 1] = (words[used - 1]! >>> (32 - (left % 32))) << (32 - (left % 32));
    const chunk = Buffer.allocUnsafe(4 * used);
    for (let i = 0; i < used; i++) {
      const word = words[i]!;
      chunk.writeUInt32BE(word, 4 * i);
      count.ones += onesOf(word);
    }
    yield chunk.subarray(0, Math.ceil(left / 8));
  }
}

/** Bits of a word that are 1, by sums of pairs, fours and bytes side by side. */
function onesOf(word: number): number {
  const pairs = word - ((word >>> 1) & 0x55555555);
  const fours = (pairs & 0x33333333) + ((pairs >>> 2) & 0x33333333);
  return Math.imul((fours + (fours >>> 4)) & 0x0f0f0f0f, 0x01010101) >>> 24;
}

/** The bits of a stream's cells in fill order, most significant first, the last byte filled with zeros; counts as it goes. */
export function* payloadChunks(values: CellValues, stream: number, count: PayloadCount): Generator<Uint8Array> {
  const { symbolCount, streams } = values.content;
  const repeats = listedRepeats(values);
  if (streams[stream]!.fill === 'running') {
    yield* sourceChunks(streams[stream]!.source, repeats * values.bitsPerRepeat(stream), count);
    return;
  }
  const buffer = new ChunkBuffer();
  let bits = new Uint8Array(0);
  let open = 0;
  let openBits = 0;
  count.bits = 0;
  count.ones = 0;
  for (let repeat = 0; repeat < repeats; repeat++) {
    for (let symbol = 0; symbol < symbolCount; symbol++) {
      const needed = values.bitsOfSymbol(stream, symbol);
      if (needed === 0) continue;
      if (bits.length < needed) bits = new Uint8Array(needed);
      values.readBits(stream, repeat, symbol, bits);
      const out = yield* buffer.room((openBits + needed) >> 3);
      let at = 0;
      let ones = 0;
      for (let i = 0; i < needed; i++) {
        const bit = bits[i]!;
        ones += bit;
        open = (open << 1) | bit;
        if (++openBits === 8) {
          out[at++] = open;
          open = 0;
          openBits = 0;
        }
      }
      count.bits += needed;
      count.ones += ones;
    }
  }
  if (openBits > 0) (yield* buffer.room(1))[0] = open << (8 - openBits);
  yield* buffer.rest();
}

/** True for each ink number whose cells send something (also reserved ones, which peak reduction may fill). */
export function usedInks(content: WaveformContent): boolean[] {
  return content.tray.map((ink) => ink.role !== 'null');
}

/** Values of all cells that are not null: symbols in order, subcarriers upwards, complex 32-bit floats, little-endian. */
export function* referenceChunks(values: CellValues): Generator<Uint8Array> {
  const { fftSize, symbolCount } = values.content;
  const used = usedInks(values.content);
  const repeats = listedRepeats(values);
  const row = new Float64Array(2 * fftSize);
  const buffer = new ChunkBuffer();
  for (let repeat = 0; repeat < repeats; repeat++) {
    for (let symbol = 0; symbol < symbolCount; symbol++) {
      const cells = values.cells.subarray(symbol * fftSize, (symbol + 1) * fftSize);
      let count = 0;
      for (let p = 0; p < fftSize; p++) if (used[cells[p]!]) count++;
      if (count === 0) continue;
      values.write(repeat, symbol, row);
      const out = yield* buffer.room(count * 8);
      const view = new DataView(out.buffer, out.byteOffset, out.byteLength);
      for (let p = 0, at = 0; p < fftSize; p++) {
        if (!used[cells[p]!]) continue;
        view.setFloat32(at, row[2 * p]!, true);
        view.setFloat32(at + 4, row[2 * p + 1]!, true);
        at += 8;
      }
    }
  }
  yield* buffer.rest();
}

export function countUsedCells(values: CellValues): number {
  const used = usedInks(values.content);
  let count = 0;
  for (const ink of values.cells) if (used[ink]) count++;
  return count;
}

/** True where the cells of a frame are few enough to be listed one by one. */
export function listsCells(values: CellValues): boolean {
  return countUsedCells(values) <= mostListedCells;
}

/** cells.csv: every cell of one repeat that is not null, with its first bit's number in the stream's payload file. */
export function* cellsCsvChunks(values: CellValues): Generator<Uint8Array> {
  const { content } = values;
  const { fftSize, symbolCount } = content;
  const lowest = -Math.floor(fftSize / 2);
  const used = usedInks(content);
  const bitsOfInk = new Map<number, { stream: number; bits: number }>();
  content.tray.forEach((ink, number) => {
    if (ink.role !== 'data') return;
    const stream = content.streams.findIndex((s) => s.streamId === ink.value.streamId);
    bitsOfInk.set(number, { stream, bits: bitsPerCell(ink.value.constellation) });
  });
  const next = content.streams.map(() => 0);
  yield Buffer.from('symbol,subcarrier,ink,stream,firstBit\n');
  for (let symbol = 0; symbol < symbolCount; symbol++) {
    let lines = '';
    for (let p = 0; p < fftSize; p++) {
      const ink = values.cells[symbol * fftSize + p]!;
      if (!used[ink]) continue;
      const data = bitsOfInk.get(ink);
      if (data) {
        lines += `${symbol},${lowest + p},k${ink},s${data.stream},${next[data.stream]!}\n`;
        next[data.stream]! += data.bits;
      } else lines += `${symbol},${lowest + p},k${ink},,\n`;
    }
    if (lines) yield Buffer.from(lines);
  }
}
