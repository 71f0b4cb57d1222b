import { createRootsOfUnity } from '../math/turns';

const SIN_60 = Math.sqrt(3) / 2;
const SQRT_HALF = Math.sqrt(0.5);
// fifth roots of unity, cosines in closed form: (√5 − 1)/4 and −(√5 + 1)/4; sines from the exact table below
const ROOTS_OF_FIVE = createRootsOfUnity(5);
const COS_72 = ROOTS_OF_FIVE[2]!;
const SIN_72 = ROOTS_OF_FIVE[3]!;
const COS_144 = ROOTS_OF_FIVE[4]!;
const SIN_144 = ROOTS_OF_FIVE[5]!;

/** One pass over a transform: `radix` parts of `part` groups, `stride` numbers walked side by side. */
export interface Pass {
  radix: number;
  part: number;
  stride: number;
}

/**
 * The passes of a 5-smooth size in order: fours first, so that all later strides are even; an odd power of two ends in an
 * eight, other sizes go on with a two, fives and threes. The last pass (part 1) has no turns.
 */
export function passesOf(size: number): Pass[] {
  const radices: number[] = [];
  let rest = size;
  let twos = 0;
  while (rest % 2 === 0) {
    twos++;
    rest /= 2;
  }
  const endsInEight = rest === 1 && twos % 2 === 1 && twos >= 3;
  for (let left = endsInEight ? twos - 3 : twos; left >= 2; left -= 2) radices.push(4);
  if (endsInEight) radices.push(8);
  else if (twos % 2 === 1) radices.push(2);
  for (const radix of [5, 3]) {
    while (rest % radix === 0) {
      radices.push(radix);
      rest /= radix;
    }
  }
  let stride = 1;
  let length = size;
  return radices.map((radix) => {
    length /= radix;
    const pass = { radix, part: length, stride };
    stride *= radix;
    return pass;
  });
}

/**
 * A transform of a 5-smooth size, not scaled: Σ x[k] e^{∓j2πkn/size}, a self-sorting pass per factor between two buffers.
 * The inverse is the forward one with real and imaginary parts in each other's place. The sample engine's kernel does the
 * same operations in the same order, so both have the same bits.
 * Source: Stockham's autosort form, see Van Loan, Computational Frameworks for the FFT, 1992, 1.7.
 */
export function createMixedRadix(
  size: number,
  direction: 'forward' | 'inverse',
): (input: Float64Array, output: Float64Array) => void {
  const passes = passesOf(size);
  const roots = createRootsOfUnity(size);
  for (let i = 1; i < roots.length; i += 2) roots[i] = 0 - roots[i]!; // e^{−j…}
  const scratchA = new Float64Array(2 * size);
  const scratchB = new Float64Array(2 * size);
  const lane = direction === 'forward' ? 0 : 1;

  return (input, output) => {
    if (passes.length === 0) {
      output[0] = input[0]!;
      output[1] = input[1]!;
      return;
    }
    let from = input;
    for (let i = 0; i < passes.length; i++) {
      const { radix, part, stride } = passes[i]!;
      const to = i === passes.length - 1 ? output : from === scratchA ? scratchB : scratchA;
      if (radix === 4) {
        if (part === 1) last4(from, to, stride, lane);
        else pass4(from, to, roots, part, stride, lane);
      } else if (radix === 8) last8(from, to, stride, lane);
      else if (radix === 2) pass2(from, to, roots, part, stride, lane);
      else if (radix === 3) pass3(from, to, roots, part, stride, lane);
      else pass5(from, to, roots, part, stride, lane);
      from = to;
    }
  };
}

// In every pass: y[q + s(r·p + j)] = w^{jp} · Σ_i x[q + s(p + m·i)] e^{−j2πij/r}, w^{jp} = roots[j·p·s]. `lane` is where
// a number's real part lies, its imaginary part lies at 1 − lane.

function write(y: Float64Array, at: number, re: number, im: number, lane: number): void {
  y[at + lane] = re;
  y[at + 1 - lane] = im;
}

function writeTurned(
  y: Float64Array,
  at: number,
  re: number,
  im: number,
  roots: Float64Array,
  w: number,
  lane: number,
): void {
  const wRe = roots[w]!;
  const wIm = roots[w + 1]!;
  y[at + lane] = re * wRe - im * wIm;
  y[at + 1 - lane] = re * wIm + im * wRe;
}

type Args = [x: Float64Array, y: Float64Array, roots: Float64Array, part: number, stride: number, lane: number];

function pass2(...[x, y, roots, part, stride, lane]: Args): void {
  const hop = 2 * stride * part;
  for (let p = 0; p < part; p++) {
    const w = 2 * p * stride;
    let a = 2 * stride * p;
    let to = 4 * stride * p;
    for (let q = 0; q < stride; q++, a += 2, to += 2) {
      const aRe = x[a + lane]!;
      const aIm = x[a + 1 - lane]!;
      const bRe = x[a + hop + lane]!;
      const bIm = x[a + hop + 1 - lane]!;
      write(y, to, aRe + bRe, aIm + bIm, lane);
      const at = to + 2 * stride;
      if (part === 1) write(y, at, aRe - bRe, aIm - bIm, lane);
      else writeTurned(y, at, aRe - bRe, aIm - bIm, roots, w, lane);
    }
  }
}

function pass3(...[x, y, roots, part, stride, lane]: Args): void {
  const hop = 2 * stride * part;
  const skip = 2 * stride;
  for (let p = 0; p < part; p++) {
    const w1 = 2 * p * stride;
    let a = 2 * stride * p;
    let to = 6 * stride * p;
    for (let q = 0; q < stride; q++, a += 2, to += 2) {
      const aRe = x[a + lane]!;
      const aIm = x[a + 1 - lane]!;
      const bRe = x[a + hop + lane]!;
      const bIm = x[a + hop + 1 - lane]!;
      const cRe = x[a + 2 * hop + lane]!;
      const cIm = x[a + 2 * hop + 1 - lane]!;
      const sumRe = bRe + cRe;
      const sumIm = bIm + cIm;
      const turnRe = SIN_60 * (bIm - cIm);
      const turnIm = SIN_60 * (cRe - bRe);
      const midRe = aRe - 0.5 * sumRe;
      const midIm = aIm - 0.5 * sumIm;
      write(y, to, aRe + sumRe, aIm + sumIm, lane);
      if (part === 1) {
        write(y, to + skip, midRe + turnRe, midIm + turnIm, lane);
        write(y, to + 2 * skip, midRe - turnRe, midIm - turnIm, lane);
      } else {
        writeTurned(y, to + skip, midRe + turnRe, midIm + turnIm, roots, w1, lane);
        writeTurned(y, to + 2 * skip, midRe - turnRe, midIm - turnIm, roots, 2 * w1, lane);
      }
    }
  }
}

function pass4(...[x, y, roots, part, stride, lane]: Args): void {
  const hop = 2 * stride * part;
  const skip = 2 * stride;
  const other = 1 - lane;
  for (let p = 0; p < part; p++) {
    const w1 = 2 * p * stride;
    const w1Re = roots[w1]!;
    const w1Im = roots[w1 + 1]!;
    const w2Re = roots[2 * w1]!;
    const w2Im = roots[2 * w1 + 1]!;
    const w3Re = roots[3 * w1]!;
    const w3Im = roots[3 * w1 + 1]!;
    let re = 2 * stride * p + lane;
    let im = 2 * stride * p + other;
    let toRe = 8 * stride * p + lane;
    let toIm = 8 * stride * p + other;
    for (let q = 0; q < stride; q++, re += 2, im += 2, toRe += 2, toIm += 2) {
      const evenRe = x[re]! + x[re + 2 * hop]!;
      const evenIm = x[im]! + x[im + 2 * hop]!;
      const evenLessRe = x[re]! - x[re + 2 * hop]!;
      const evenLessIm = x[im]! - x[im + 2 * hop]!;
      const oddRe = x[re + hop]! + x[re + 3 * hop]!;
      const oddIm = x[im + hop]! + x[im + 3 * hop]!;
      const oddLessRe = x[re + hop]! - x[re + 3 * hop]!;
      const oddLessIm = x[im + hop]! - x[im + 3 * hop]!;
      y[toRe] = evenRe + oddRe;
      y[toIm] = evenIm + oddIm;
      const oneRe = evenLessRe + oddLessIm;
      const oneIm = evenLessIm - oddLessRe;
      const twoRe = evenRe - oddRe;
      const twoIm = evenIm - oddIm;
      const threeRe = evenLessRe - oddLessIm;
      const threeIm = evenLessIm + oddLessRe;
      y[toRe + skip] = oneRe * w1Re - oneIm * w1Im;
      y[toIm + skip] = oneRe * w1Im + oneIm * w1Re;
      y[toRe + 2 * skip] = twoRe * w2Re - twoIm * w2Im;
      y[toIm + 2 * skip] = twoRe * w2Im + twoIm * w2Re;
      y[toRe + 3 * skip] = threeRe * w3Re - threeIm * w3Im;
      y[toIm + 3 * skip] = threeRe * w3Im + threeIm * w3Re;
    }
  }
}

function last4(x: Float64Array, y: Float64Array, stride: number, lane: number): void {
  const hop = 2 * stride;
  let im = 1 - lane;
  for (let re = lane; re < hop; re += 2, im += 2) {
    const evenRe = x[re]! + x[re + 2 * hop]!;
    const evenIm = x[im]! + x[im + 2 * hop]!;
    const evenLessRe = x[re]! - x[re + 2 * hop]!;
    const evenLessIm = x[im]! - x[im + 2 * hop]!;
    const oddRe = x[re + hop]! + x[re + 3 * hop]!;
    const oddIm = x[im + hop]! + x[im + 3 * hop]!;
    const oddLessRe = x[re + hop]! - x[re + 3 * hop]!;
    const oddLessIm = x[im + hop]! - x[im + 3 * hop]!;
    y[re] = evenRe + oddRe;
    y[im] = evenIm + oddIm;
    y[re + hop] = evenLessRe + oddLessIm;
    y[im + hop] = evenLessIm - oddLessRe;
    y[re + 2 * hop] = evenRe - oddRe;
    y[im + 2 * hop] = evenIm - oddIm;
    y[re + 3 * hop] = evenLessRe - oddLessIm;
    y[im + 3 * hop] = evenLessIm + oddLessRe;
  }
}

/** Eight as two fours (even and odd inputs) and the eighth turns between them. */
function last8(x: Float64Array, y: Float64Array, stride: number, lane: number): void {
  const hop = 2 * stride;
  let im = 1 - lane;
  for (let re = lane; re < hop; re += 2, im += 2) {
    const aRe = x[re]! + x[re + 4 * hop]!;
    const aIm = x[im]! + x[im + 4 * hop]!;
    const bRe = x[re]! - x[re + 4 * hop]!;
    const bIm = x[im]! - x[im + 4 * hop]!;
    const cRe = x[re + 2 * hop]! + x[re + 6 * hop]!;
    const cIm = x[im + 2 * hop]! + x[im + 6 * hop]!;
    const dRe = x[re + 2 * hop]! - x[re + 6 * hop]!;
    const dIm = x[im + 2 * hop]! - x[im + 6 * hop]!;
    const e0Re = aRe + cRe;
    const e0Im = aIm + cIm;
    const e1Re = bRe + dIm;
    const e1Im = bIm - dRe;
    const e2Re = aRe - cRe;
    const e2Im = aIm - cIm;
    const e3Re = bRe - dIm;
    const e3Im = bIm + dRe;
    const fRe = x[re + hop]! + x[re + 5 * hop]!;
    const fIm = x[im + hop]! + x[im + 5 * hop]!;
    const gRe = x[re + hop]! - x[re + 5 * hop]!;
    const gIm = x[im + hop]! - x[im + 5 * hop]!;
    const hRe = x[re + 3 * hop]! + x[re + 7 * hop]!;
    const hIm = x[im + 3 * hop]! + x[im + 7 * hop]!;
    const iRe = x[re + 3 * hop]! - x[re + 7 * hop]!;
    const iIm = x[im + 3 * hop]! - x[im + 7 * hop]!;
    const o0Re = fRe + hRe;
    const o0Im = fIm + hIm;
    const p1Re = gRe + iIm;
    const p1Im = gIm - iRe;
    const o2Re = fRe - hRe;
    const o2Im = fIm - hIm;
    const p3Re = gRe - iIm;
    const p3Im = gIm + iRe;
    // times e^{−jπ/4} and e^{−j3π/4}
    const o1Re = SQRT_HALF * (p1Re + p1Im);
    const o1Im = SQRT_HALF * (p1Im - p1Re);
    const o3Re = SQRT_HALF * (p3Im - p3Re);
    const o3Im = SQRT_HALF * (p3Re + p3Im);
    y[re] = e0Re + o0Re;
    y[im] = e0Im + o0Im;
    y[re + hop] = e1Re + o1Re;
    y[im + hop] = e1Im + o1Im;
    y[re + 2 * hop] = e2Re + o2Im;
    y[im + 2 * hop] = e2Im - o2Re;
    y[re + 3 * hop] = e3Re + o3Re;
    y[im + 3 * hop] = e3Im - o3Im;
    y[re + 4 * hop] = e0Re - o0Re;
    y[im + 4 * hop] = e0Im - o0Im;
    y[re + 5 * hop] = e1Re - o1Re;
    y[im + 5 * hop] = e1Im - o1Im;
    y[re + 6 * hop] = e2Re - o2Im;
    y[im + 6 * hop] = e2Im + o2Re;
    y[re + 7 * hop] = e3Re - o3Re;
    y[im + 7 * hop] = e3Im + o3Im;
  }
}

function pass5(...[x, y, roots, part, stride, lane]: Args): void {
  const hop = 2 * stride * part;
  const skip = 2 * stride;
  const other = 1 - lane;
  const isLast = part === 1;
  for (let p = 0; p < part; p++) {
    const w1 = 2 * p * stride;
    let re = 2 * stride * p + lane;
    let im = 2 * stride * p + other;
    let to = 10 * stride * p;
    for (let q = 0; q < stride; q++, re += 2, im += 2, to += 2) {
      const x0Re = x[re]!;
      const x0Im = x[im]!;
      const sumARe = x[re + hop]! + x[re + 4 * hop]!;
      const sumAIm = x[im + hop]! + x[im + 4 * hop]!;
      const lessARe = x[re + hop]! - x[re + 4 * hop]!;
      const lessAIm = x[im + hop]! - x[im + 4 * hop]!;
      const sumBRe = x[re + 2 * hop]! + x[re + 3 * hop]!;
      const sumBIm = x[im + 2 * hop]! + x[im + 3 * hop]!;
      const lessBRe = x[re + 2 * hop]! - x[re + 3 * hop]!;
      const lessBIm = x[im + 2 * hop]! - x[im + 3 * hop]!;
      write(y, to, x0Re + sumARe + sumBRe, x0Im + sumAIm + sumBIm, lane);
      const nearRe = x0Re + COS_72 * sumARe + COS_144 * sumBRe;
      const nearIm = x0Im + COS_72 * sumAIm + COS_144 * sumBIm;
      const farRe = x0Re + COS_144 * sumARe + COS_72 * sumBRe;
      const farIm = x0Im + COS_144 * sumAIm + COS_72 * sumBIm;
      const nearTurnRe = SIN_72 * lessAIm + SIN_144 * lessBIm;
      const nearTurnIm = SIN_72 * lessARe + SIN_144 * lessBRe;
      const farTurnRe = SIN_144 * lessAIm - SIN_72 * lessBIm;
      const farTurnIm = SIN_144 * lessARe - SIN_72 * lessBRe;
      if (isLast) {
        write(y, to + skip, nearRe + nearTurnRe, nearIm - nearTurnIm, lane);
        write(y, to + 2 * skip, farRe + farTurnRe, farIm - farTurnIm, lane);
        write(y, to + 3 * skip, farRe - farTurnRe, farIm + farTurnIm, lane);
        write(y, to + 4 * skip, nearRe - nearTurnRe, nearIm + nearTurnIm, lane);
      } else {
        writeTurned(y, to + skip, nearRe + nearTurnRe, nearIm - nearTurnIm, roots, w1, lane);
        writeTurned(y, to + 2 * skip, farRe + farTurnRe, farIm - farTurnIm, roots, 2 * w1, lane);
        writeTurned(y, to + 3 * skip, farRe - farTurnRe, farIm + farTurnIm, roots, 3 * w1, lane);
        writeTurned(y, to + 4 * skip, nearRe - nearTurnRe, nearIm + nearTurnIm, roots, 4 * w1, lane);
      }
    }
  }
}
