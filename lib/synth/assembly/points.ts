// Payload bits to constellation points.

/**
 * Runs in memory, nine i32 each: packed words (most significant bit first), first bit in them, bits from cell to cell, bits
 * a cell, points (interleaved by bit word), where the first value goes, cells, for turning constellations the parity of the
 * first cell (else -1): `points` then holds two for an even cell and two for an odd one; and how many bits on the same run
 * of the next symbol begins. With isNext that one is mapped, and noted.
 */
export function mapRuns(run: usize, count: i32, isNext: i32): void {
  for (let i = 0; i < count; i++, run += 36) {
    const words = <usize>load<u32>(run);
    const first = load<u32>(run, 4) + (isNext ? load<u32>(run, 32) : 0);
    store<u32>(run, first, 4);
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

@inline function point(points: usize, ahead: u64, at: u32, bits: u32): v128 {
  return v128.load(points + (<usize>((ahead >> (60 - at - bits)) & (((1 << bits) - 1) << 4))));
}

/** Cell after cell without holes: as many cells as fit in 32 bits from each look; the usual ones with shifts known here. */
function mapPacked(words: usize, bit: u32, bits: u32, points: usize, to: usize, cells: u32): void {
  if (bits == 2) {
    for (; cells >= 8; cells -= 8, bit += 16, to += 128) {
      const ahead = bitsAt(words, bit);
      v128.store(to, point(points, ahead, 0, 2));
      v128.store(to, point(points, ahead, 2, 2), 16);
      v128.store(to, point(points, ahead, 4, 2), 32);
      v128.store(to, point(points, ahead, 6, 2), 48);
      v128.store(to, point(points, ahead, 8, 2), 64);
      v128.store(to, point(points, ahead, 10, 2), 80);
      v128.store(to, point(points, ahead, 12, 2), 96);
      v128.store(to, point(points, ahead, 14, 2), 112);
    }
  } else if (bits == 4) {
    for (; cells >= 8; cells -= 8, bit += 32, to += 128) {
      const ahead = bitsAt(words, bit);
      v128.store(to, point(points, ahead, 0, 4));
      v128.store(to, point(points, ahead, 4, 4), 16);
      v128.store(to, point(points, ahead, 8, 4), 32);
      v128.store(to, point(points, ahead, 12, 4), 48);
      v128.store(to, point(points, ahead, 16, 4), 64);
      v128.store(to, point(points, ahead, 20, 4), 80);
      v128.store(to, point(points, ahead, 24, 4), 96);
      v128.store(to, point(points, ahead, 28, 4), 112);
    }
  } else if (bits == 6) {
    for (; cells >= 5; cells -= 5, bit += 30, to += 80) {
      const ahead = bitsAt(words, bit);
      v128.store(to, point(points, ahead, 0, 6));
      v128.store(to, point(points, ahead, 6, 6), 16);
      v128.store(to, point(points, ahead, 12, 6), 32);
      v128.store(to, point(points, ahead, 18, 6), 48);
      v128.store(to, point(points, ahead, 24, 6), 64);
    }
  } else if (bits == 8) {
    for (; cells >= 4; cells -= 4, bit += 32, to += 64) {
      const ahead = bitsAt(words, bit);
      v128.store(to, point(points, ahead, 0, 8));
      v128.store(to, point(points, ahead, 8, 8), 16);
      v128.store(to, point(points, ahead, 16, 8), 32);
      v128.store(to, point(points, ahead, 24, 8), 48);
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
