/**
 * The running levels of samples given in order, as numbers in one array that the engine's kernel works on as well:
 * 0…3 power of the open part, a lane for each sample number modulo 4; 4, 5 sums of re and im of even samples, 6, 7 of odd
 * ones; 8 samples in the open part; 9 samples; 10 largest power, 11 the first sample that has it; 12, 13 largest |re| and
 * |im|; 14…19 compensated sums of power, re and im: value and what it lost.
 */
export const LEVEL_STATE_LENGTH = 20;
export const PART_SAMPLES = 128;

/** Adds to one of the compensated sums. */
export function addTo(state: Float64Array, sum: number, value: number): void {
  const old = state[sum]!;
  const next = old + value;
  state[sum + 1]! += Math.abs(old) >= Math.abs(value) ? old - next + value : value - next + old;
  state[sum] = next;
}

/** Ends the open part: its lanes go to the sums. */
export function closePart(state: Float64Array): void {
  addTo(state, 14, state[0]! + state[1]! + (state[2]! + state[3]!));
  addTo(state, 16, state[4]! + state[6]!);
  addTo(state, 18, state[5]! + state[7]!);
  state.fill(0, 0, 9);
}

/** Adds `count` interleaved samples from data[2·at…]; the same bits as the kernel's measure. */
export function addSamples(state: Float64Array, data: Float64Array, at: number, count: number): void {
  let inPart = state[8]!;
  let peak = state[10]!;
  let mostRe = state[12]!;
  let mostIm = state[13]!;
  const samples = state[9]! - at;
  for (let i = at; i < at + count; i++) {
    const re = data[2 * i]!;
    const im = data[2 * i + 1]!;
    const square = re * re + im * im;
    state[inPart & 3]! += square;
    const even = 4 + 2 * (inPart & 1);
    state[even]! += re;
    state[even + 1]! += im;
    if (square > peak) {
      peak = square;
      state[11] = samples + i;
    }
    const absRe = Math.abs(re);
    const absIm = Math.abs(im);
    if (absRe > mostRe) mostRe = absRe;
    if (absIm > mostIm) mostIm = absIm;
    if (++inPart === PART_SAMPLES) {
      closePart(state);
      inPart = 0;
    }
  }
  state[8] = inPart;
  state[9] = state[9]! + count;
  state[10] = peak;
  state[12] = mostRe;
  state[13] = mostIm;
}

/** Sums of closed parts in order: power, re and im of each; `count` numbers are in use. */
export interface PartSums {
  numbers: Float64Array;
  count: number;
}

/**
 * Takes the sums of the part that has just been closed out of a state whose sums were 0 before it: a first addition loses nothing.
 * The state's numbers begin at state[at].
 */
export function takePart(state: Float64Array, at: number, sums: PartSums): void {
  for (let sum = at + 14; sum < at + 20; sum += 2) {
    sums.numbers[sums.count++] = state[sum]!;
    state[sum] = 0;
  }
}
