import { createRootsOfUnity } from '../math/turns';

const SIN_60 = Math.sqrt(3) / 2;
// fifth roots of unity, cosines in closed form: (√5 − 1)/4 and −(√5 + 1)/4; sines from the exact table below
const ROOTS_OF_FIVE = createRootsOfUnity(5);
const COS_72 = ROOTS_OF_FIVE[2]!;
const SIN_72 = ROOTS_OF_FIVE[3]!;
const COS_144 = ROOTS_OF_FIVE[4]!;
const SIN_144 = ROOTS_OF_FIVE[5]!;

/** Factors of a 5-smooth size, fives and threes first so that the last passes run over long strides. */
function factorsOf(size: number): number[] {
  const factors: number[] = [];
  let rest = size;
  for (const radix of [5, 3, 4, 2]) {
    while (rest % radix === 0) {
      factors.push(radix);
      rest /= radix;
    }
  }
  return factors;
}

/**
 * The forward transform of a 5-smooth size, not scaled: a self-sorting pass per factor between two buffers.
 * Source: Stockham's autosort form, see Van Loan, Computational Frameworks for the FFT, 1992, 1.7.
 */
export function createMixedRadix(size: number): (input: Float64Array, output: Float64Array) => void {
  const factors = factorsOf(size);
  const roots = createRootsOfUnity(size);
  for (let i = 1; i < roots.length; i += 2) roots[i] = 0 - roots[i]!; // e^{−j…}
  const scratchA = new Float64Array(2 * size);
  const scratchB = new Float64Array(2 * size);

  return (input, output) => {
    if (factors.length === 0) {
      output[0] = input[0]!;
      output[1] = input[1]!;
      return;
    }
    let from = input;
    let stride = 1;
    let length = size;
    for (let pass = 0; pass < factors.length; pass++) {
      const radix = factors[pass]!;
      const to = pass === factors.length - 1 ? output : from === scratchA ? scratchB : scratchA;
      const part = length / radix;
      if (radix === 2) pass2(from, to, roots, part, stride);
      else if (radix === 3) pass3(from, to, roots, part, stride);
      else if (radix === 4) pass4(from, to, roots, part, stride);
      else pass5(from, to, roots, part, stride);
      from = to;
      stride *= radix;
      length = part;
    }
  };
}

// In every pass: y[q + s(r·p + j)] = w^{jp} · Σ_i x[q + s(p + m·i)] e^{−j2πij/r}, w^{jp} = roots[j·p·s].

function pass2(x: Float64Array, y: Float64Array, roots: Float64Array, part: number, stride: number): void {
  const hop = 2 * stride * part;
  for (let p = 0; p < part; p++) {
    const w = 2 * p * stride;
    const wRe = roots[w]!;
    const wIm = roots[w + 1]!;
    let a = 2 * stride * p;
    let to = 4 * stride * p;
    for (let q = 0; q < stride; q++, a += 2, to += 2) {
      const aRe = x[a]!;
      const aIm = x[a + 1]!;
      const bRe = x[a + hop]!;
      const bIm = x[a + hop + 1]!;
      const dRe = aRe - bRe;
      const dIm = aIm - bIm;
      y[to] = aRe + bRe;
      y[to + 1] = aIm + bIm;
      const at = to + 2 * stride;
      y[at] = dRe * wRe - dIm * wIm;
      y[at + 1] = dRe * wIm + dIm * wRe;
    }
  }
}

function pass3(x: Float64Array, y: Float64Array, roots: Float64Array, part: number, stride: number): void {
  const hop = 2 * stride * part;
  const skip = 2 * stride;
  for (let p = 0; p < part; p++) {
    const w1 = 2 * p * stride;
    const w2 = 2 * w1;
    const w1Re = roots[w1]!;
    const w1Im = roots[w1 + 1]!;
    const w2Re = roots[w2]!;
    const w2Im = roots[w2 + 1]!;
    let a = 2 * stride * p;
    let to = 6 * stride * p;
    for (let q = 0; q < stride; q++, a += 2, to += 2) {
      const bRe = x[a + hop]!;
      const bIm = x[a + hop + 1]!;
      const cRe = x[a + 2 * hop]!;
      const cIm = x[a + 2 * hop + 1]!;
      const sumRe = bRe + cRe;
      const sumIm = bIm + cIm;
      const turnRe = SIN_60 * (bIm - cIm);
      const turnIm = SIN_60 * (cRe - bRe);
      const midRe = x[a]! - 0.5 * sumRe;
      const midIm = x[a + 1]! - 0.5 * sumIm;
      y[to] = x[a]! + sumRe;
      y[to + 1] = x[a + 1]! + sumIm;
      const oneRe = midRe + turnRe;
      const oneIm = midIm + turnIm;
      const twoRe = midRe - turnRe;
      const twoIm = midIm - turnIm;
      y[to + skip] = oneRe * w1Re - oneIm * w1Im;
      y[to + skip + 1] = oneRe * w1Im + oneIm * w1Re;
      y[to + 2 * skip] = twoRe * w2Re - twoIm * w2Im;
      y[to + 2 * skip + 1] = twoRe * w2Im + twoIm * w2Re;
    }
  }
}

function pass4(x: Float64Array, y: Float64Array, roots: Float64Array, part: number, stride: number): void {
  const hop = 2 * stride * part;
  const skip = 2 * stride;
  for (let p = 0; p < part; p++) {
    const w1 = 2 * p * stride;
    const w1Re = roots[w1]!;
    const w1Im = roots[w1 + 1]!;
    const w2Re = roots[2 * w1]!;
    const w2Im = roots[2 * w1 + 1]!;
    const w3Re = roots[3 * w1]!;
    const w3Im = roots[3 * w1 + 1]!;
    let a = 2 * stride * p;
    let to = 8 * stride * p;
    for (let q = 0; q < stride; q++, a += 2, to += 2) {
      const evenRe = x[a]! + x[a + 2 * hop]!;
      const evenIm = x[a + 1]! + x[a + 2 * hop + 1]!;
      const evenLessRe = x[a]! - x[a + 2 * hop]!;
      const evenLessIm = x[a + 1]! - x[a + 2 * hop + 1]!;
      const oddRe = x[a + hop]! + x[a + 3 * hop]!;
      const oddIm = x[a + hop + 1]! + x[a + 3 * hop + 1]!;
      const oddLessRe = x[a + hop]! - x[a + 3 * hop]!;
      const oddLessIm = x[a + hop + 1]! - x[a + 3 * hop + 1]!;
      y[to] = evenRe + oddRe;
      y[to + 1] = evenIm + oddIm;
      const oneRe = evenLessRe + oddLessIm;
      const oneIm = evenLessIm - oddLessRe;
      const twoRe = evenRe - oddRe;
      const twoIm = evenIm - oddIm;
      const threeRe = evenLessRe - oddLessIm;
      const threeIm = evenLessIm + oddLessRe;
      y[to + skip] = oneRe * w1Re - oneIm * w1Im;
      y[to + skip + 1] = oneRe * w1Im + oneIm * w1Re;
      y[to + 2 * skip] = twoRe * w2Re - twoIm * w2Im;
      y[to + 2 * skip + 1] = twoRe * w2Im + twoIm * w2Re;
      y[to + 3 * skip] = threeRe * w3Re - threeIm * w3Im;
      y[to + 3 * skip + 1] = threeRe * w3Im + threeIm * w3Re;
    }
  }
}

function pass5(x: Float64Array, y: Float64Array, roots: Float64Array, part: number, stride: number): void {
  const hop = 2 * stride * part;
  const skip = 2 * stride;
  for (let p = 0; p < part; p++) {
    const w1 = 2 * p * stride;
    let a = 2 * stride * p;
    let to = 10 * stride * p;
    for (let q = 0; q < stride; q++, a += 2, to += 2) {
      const x0Re = x[a]!;
      const x0Im = x[a + 1]!;
      const sumARe = x[a + hop]! + x[a + 4 * hop]!;
      const sumAIm = x[a + hop + 1]! + x[a + 4 * hop + 1]!;
      const lessARe = x[a + hop]! - x[a + 4 * hop]!;
      const lessAIm = x[a + hop + 1]! - x[a + 4 * hop + 1]!;
      const sumBRe = x[a + 2 * hop]! + x[a + 3 * hop]!;
      const sumBIm = x[a + 2 * hop + 1]! + x[a + 3 * hop + 1]!;
      const lessBRe = x[a + 2 * hop]! - x[a + 3 * hop]!;
      const lessBIm = x[a + 2 * hop + 1]! - x[a + 3 * hop + 1]!;
      y[to] = x0Re + sumARe + sumBRe;
      y[to + 1] = x0Im + sumAIm + sumBIm;
      const nearRe = x0Re + COS_72 * sumARe + COS_144 * sumBRe;
      const nearIm = x0Im + COS_72 * sumAIm + COS_144 * sumBIm;
      const farRe = x0Re + COS_144 * sumARe + COS_72 * sumBRe;
      const farIm = x0Im + COS_144 * sumAIm + COS_72 * sumBIm;
      const nearTurnRe = SIN_72 * lessAIm + SIN_144 * lessBIm;
      const nearTurnIm = 0 - (SIN_72 * lessARe + SIN_144 * lessBRe);
      const farTurnRe = SIN_144 * lessAIm - SIN_72 * lessBIm;
      const farTurnIm = SIN_72 * lessBRe - SIN_144 * lessARe;
      writeTurned(y, to + skip, nearRe + nearTurnRe, nearIm + nearTurnIm, roots, w1);
      writeTurned(y, to + 2 * skip, farRe + farTurnRe, farIm + farTurnIm, roots, 2 * w1);
      writeTurned(y, to + 3 * skip, farRe - farTurnRe, farIm - farTurnIm, roots, 3 * w1);
      writeTurned(y, to + 4 * skip, nearRe - nearTurnRe, nearIm - nearTurnIm, roots, 4 * w1);
    }
  }
}

function writeTurned(y: Float64Array, at: number, re: number, im: number, roots: Float64Array, w: number): void {
  const wRe = roots[w]!;
  const wIm = roots[w + 1]!;
  y[at] = re * wRe - im * wIm;
  y[at + 1] = re * wIm + im * wRe;
}
