// Payload bits to constellation points.

/**
 * Runs in memory, eight i32 each: packed words (most significant bit first), first bit in them, bits from cell to cell, bits
 * a cell, points (interleaved by bit word), where the first value goes, cells, and for turning constellations the parity
 * of the first cell (else -1): `points` then holds two for an even cell and two for an odd one.
 */
export function mapRuns(run: usize, count: i32): void {
  for (let i = 0; i < count; i++, run += 32) {
    const words = <usize>load<u32>(run);
    const first = load<u32>(run, 4);
    const step = load<u32>(run, 8);
    const bits = load<u32>(run, 12);
    const points = <usize>load<u32>(run, 16);
    const to = <usize>load<u32>(run, 20);
    const cells = load<u32>(run, 24);
    const parity = load<i32>(run, 28);
    if (parity >= 0) mapTurning(words, first, step, points, to, cells, <u32>parity);
    else if (step == bits) mapPacked(words, first, bits, points, to, cells);
    else mapSpaced(words, first, step, bits, points, to, cells);
  }
}

/** The 33 or more bits from `bit` on, from the top of the result downwards. */
@inline function bitsAt(words: usize, bit: u32): u64 {
  const word = words + ((<usize>(bit >> 5)) << 2);
  return ((<u64>load<u32>(word) << 32) | <u64>load<u32>(word, 4)) << (bit & 31);
}

/** Cell after cell without holes: as many cells as fit in 32 bits from each look. */
function mapPacked(words: usize, bit: u32, bits: u32, points: usize, to: usize, cells: u32): void {
  const drop = 64 - bits;
  const each: u32 = 32 / bits;
  for (; cells >= each; cells -= each, bit += each * bits) {
    let ahead = bitsAt(words, bit);
    for (const end = to + (<usize>each << 4); to < end; to += 16) {
      v128.store(to, v128.load(points + ((<usize>(ahead >> drop)) << 4)));
      ahead <<= bits;
    }
  }
  mapSpaced(words, bit, bits, bits, points, to, cells);
}

function mapSpaced(words: usize, bit: u32, step: u32, bits: u32, points: usize, to: usize, cells: u32): void {
  const drop = 64 - bits;
  for (const end = to + (<usize>cells << 4); to < end; to += 16, bit += step) {
    v128.store(to, v128.load(points + ((<usize>(bitsAt(words, bit) >> drop)) << 4)));
  }
}

function mapTurning(words: usize, bit: u32, step: u32, points: usize, to: usize, cells: u32, parity: u32): void {
  for (const end = to + (<usize>cells << 4); to < end; to += 16, bit += step, parity ^= 1) {
    const value = <usize>(bitsAt(words, bit) >> 63);
    v128.store(to, v128.load(points + (<usize>parity << 5) + (value << 4)));
  }
}
