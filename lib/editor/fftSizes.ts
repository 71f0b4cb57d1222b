const LEAST = 16;
const MOST = 16384;

function isFiveSmooth(size: number): boolean {
  for (const prime of [2, 3, 5]) while (size % prime === 0) size /= prime;
  return size === 1;
}

/** All legal FFT sizes, ascending: 16 to 16384 with no prime factors but 2, 3 and 5. */
export const fftSizes: readonly number[] = Array.from({ length: MOST - LEAST + 1 }, (_, i) => LEAST + i).filter(
  isFiveSmooth,
);

/** The legal sizes nearest to a typed value, ascending (five of them stand as buttons on a phone). */
export function nearestFftSizes(value: number, count = 5): number[] {
  return [...fftSizes]
    .sort((a, b) => Math.abs(a - value) - Math.abs(b - value) || a - b)
    .slice(0, count)
    .sort((a, b) => a - b);
}

/** The legal size `steps` further up (or down, below zero) from any value. */
export function stepFftSize(value: number, steps: number): number {
  const above = fftSizes.findIndex((size) => size >= value);
  const at = above < 0 ? fftSizes.length : above;
  const isLegal = fftSizes[at] === value;
  const target = steps > 0 && !isLegal ? at + steps - 1 : at + steps;
  return fftSizes[Math.min(Math.max(target, 0), fftSizes.length - 1)]!;
}
