type Words = Uint8Array | Uint16Array | Uint32Array;

function wordsOf(bytes: Uint8Array, width: number, count: number): Words | null {
  if (width === 1) return bytes;
  if (bytes.byteOffset % width !== 0) return null;
  return width === 2
    ? new Uint16Array(bytes.buffer, bytes.byteOffset, count)
    : new Uint32Array(bytes.buffer, bytes.byteOffset, count);
}

/** Takes interleaved words of `width` bytes apart: the first of each pair, the second of each pair. */
export function splitWords(
  both: Uint8Array,
  width: number,
  count: number,
  first: Uint8Array,
  second: Uint8Array,
): void {
  const from = wordsOf(both, width, 2 * count);
  const one = wordsOf(first, width, count);
  const two = wordsOf(second, width, count);
  if (from !== null && one !== null && two !== null) {
    for (let i = 0; i < count; i++) {
      one[i] = from[2 * i]!;
      two[i] = from[2 * i + 1]!;
    }
    return;
  }
  for (let i = 0, at = 0; i < count; i++) {
    for (let b = 0; b < width; b++) first[i * width + b] = both[at++]!;
    for (let b = 0; b < width; b++) second[i * width + b] = both[at++]!;
  }
}

/** Puts words of two files side by side again. */
export function joinWords(first: Uint8Array, second: Uint8Array, width: number, count: number, both: Uint8Array): void {
  const to = wordsOf(both, width, 2 * count);
  const one = wordsOf(first, width, count);
  const two = wordsOf(second, width, count);
  if (to !== null && one !== null && two !== null) {
    for (let i = 0; i < count; i++) {
      to[2 * i] = one[i]!;
      to[2 * i + 1] = two[i]!;
    }
    return;
  }
  for (let i = 0, at = 0; i < count; i++) {
    for (let b = 0; b < width; b++) both[at++] = first[i * width + b]!;
    for (let b = 0; b < width; b++) both[at++] = second[i * width + b]!;
  }
}
