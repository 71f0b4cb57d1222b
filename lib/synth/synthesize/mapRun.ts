/**
 * Puts `count` data cells on their points: cell i takes the `bits` bits at offset + i·step of the packed `words` (most
 * significant first) and goes to out[2·(to + i)]. The inner loop of every rendering: no calls, no objects.
 */
export function mapRun(
  words: Uint32Array,
  offset: number,
  step: number,
  bits: number,
  points: Float64Array,
  out: Float64Array,
  to: number,
  count: number,
): void {
  const drop = 32 - bits;
  let bit = offset;
  let at = 2 * to;
  for (let i = 0; i < count; i++) {
    const word = bit >>> 5;
    const shift = bit & 31;
    const head = (words[word]! << shift) | ((words[word + 1]! >>> 1) >>> (31 - shift));
    const from = (head >>> drop) << 1;
    out[at] = points[from]!;
    out[at + 1] = points[from + 1]!;
    bit += step;
    at += 2;
  }
}

/** As mapRun for π/2-BPSK, one bit a cell: `points` holds the two of an even index, then the two of an odd one. */
export function mapHalfTurningRun(
  words: Uint32Array,
  offset: number,
  step: number,
  points: Float64Array,
  firstIndex: number,
  out: Float64Array,
  to: number,
  count: number,
): void {
  let parity = firstIndex % 2;
  for (let i = 0; i < count; i++, parity ^= 1) {
    const bit = offset + i * step;
    const value = (words[bit >>> 5]! >>> (31 - (bit & 31))) & 1;
    const from = 4 * parity + 2 * value;
    out[2 * (to + i)] = points[from]!;
    out[2 * (to + i) + 1] = points[from + 1]!;
  }
}
