// The inverse transform: the passes of lib/synth/fft/mixedRadix, two numbers of a row side by side in each register. Between
// passes and in the result numbers lie in pairs: both real parts, then both imaginary parts, 32 bytes a pair.
//
// A plan in memory: i32 count of passes, i32 size, i32 scratch, i32 other scratch, six constants (f64: sine of 60°, √½, cosine
// and sine of 72°, of 144°), then i32 radix, part, stride, table for each pass.
// Addresses: `hop` from an input of a butterfly to the next, `skip` from an output to the next, in bytes.

@inline const PASSES: usize = 64;

@inline function add(a: v128, b: v128): v128 { return f64x2.add(a, b); }
@inline function sub(a: v128, b: v128): v128 { return f64x2.sub(a, b); }
@inline function mul(a: v128, b: v128): v128 { return f64x2.mul(a, b); }
@inline function lows(a: v128, b: v128): v128 { return v128.shuffle<f64>(a, b, 0, 2); }
@inline function highs(a: v128, b: v128): v128 { return v128.shuffle<f64>(a, b, 1, 3); }

@inline function put(to: usize, re: v128, im: v128): void {
  v128.store(to, re);
  v128.store(to, im, 16);
}

/** As put, times the turn at `turn` (re, im) but in a last pass. */
@inline function putTurned(to: usize, re: v128, im: v128, turn: usize, isLast: bool): void {
  if (isLast) put(to, re, im);
  else {
    const wRe = v128.load64_splat(turn);
    const wIm = v128.load64_splat(turn, 8);
    put(to, sub(mul(re, wRe), mul(im, wIm)), add(mul(re, wIm), mul(im, wRe)));
  }
}

/** Two groups of the first pass; has…: that input may be other than zero. */
@inline function firstPair(
  x: usize, hop: usize, y: usize, table: usize, hasA: bool, hasB: bool, hasC: bool, hasD: bool,
): void {
  const zero = f64x2.splat(0);
  let aRe = zero, aIm = zero, bRe = zero, bIm = zero, cRe = zero, cIm = zero, dRe = zero, dIm = zero;
  if (hasA) {
    const a0 = v128.load(x), a1 = v128.load(x, 16);
    aRe = lows(a0, a1);
    aIm = highs(a0, a1);
  }
  if (hasB) {
    const b0 = v128.load(x + hop), b1 = v128.load(x + hop, 16);
    bRe = lows(b0, b1);
    bIm = highs(b0, b1);
  }
  if (hasC) {
    const c0 = v128.load(x + 2 * hop), c1 = v128.load(x + 2 * hop, 16);
    cRe = lows(c0, c1);
    cIm = highs(c0, c1);
  }
  if (hasD) {
    const d0 = v128.load(x + 3 * hop), d1 = v128.load(x + 3 * hop, 16);
    dRe = lows(d0, d1);
    dIm = highs(d0, d1);
  }
  const evenRe = hasC ? add(aRe, cRe) : aRe, evenIm = hasC ? add(aIm, cIm) : aIm;
  const lessRe = hasC ? sub(aRe, cRe) : aRe, lessIm = hasC ? sub(aIm, cIm) : aIm;
  let zeroRe = evenRe, zeroIm = evenIm, oneRe = lessRe, oneIm = lessIm;
  let twoRe = evenRe, twoIm = evenIm, threeRe = lessRe, threeIm = lessIm;
  if (hasB || hasD) {
    const oddRe = hasB ? add(bRe, dRe) : dRe, oddIm = hasB ? add(bIm, dIm) : dIm;
    const oddLessRe = sub(bRe, dRe), oddLessIm = sub(bIm, dIm);
    zeroRe = add(evenRe, oddRe);
    zeroIm = add(evenIm, oddIm);
    oneRe = sub(lessRe, oddLessIm);
    oneIm = add(lessIm, oddLessRe);
    twoRe = sub(evenRe, oddRe);
    twoIm = sub(evenIm, oddIm);
    threeRe = add(lessRe, oddLessIm);
    threeIm = sub(lessIm, oddLessRe);
  }
  const w1Re = v128.load(table), w1Im = v128.load(table, 16);
  const y1Re = sub(mul(oneRe, w1Re), mul(oneIm, w1Im));
  const y1Im = add(mul(oneRe, w1Im), mul(oneIm, w1Re));
  v128.store(y, lows(zeroRe, y1Re));
  v128.store(y, lows(zeroIm, y1Im), 16);
  v128.store(y, highs(zeroRe, y1Re), 64);
  v128.store(y, highs(zeroIm, y1Im), 80);
  const w2Re = v128.load(table, 32), w2Im = v128.load(table, 48);
  const y2Re = sub(mul(twoRe, w2Re), mul(twoIm, w2Im));
  const y2Im = add(mul(twoRe, w2Im), mul(twoIm, w2Re));
  const w3Re = v128.load(table, 64), w3Im = v128.load(table, 80);
  const y3Re = sub(mul(threeRe, w3Re), mul(threeIm, w3Im));
  const y3Im = add(mul(threeRe, w3Im), mul(threeIm, w3Re));
  v128.store(y, lows(y2Re, y3Re), 32);
  v128.store(y, lows(y2Im, y3Im), 48);
  v128.store(y, highs(y2Re, y3Re), 96);
  v128.store(y, highs(y2Im, y3Im), 112);
}

/** The first pass over all inputs. */
function firstFull(x: usize, y: usize, size: usize, table: usize): void {
  const hop = size << 2; // a quarter of the numbers, 16 bytes each
  const end = x + hop;
  for (; x < end; x += 32, y += 128, table += 96) firstPair(x, hop, y, table, true, true, true, true);
}

/** The first pass where only inputs 0…low−1 and size−high…size−1 can be other than zero, both at most a quarter. */
function firstOuter(x: usize, y: usize, size: usize, table: usize, low: usize, high: usize): void {
  const hop = size << 2;
  const start = x;
  const quarter = size >> 2;
  const lowEnd = start + (((low + 1) & ~1) << 4);
  const highStart = start + (((quarter - high) & ~1) << 4);
  const first = min(lowEnd, highStart);
  const second = max(lowEnd, highStart);
  for (; x < first; x += 32, y += 128, table += 96) firstPair(x, hop, y, table, true, false, false, false);
  if (lowEnd < highStart) {
    const bytes = (second - x) << 2;
    memory.fill(y, 0, bytes);
    y += bytes;
    table += (bytes >> 7) * 96;
    x = second;
  } else for (; x < second; x += 32, y += 128, table += 96) firstPair(x, hop, y, table, true, false, false, true);
  for (const end = start + hop; x < end; x += 32, y += 128, table += 96) {
    firstPair(x, hop, y, table, false, false, false, true);
  }
}

/** The first pass where inputs low…size−high−1 are zero and both others fill a quarter or more, at most a half. */
function firstMost(x: usize, y: usize, size: usize, table: usize, low: usize, high: usize): void {
  const hop = size << 2;
  const quarter = size >> 2;
  const start = x;
  const end = start + hop;
  const lowEnd = start + (((low - quarter + 1) & ~1) << 4);
  const highStart = start + (((2 * quarter - high) & ~1) << 4);
  for (const to = min(lowEnd, highStart); x < to; x += 32, y += 128, table += 96) {
    firstPair(x, hop, y, table, true, true, false, true);
  }
  for (; x < lowEnd; x += 32, y += 128, table += 96) firstPair(x, hop, y, table, true, true, true, true);
  for (; x < highStart; x += 32, y += 128, table += 96) firstPair(x, hop, y, table, true, false, false, true);
  for (; x < end; x += 32, y += 128, table += 96) firstPair(x, hop, y, table, true, false, true, true);
}

/**
 * A butterfly of four on two numbers of each input, at the pointers (T = u64) or 32 bytes behind them (T = v128; an offset has
 * to be known when this is compiled): one address serves both.
 */
@inline function middle4Step<T>(
  x0: usize, x1: usize, x2: usize, x3: usize, y0: usize, y1: usize, y2: usize, y3: usize,
  w1Re: v128, w1Im: v128, w2Re: v128, w2Im: v128, w3Re: v128, w3Im: v128,
): void {
  const aRe = v128.load(x0, (sizeof<T>() - 8) << 2), cRe = v128.load(x2, (sizeof<T>() - 8) << 2);
  const bRe = v128.load(x1, (sizeof<T>() - 8) << 2), dRe = v128.load(x3, (sizeof<T>() - 8) << 2);
  const aIm = v128.load(x0, ((sizeof<T>() - 8) << 2) + 16), cIm = v128.load(x2, ((sizeof<T>() - 8) << 2) + 16);
  const bIm = v128.load(x1, ((sizeof<T>() - 8) << 2) + 16), dIm = v128.load(x3, ((sizeof<T>() - 8) << 2) + 16);
  const evenRe = add(aRe, cRe), oddRe = add(bRe, dRe);
  const lessRe = sub(aRe, cRe), oddLessRe = sub(bRe, dRe);
  const evenIm = add(aIm, cIm), oddIm = add(bIm, dIm);
  const lessIm = sub(aIm, cIm), oddLessIm = sub(bIm, dIm);
  v128.store(y0, add(evenRe, oddRe), (sizeof<T>() - 8) << 2);
  v128.store(y0, add(evenIm, oddIm), ((sizeof<T>() - 8) << 2) + 16);
  const oneRe = sub(lessRe, oddLessIm), oneIm = add(lessIm, oddLessRe);
  v128.store(y1, sub(mul(oneRe, w1Re), mul(oneIm, w1Im)), (sizeof<T>() - 8) << 2);
  v128.store(y1, add(mul(oneRe, w1Im), mul(oneIm, w1Re)), ((sizeof<T>() - 8) << 2) + 16);
  const twoRe = sub(evenRe, oddRe), twoIm = sub(evenIm, oddIm);
  v128.store(y2, sub(mul(twoRe, w2Re), mul(twoIm, w2Im)), (sizeof<T>() - 8) << 2);
  v128.store(y2, add(mul(twoRe, w2Im), mul(twoIm, w2Re)), ((sizeof<T>() - 8) << 2) + 16);
  const threeRe = add(lessRe, oddLessIm), threeIm = sub(lessIm, oddLessRe);
  v128.store(y3, sub(mul(threeRe, w3Re), mul(threeIm, w3Im)), (sizeof<T>() - 8) << 2);
  v128.store(y3, add(mul(threeRe, w3Im), mul(threeIm, w3Re)), ((sizeof<T>() - 8) << 2) + 16);
}

/** Strides are multiples of 4 behind a first pass of 4. */
function middle4(x: usize, y: usize, hop: usize, skip: usize, part: usize, table: usize): void {
  for (let p: usize = 0; p < part; p++, table += 48) {
    const w1Re = v128.load64_splat(table), w1Im = v128.load64_splat(table, 8);
    const w2Re = v128.load64_splat(table, 16), w2Im = v128.load64_splat(table, 24);
    const w3Re = v128.load64_splat(table, 32), w3Im = v128.load64_splat(table, 40);
    for (const end = x + skip; x < end; x += 64, y += 64) {
      const x1 = x + hop, x2 = x + (hop << 1), x3 = x1 + (hop << 1);
      const y1 = y + skip, y2 = y + (skip << 1), y3 = y1 + (skip << 1);
      middle4Step<u64>(x, x1, x2, x3, y, y1, y2, y3, w1Re, w1Im, w2Re, w2Im, w3Re, w3Im);
      middle4Step<v128>(x, x1, x2, x3, y, y1, y2, y3, w1Re, w1Im, w2Re, w2Im, w3Re, w3Im);
    }
    y += 3 * skip;
  }
}

/** The pass behind the first one: stride 4, so all outputs of a group lie within 256 bytes. */
function second4(x: usize, y: usize, hop: usize, table: usize): void {
  for (const end = x + hop; x < end; x += 64, y += 256, table += 48) {
    const x1 = x + hop, x2 = x + (hop << 1), x3 = x1 + (hop << 1);
    const w1Re = v128.load64_splat(table), w1Im = v128.load64_splat(table, 8);
    const w2Re = v128.load64_splat(table, 16), w2Im = v128.load64_splat(table, 24);
    const w3Re = v128.load64_splat(table, 32), w3Im = v128.load64_splat(table, 40);
    middle4Step<u64>(x, x1, x2, x3, y, y + 64, y + 128, y + 192, w1Re, w1Im, w2Re, w2Im, w3Re, w3Im);
    middle4Step<v128>(x, x1, x2, x3, y, y + 64, y + 128, y + 192, w1Re, w1Im, w2Re, w2Im, w3Re, w3Im);
  }
}

@inline function last4Step<T>(
  x0: usize, x1: usize, x2: usize, x3: usize, y0: usize, y1: usize, y2: usize, y3: usize,
): void {
  const aRe = v128.load(x0, (sizeof<T>() - 8) << 2), cRe = v128.load(x2, (sizeof<T>() - 8) << 2);
  const bRe = v128.load(x1, (sizeof<T>() - 8) << 2), dRe = v128.load(x3, (sizeof<T>() - 8) << 2);
  const aIm = v128.load(x0, ((sizeof<T>() - 8) << 2) + 16), cIm = v128.load(x2, ((sizeof<T>() - 8) << 2) + 16);
  const bIm = v128.load(x1, ((sizeof<T>() - 8) << 2) + 16), dIm = v128.load(x3, ((sizeof<T>() - 8) << 2) + 16);
  const evenRe = add(aRe, cRe), oddRe = add(bRe, dRe);
  const lessRe = sub(aRe, cRe), oddLessRe = sub(bRe, dRe);
  const evenIm = add(aIm, cIm), oddIm = add(bIm, dIm);
  const lessIm = sub(aIm, cIm), oddLessIm = sub(bIm, dIm);
  v128.store(y0, add(evenRe, oddRe), (sizeof<T>() - 8) << 2);
  v128.store(y0, add(evenIm, oddIm), ((sizeof<T>() - 8) << 2) + 16);
  v128.store(y1, sub(lessRe, oddLessIm), (sizeof<T>() - 8) << 2);
  v128.store(y1, add(lessIm, oddLessRe), ((sizeof<T>() - 8) << 2) + 16);
  v128.store(y2, sub(evenRe, oddRe), (sizeof<T>() - 8) << 2);
  v128.store(y2, sub(evenIm, oddIm), ((sizeof<T>() - 8) << 2) + 16);
  v128.store(y3, add(lessRe, oddLessIm), (sizeof<T>() - 8) << 2);
  v128.store(y3, sub(lessIm, oddLessRe), ((sizeof<T>() - 8) << 2) + 16);
}

function last4(x: usize, y: usize, hop: usize): void {
  for (const end = x + hop; x < end; x += 64, y += 64) {
    const x1 = x + hop, x2 = x + (hop << 1), x3 = x1 + (hop << 1);
    const y1 = y + hop, y2 = y + (hop << 1), y3 = y1 + (hop << 1);
    last4Step<u64>(x, x1, x2, x3, y, y1, y2, y3);
    last4Step<v128>(x, x1, x2, x3, y, y1, y2, y3);
  }
}

function last8(x: usize, y: usize, hop: usize, constants: usize): void {
  const half = v128.load64_splat(constants, 8);
  for (const end = x + hop; x < end; x += 32, y += 32) {
    const xIm = x + 16;
    const fRe0 = v128.load(x + hop), fRe1 = v128.load(x + 5 * hop);
    const fIm0 = v128.load(xIm + hop), fIm1 = v128.load(xIm + 5 * hop);
    const hRe0 = v128.load(x + 3 * hop), hRe1 = v128.load(x + 7 * hop);
    const hIm0 = v128.load(xIm + 3 * hop), hIm1 = v128.load(xIm + 7 * hop);
    const fRe = add(fRe0, fRe1), gRe = sub(fRe0, fRe1), fIm = add(fIm0, fIm1), gIm = sub(fIm0, fIm1);
    const hRe = add(hRe0, hRe1), iRe = sub(hRe0, hRe1), hIm = add(hIm0, hIm1), iIm = sub(hIm0, hIm1);
    const o0Re = add(fRe, hRe), o0Im = add(fIm, hIm), o2Re = sub(fRe, hRe), o2Im = sub(fIm, hIm);
    const p1Re = sub(gRe, iIm), p1Im = add(gIm, iRe), p3Re = add(gRe, iIm), p3Im = sub(gIm, iRe);
    const o1Im = mul(half, add(p1Im, p1Re)), o1Re = mul(half, sub(p1Re, p1Im));
    const o3Im = mul(half, sub(p3Re, p3Im)), o3Re = mul(half, add(p3Im, p3Re));
    const aRe0 = v128.load(x), aRe1 = v128.load(x + 4 * hop);
    const aIm0 = v128.load(xIm), aIm1 = v128.load(xIm + 4 * hop);
    const cRe0 = v128.load(x + 2 * hop), cRe1 = v128.load(x + 6 * hop);
    const cIm0 = v128.load(xIm + 2 * hop), cIm1 = v128.load(xIm + 6 * hop);
    const aRe = add(aRe0, aRe1), bRe = sub(aRe0, aRe1), aIm = add(aIm0, aIm1), bIm = sub(aIm0, aIm1);
    const cRe = add(cRe0, cRe1), dRe = sub(cRe0, cRe1), cIm = add(cIm0, cIm1), dIm = sub(cIm0, cIm1);
    const e0Re = add(aRe, cRe), e0Im = add(aIm, cIm);
    put(y, add(e0Re, o0Re), add(e0Im, o0Im));
    put(y + 4 * hop, sub(e0Re, o0Re), sub(e0Im, o0Im));
    const e2Re = sub(aRe, cRe), e2Im = sub(aIm, cIm);
    put(y + 2 * hop, sub(e2Re, o2Im), add(e2Im, o2Re));
    put(y + 6 * hop, add(e2Re, o2Im), sub(e2Im, o2Re));
    const e1Re = sub(bRe, dIm), e1Im = add(bIm, dRe);
    put(y + hop, add(e1Re, o1Re), add(e1Im, o1Im));
    put(y + 5 * hop, sub(e1Re, o1Re), sub(e1Im, o1Im));
    const e3Re = add(bRe, dIm), e3Im = sub(bIm, dRe);
    put(y + 3 * hop, sub(e3Re, o3Re), add(e3Im, o3Im));
    put(y + 7 * hop, add(e3Re, o3Re), sub(e3Im, o3Im));
  }
}

@inline function pass2(x: usize, y: usize, hop: usize, skip: usize, part: usize, table: usize, isLast: bool): void {
  for (let p: usize = 0; p < part; p++, table += 16) {
    for (const end = x + skip; x < end; x += 32, y += 32) {
      const aRe = v128.load(x), bRe = v128.load(x + hop);
      const aIm = v128.load(x, 16), bIm = v128.load(x + hop, 16);
      put(y, add(aRe, bRe), add(aIm, bIm));
      putTurned(y + skip, sub(aRe, bRe), sub(aIm, bIm), table, isLast);
    }
    y += skip;
  }
}

@inline function pass3(
  x: usize, y: usize, hop: usize, skip: usize, part: usize, table: usize, constants: usize, isLast: bool,
): void {
  const sine = v128.load64_splat(constants);
  const half = f64x2.splat(0.5);
  for (let p: usize = 0; p < part; p++, table += 32) {
    for (const end = x + skip; x < end; x += 32, y += 32) {
      const xIm = x + 16;
      const aRe = v128.load(x), bRe = v128.load(x + hop), cRe = v128.load(x + 2 * hop);
      const aIm = v128.load(xIm), bIm = v128.load(xIm + hop), cIm = v128.load(xIm + 2 * hop);
      const sumRe = add(bRe, cRe), sumIm = add(bIm, cIm);
      // the plan's forward form with the parts exchanged
      const turnIm = mul(sine, sub(bRe, cRe)), turnRe = mul(sine, sub(cIm, bIm));
      const midRe = sub(aRe, mul(half, sumRe)), midIm = sub(aIm, mul(half, sumIm));
      put(y, add(aRe, sumRe), add(aIm, sumIm));
      putTurned(y + skip, add(midRe, turnRe), add(midIm, turnIm), table, isLast);
      putTurned(y + 2 * skip, sub(midRe, turnRe), sub(midIm, turnIm), table + 16, isLast);
    }
    y += 2 * skip;
  }
}

@inline function pass5(
  x: usize, y: usize, hop: usize, skip: usize, part: usize, table: usize, constants: usize, isLast: bool,
): void {
  const cos72 = v128.load64_splat(constants, 16), sin72 = v128.load64_splat(constants, 24);
  const cos144 = v128.load64_splat(constants, 32), sin144 = v128.load64_splat(constants, 40);
  for (let p: usize = 0; p < part; p++, table += 64) {
    for (const end = x + skip; x < end; x += 32, y += 32) {
      const xIm = x + 16;
      const x0Re = v128.load(x), x0Im = v128.load(xIm);
      const x1Re = v128.load(x + hop), x1Im = v128.load(xIm + hop);
      const x2Re = v128.load(x + 2 * hop), x2Im = v128.load(xIm + 2 * hop);
      const x3Re = v128.load(x + 3 * hop), x3Im = v128.load(xIm + 3 * hop);
      const x4Re = v128.load(x + 4 * hop), x4Im = v128.load(xIm + 4 * hop);
      const sumARe = add(x1Re, x4Re), sumAIm = add(x1Im, x4Im), lessARe = sub(x1Re, x4Re), lessAIm = sub(x1Im, x4Im);
      const sumBRe = add(x2Re, x3Re), sumBIm = add(x2Im, x3Im), lessBRe = sub(x2Re, x3Re), lessBIm = sub(x2Im, x3Im);
      put(y, add(add(x0Re, sumARe), sumBRe), add(add(x0Im, sumAIm), sumBIm));
      const nearRe = add(add(x0Re, mul(cos72, sumARe)), mul(cos144, sumBRe));
      const nearIm = add(add(x0Im, mul(cos72, sumAIm)), mul(cos144, sumBIm));
      const farRe = add(add(x0Re, mul(cos144, sumARe)), mul(cos72, sumBRe));
      const farIm = add(add(x0Im, mul(cos144, sumAIm)), mul(cos72, sumBIm));
      const nearTurnIm = add(mul(sin72, lessARe), mul(sin144, lessBRe));
      const nearTurnRe = add(mul(sin72, lessAIm), mul(sin144, lessBIm));
      const farTurnIm = sub(mul(sin144, lessARe), mul(sin72, lessBRe));
      const farTurnRe = sub(mul(sin144, lessAIm), mul(sin72, lessBIm));
      putTurned(y + skip, sub(nearRe, nearTurnRe), add(nearIm, nearTurnIm), table, isLast);
      putTurned(y + 2 * skip, sub(farRe, farTurnRe), add(farIm, farTurnIm), table + 16, isLast);
      putTurned(y + 3 * skip, add(farRe, farTurnRe), sub(farIm, farTurnIm), table + 32, isLast);
      putTurned(y + 4 * skip, add(nearRe, nearTurnRe), sub(nearIm, nearTurnIm), table + 48, isLast);
    }
    y += 4 * skip;
  }
}

function middle2(x: usize, y: usize, hop: usize, skip: usize, part: usize, table: usize): void {
  pass2(x, y, hop, skip, part, table, false);
}
function last2(x: usize, y: usize, hop: usize): void {
  pass2(x, y, hop, hop, 1, 0, true);
}
function middle3(x: usize, y: usize, hop: usize, skip: usize, part: usize, table: usize, constants: usize): void {
  pass3(x, y, hop, skip, part, table, constants, false);
}
function last3(x: usize, y: usize, hop: usize, constants: usize): void {
  pass3(x, y, hop, hop, 1, 0, constants, true);
}
function middle5(x: usize, y: usize, hop: usize, skip: usize, part: usize, table: usize, constants: usize): void {
  pass5(x, y, hop, skip, part, table, constants, false);
}
function last5(x: usize, y: usize, hop: usize, constants: usize): void {
  pass5(x, y, hop, hop, 1, 0, constants, true);
}

/**
 * to[n] = Σ from[k] e^{+j2πkn/size}, not scaled; from interleaved, to in pairs. Bins low…size−high−1 count as zero, whatever
 * stands there, and may be written over; they are skipped where the others fill at most a quarter, or at least a quarter and at
 * most a half, at either end. Size: a multiple of 8 with at least two passes.
 */
export function transform(plan: usize, from: usize, to: usize, low: usize, high: usize): void {
  const passes = load<i32>(plan);
  const size = <usize>load<u32>(plan, 4);
  const scratch = <usize>load<u32>(plan, 8);
  const other = <usize>load<u32>(plan, 12);
  const constants = plan + 16;
  let pass = plan + PASSES;
  const quarter = size >> 2;
  if (low + high < size) {
    // a pass that skips looks at pairs, so at one bin more
    v128.store(from + (low << 4), f64x2.splat(0));
    v128.store(from + ((size - high - 1) << 4), f64x2.splat(0));
  }
  if (low <= quarter && high <= quarter) firstOuter(from, scratch, size, <usize>load<u32>(pass, 12), low, high);
  else if (min(low, high) >= quarter && max(low, high) <= 2 * quarter) {
    firstMost(from, scratch, size, <usize>load<u32>(pass, 12), low, high);
  } else {
    if (low + high < size) memory.fill(from + (low << 4), 0, (size - low - high) << 4);
    firstFull(from, scratch, size, <usize>load<u32>(pass, 12));
  }
  let x = scratch;
  let y = other;
  for (let i = 1; i < passes; i++) {
    pass += 16;
    const radix = load<u32>(pass);
    const part = <usize>load<u32>(pass, 4);
    const skip = <usize>load<u32>(pass, 8) << 4;
    const hop = part * skip;
    const table = <usize>load<u32>(pass, 12);
    if (i == passes - 1) {
      if (radix == 4) last4(x, to, hop);
      else if (radix == 8) last8(x, to, hop, constants);
      else if (radix == 2) last2(x, to, hop);
      else if (radix == 3) last3(x, to, hop, constants);
      else last5(x, to, hop, constants);
    } else {
      if (radix == 4) {
        if (i == 1) second4(x, y, hop, table);
        else middle4(x, y, hop, skip, part, table);
      }
      else if (radix == 2) middle2(x, y, hop, skip, part, table);
      else if (radix == 3) middle3(x, y, hop, skip, part, table, constants);
      else middle5(x, y, hop, skip, part, table, constants);
      const was = x;
      x = y;
      y = was;
    }
  }
}
