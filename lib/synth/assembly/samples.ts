// What is done with finished samples: levels and words. They lie in pairs, as the transform leaves them: both real parts,
// then both imaginary parts. Sample i of a row of pairs at `row`: row + 32·⌊i/2⌋ + 8·(i mod 2), its imaginary part 16 behind.

// adding 1.5 · 2^52 rounds to a whole number, half to even, which then stands in the low 32 bits
@inline const ROUNDER: f64 = 6755399441055744;
@inline const PART: u32 = 128;

// A level state in memory, f64 each (lib/synth/synthesize/levelState): four lanes of power, two of re and im, samples in the
// open part, samples, peak power and its place, largest |re| and |im|, compensated sums of power, re, im.
@inline const DC: usize = 32;
@inline const IN_PART: usize = 64;
@inline const SAMPLES: usize = 72;
@inline const PEAK: usize = 80;
@inline const PEAK_AT: usize = 88;
@inline const COMPONENTS: usize = 96;
@inline const SUMS: usize = 112;

@inline function placeOf(row: usize, i: u32): usize {
  return row + ((<usize>(i >> 1)) << 5) + ((<usize>(i & 1)) << 3);
}

/** The real parts of a sample and the next, `at` its pair: in its first place, or (isOdd) in its second and the next one's first. */
@inline function reals(at: usize, isOdd: bool): v128 {
  return isOdd ? v128.load64_lane(at, v128.load64_zero(at, 8), 1, 32) : v128.load(at);
}
@inline function imaginaries(at: usize, isOdd: bool): v128 {
  return isOdd ? v128.load64_lane(at, v128.load64_zero(at, 24), 1, 48) : v128.load(at, 16);
}

@inline function addTo(sum: usize, value: f64): void {
  const old = load<f64>(sum);
  const next = old + value;
  const lost = abs(old) >= abs(value) ? old - next + value : value - next + old;
  store<f64>(sum, load<f64>(sum, 8) + lost, 8);
  store<f64>(sum, next);
}

function closePart(state: usize): void {
  addTo(state + SUMS, load<f64>(state) + load<f64>(state, 8) + (load<f64>(state, 16) + load<f64>(state, 24)));
  addTo(state + SUMS + 16, load<f64>(state, DC) + load<f64>(state, DC + 16));
  addTo(state + SUMS + 32, load<f64>(state, DC + 8) + load<f64>(state, DC + 24));
  memory.fill(state, 0, 72);
}

/** One sample outside the fours: returns its power. */
function measureOne(state: usize, at: usize, inPart: u32): f64 {
  const re = load<f64>(at);
  const im = load<f64>(at, 16);
  const square = re * re + im * im;
  const lane = state + ((inPart & 3) << 3);
  store<f64>(lane, load<f64>(lane) + square);
  const dc = state + DC + ((inPart & 1) << 4);
  store<f64>(dc, load<f64>(dc) + re);
  store<f64>(dc, load<f64>(dc, 8) + im, 8);
  return square;
}

/** A component can only be a new largest one where the power reaches its square. */
function findComponents(state: usize, row: usize, from: u32, end: u32): void {
  let re = load<f64>(state, COMPONENTS);
  let im = load<f64>(state, COMPONENTS + 8);
  for (let i = from; i < end; i++) {
    const at = placeOf(row, i);
    re = max(re, abs(load<f64>(at)));
    im = max(im, abs(load<f64>(at, 16)));
  }
  store<f64>(state, re, COMPONENTS);
  store<f64>(state, im, COMPONENTS + 8);
}

/** The first sample whose power exceeds all before it becomes the peak. */
function findPeak(state: usize, row: usize, from: u32, end: u32, first: f64): void {
  let peak = load<f64>(state, PEAK);
  for (let i = from; i < end; i++) {
    const at = placeOf(row, i);
    const re = load<f64>(at);
    const im = load<f64>(at, 16);
    const square = re * re + im * im;
    if (square > peak) {
      peak = square;
      store<f64>(state, first + <f64>(i - from), PEAK_AT);
    }
  }
  store<f64>(state, peak, PEAK);
}

/** Adds `fours` times four samples, the first of them the first of a four of the state; returns the largest power. */
@inline function measureFours(state: usize, at: usize, fours: u32, isOdd: bool): f64 {
  let powerA = v128.load(state), powerB = v128.load(state, 16);
  const dcEven = v128.load(state, DC), dcOdd = v128.load(state, DC + 16);
  let dcRe = v128.shuffle<f64>(dcEven, dcOdd, 0, 2), dcIm = v128.shuffle<f64>(dcEven, dcOdd, 1, 3);
  let most = f64x2.splat(0);
  for (const end = at + (<usize>fours << 6); at < end; at += 64) {
    const re = reals(at, isOdd), im = imaginaries(at, isOdd);
    const nextRe = reals(at + 32, isOdd), nextIm = imaginaries(at + 32, isOdd);
    const square = f64x2.add(f64x2.mul(re, re), f64x2.mul(im, im));
    const nextSquare = f64x2.add(f64x2.mul(nextRe, nextRe), f64x2.mul(nextIm, nextIm));
    powerA = f64x2.add(powerA, square);
    powerB = f64x2.add(powerB, nextSquare);
    most = f64x2.pmax(most, f64x2.pmax(square, nextSquare));
    dcRe = f64x2.add(f64x2.add(dcRe, re), nextRe);
    dcIm = f64x2.add(f64x2.add(dcIm, im), nextIm);
  }
  v128.store(state, powerA);
  v128.store(state, powerB, 16);
  v128.store(state, v128.shuffle<f64>(dcRe, dcIm, 0, 2), DC);
  v128.store(state, v128.shuffle<f64>(dcRe, dcIm, 1, 3), DC + 16);
  return max(f64x2.extract_lane(most, 0), f64x2.extract_lane(most, 1));
}

/** What a largest power in samples from…end−1 of a row, the first of them number `first`, says about peak and components. */
@inline function noteLargest(state: usize, row: usize, from: u32, end: u32, first: f64, largest: f64): void {
  const component = min(load<f64>(state, COMPONENTS), load<f64>(state, COMPONENTS + 8));
  if (largest >= component * component) findComponents(state, row, from, end);
  if (largest > load<f64>(state, PEAK)) findPeak(state, row, from, end, first);
}

/** Whole parts of 128 samples each, none being open; the first is sample number `first`. */
@inline function measureParts(state: usize, row: usize, from: u32, end: u32, first: f64, isOdd: bool): void {
  for (; from < end; from += PART, first += <f64>PART) {
    let powerA = f64x2.splat(0), powerB = f64x2.splat(0), dcRe = f64x2.splat(0), dcIm = f64x2.splat(0);
    let most = f64x2.splat(0);
    const start = row + ((<usize>(from >> 1)) << 5);
    for (let at = start; at < start + ((<usize>PART) << 4); at += 64) {
      const re = reals(at, isOdd), im = imaginaries(at, isOdd);
      const nextRe = reals(at + 32, isOdd), nextIm = imaginaries(at + 32, isOdd);
      const square = f64x2.add(f64x2.mul(re, re), f64x2.mul(im, im));
      const nextSquare = f64x2.add(f64x2.mul(nextRe, nextRe), f64x2.mul(nextIm, nextIm));
      powerA = f64x2.add(powerA, square);
      powerB = f64x2.add(powerB, nextSquare);
      most = f64x2.pmax(most, f64x2.pmax(square, nextSquare));
      dcRe = f64x2.add(f64x2.add(dcRe, re), nextRe);
      dcIm = f64x2.add(f64x2.add(dcIm, im), nextIm);
    }
    const sumA = f64x2.extract_lane(powerA, 0) + f64x2.extract_lane(powerA, 1);
    const sumB = f64x2.extract_lane(powerB, 0) + f64x2.extract_lane(powerB, 1);
    addTo(state + SUMS, sumA + sumB);
    addTo(state + SUMS + 16, f64x2.extract_lane(dcRe, 0) + f64x2.extract_lane(dcRe, 1));
    addTo(state + SUMS + 32, f64x2.extract_lane(dcIm, 0) + f64x2.extract_lane(dcIm, 1));
    const largest = max(f64x2.extract_lane(most, 0), f64x2.extract_lane(most, 1));
    noteLargest(state, row, from, from + PART, first, largest);
  }
}

/** Adds samples from…from+count−1 of a row to the levels. */
export function measure(state: usize, row: usize, from: u32, count: u32): void {
  let inPart = <u32>load<f64>(state, IN_PART);
  let samples = load<f64>(state, SAMPLES);
  while (count > 0) {
    if (inPart == 0 && count >= PART) {
      const end = from + (count & ~(PART - 1));
      if (from & 1) measureParts(state, row, from, end, samples, true);
      else measureParts(state, row, from, end, samples, false);
      samples += <f64>(end - from);
      count -= end - from;
      from = end;
      continue;
    }
    const part = min(count, PART - inPart);
    const end = from + part;
    let i = from;
    let largest: f64 = 0;
    for (; i < end && (inPart & 3) != 0; i++) largest = max(largest, measureOne(state, placeOf(row, i), inPart++));
    const fours = (end - i) >> 2;
    if (fours > 0) {
      const at = row + ((<usize>(i >> 1)) << 5);
      largest = max(largest, i & 1 ? measureFours(state, at, fours, true) : measureFours(state, at, fours, false));
      i += fours << 2;
      inPart += fours << 2;
    }
    for (; i < end; i++) largest = max(largest, measureOne(state, placeOf(row, i), inPart++));
    noteLargest(state, row, from, end, samples, largest);
    samples += <f64>part;
    count -= part;
    from = end;
    if (inPart == PART) {
      closePart(state);
      inPart = 0;
    }
  }
  store<f64>(state, <f64>inPart, IN_PART);
  store<f64>(state, samples, SAMPLES);
}

/** `count` samples as 16-bit words, saturated; adds to the counts (f64 components, f64 samples) what lies outside least…most. */
function saturatedWords(
  row: usize, from: u32, count: u32, to: usize, scale: f64, least: f64, most: f64, counts: usize,
): void {
  let components: f64 = 0;
  let samples: f64 = 0;
  for (const end = from + count; from < end; from++, to += 4) {
    const at = placeOf(row, from);
    const re = load<f64>(at) * scale, im = load<f64>(at, 16) * scale;
    store<i16>(to, <i16>(<i32>nearest(min(max(re, least), most))));
    store<i16>(to, <i16>(<i32>nearest(min(max(im, least), most))), 2);
    const wholeRe = re + ROUNDER - ROUNDER, wholeIm = im + ROUNDER - ROUNDER;
    const over = <i32>(wholeRe > most || wholeRe < least) + <i32>(wholeIm > most || wholeIm < least);
    components += <f64>over;
    if (over > 0) samples += 1;
  }
  store<f64>(counts, load<f64>(counts) + components);
  store<f64>(counts, load<f64>(counts, 8) + samples, 8);
}

/** Numbers near whole ones, the whole ones in their low 32 bits: re re im im of two samples in the words' order, twice. */
@inline function packed(re: v128, im: v128, nextRe: v128, nextIm: v128): v128 {
  const words = i16x8.narrow_i32x4_s(
    v128.shuffle<i32>(re, im, 0, 2, 4, 6),
    v128.shuffle<i32>(nextRe, nextIm, 0, 2, 4, 6),
  );
  return v128.shuffle<i16>(words, words, 0, 2, 1, 3, 4, 6, 5, 7);
}

/** Words of `count` samples that nothing holds at least and most; false where something may lie outside. */
@inline function freeWords(
  at: usize, count: u32, to: usize, scale: f64, least: f64, most: f64, isOdd: bool,
): bool {
  const gain = f64x2.splat(scale), rounder = f64x2.splat(ROUNDER);
  let high = f64x2.splat(0), low = f64x2.splat(0);
  for (const end = to + (<usize>count << 2); to < end; at += 64, to += 16) {
    const re = f64x2.mul(reals(at, isOdd), gain), im = f64x2.mul(imaginaries(at, isOdd), gain);
    const nextRe = f64x2.mul(reals(at + 32, isOdd), gain), nextIm = f64x2.mul(imaginaries(at + 32, isOdd), gain);
    high = f64x2.pmax(high, f64x2.pmax(f64x2.pmax(re, im), f64x2.pmax(nextRe, nextIm)));
    low = f64x2.pmin(low, f64x2.pmin(f64x2.pmin(re, im), f64x2.pmin(nextRe, nextIm)));
    v128.store(to, packed(
      f64x2.add(re, rounder), f64x2.add(im, rounder), f64x2.add(nextRe, rounder), f64x2.add(nextIm, rounder),
    ));
  }
  return max(f64x2.extract_lane(high, 0), f64x2.extract_lane(high, 1)) <= most &&
    min(f64x2.extract_lane(low, 0), f64x2.extract_lane(low, 1)) >= least;
}

/** As freeWords where every number is known to be below 2^31: the words themselves show what reaches an end. */
@inline function boundedWords(
  at: usize, count: u32, to: usize, scale: f64, least: f64, most: f64, isOdd: bool,
): bool {
  const gain = f64x2.splat(scale), rounder = f64x2.splat(ROUNDER);
  let high = i16x8.splat(0), low = i16x8.splat(0);
  for (const end = to + (<usize>count << 2); to < end; at += 64, to += 16) {
    const words = packed(
      f64x2.add(f64x2.mul(reals(at, isOdd), gain), rounder),
      f64x2.add(f64x2.mul(imaginaries(at, isOdd), gain), rounder),
      f64x2.add(f64x2.mul(reals(at + 32, isOdd), gain), rounder),
      f64x2.add(f64x2.mul(imaginaries(at + 32, isOdd), gain), rounder),
    );
    high = i16x8.max_s(high, words);
    low = i16x8.min_s(low, words);
    v128.store(to, words);
  }
  const reached = v128.or(i16x8.ge_s(high, i16x8.splat(<i16>most)), i16x8.le_s(low, i16x8.splat(<i16>least)));
  return !v128.any_true(reached);
}

/**
 * Samples from…from+count−1 of a row times scale as 16-bit words, rounded half to even and saturated at least and most, two
 * words a sample. Reads and writes up to 3 samples more. What saturated is added to the counts. `isBounded`: no number times
 * scale reaches 2^31.
 */
export function integerWords(
  row: usize, from: u32, count: u32, to: usize, scale: f64, least: f64, most: f64, counts: usize, isBounded: i32,
): void {
  while (count > 0) {
    const part = min(count, PART);
    const at = row + ((<usize>(from >> 1)) << 5);
    let isInside: bool;
    if (from & 1) isInside = freeWords(at, part, to, scale, least, most, true);
    else if (isBounded) isInside = boundedWords(at, part, to, scale, least, most, false);
    else isInside = freeWords(at, part, to, scale, least, most, false);
    if (!isInside) saturatedWords(row, from, part, to, scale, least, most, counts);
    from += part;
    count -= part;
    to += <usize>part << 2;
  }
}

/** Samples from…from+count−1 of a row times scale in single precision, two numbers a sample; counts what lies beyond ±1. */
export function floatWords(row: usize, from: u32, count: u32, to: usize, scale: f64, counts: usize): void {
  const gain = f64x2.splat(scale);
  const one = f32x4.splat(1);
  for (const end = from + count; from < end; from++, to += 8) {
    const at = placeOf(row, from);
    const sample = v128.load64_lane(at, v128.load64_zero(at), 1, 16);
    const word = f32x4.demote_f64x2_zero(f64x2.mul(sample, gain));
    v128.store64_lane(to, word, 0);
    const over = i32x4.bitmask(f32x4.gt(f32x4.abs(word), one));
    if (over != 0) {
      store<f64>(counts, load<f64>(counts) + <f64>popcnt(over));
      store<f64>(counts, load<f64>(counts, 8) + 1, 8);
    }
  }
}

/** Interleaved samples to a row of pairs or a row of pairs to interleaved samples, which may be where they are. */
export function regroup(from: usize, pairs: u32, to: usize): void {
  for (const end = to + (<usize>pairs << 5); to < end; from += 32, to += 32) {
    const a = v128.load(from), b = v128.load(from, 16);
    v128.store(to, v128.shuffle<f64>(a, b, 0, 2));
    v128.store(to, v128.shuffle<f64>(a, b, 1, 3), 16);
  }
}
