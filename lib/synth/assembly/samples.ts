// What is done with finished samples: levels and words.

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

@inline function addTo(sum: usize, value: f64): void {
  const old = load<f64>(sum);
  const next = old + value;
  const lost = abs(old) >= abs(value) ? old - next + value : value - next + old;
  store<f64>(sum, load<f64>(sum, 8) + lost, 8);
  store<f64>(sum, next);
}

export function closePart(state: usize): void {
  addTo(state + SUMS, load<f64>(state) + load<f64>(state, 8) + (load<f64>(state, 16) + load<f64>(state, 24)));
  addTo(state + SUMS + 16, load<f64>(state, DC) + load<f64>(state, DC + 16));
  addTo(state + SUMS + 32, load<f64>(state, DC + 8) + load<f64>(state, DC + 24));
  memory.fill(state, 0, 72);
}

/** One sample outside the fours: returns its power. */
function measureOne(state: usize, at: usize, inPart: u32): f64 {
  const re = load<f64>(at);
  const im = load<f64>(at, 8);
  const square = re * re + im * im;
  const lane = state + ((inPart & 3) << 3);
  store<f64>(lane, load<f64>(lane) + square);
  const dc = state + DC + ((inPart & 1) << 4);
  store<f64>(dc, load<f64>(dc) + re);
  store<f64>(dc, load<f64>(dc, 8) + im, 8);
  return square;
}

/** A component can only be a new largest one where the power reaches its square. */
function findComponents(state: usize, at: usize, count: u32): void {
  let re = load<f64>(state, COMPONENTS);
  let im = load<f64>(state, COMPONENTS + 8);
  for (let i: u32 = 0; i < count; i++, at += 16) {
    re = max(re, abs(load<f64>(at)));
    im = max(im, abs(load<f64>(at, 8)));
  }
  store<f64>(state, re, COMPONENTS);
  store<f64>(state, im, COMPONENTS + 8);
}

/** The first sample whose power exceeds all before it becomes the peak. */
function findPeak(state: usize, at: usize, count: u32, first: f64): void {
  let peak = load<f64>(state, PEAK);
  for (let i: u32 = 0; i < count; i++, at += 16) {
    const re = load<f64>(at);
    const im = load<f64>(at, 8);
    const square = re * re + im * im;
    if (square > peak) {
      peak = square;
      store<f64>(state, first + <f64>i, PEAK_AT);
    }
  }
  store<f64>(state, peak, PEAK);
}

/** Adds `count` interleaved samples to the levels. */
export function measure(state: usize, at: usize, count: u32): void {
  let inPart = <u32>load<f64>(state, IN_PART);
  let samples = load<f64>(state, SAMPLES);
  while (count > 0) {
    const part = min(count, PART - inPart);
    const begin = at;
    const end = at + (<usize>part << 4);
    let largest: f64 = 0;
    for (; at < end && (inPart & 3) != 0; at += 16) largest = max(largest, measureOne(state, at, inPart++));
    const fourEnd = at + ((end - at) & ~63);
    if (at < fourEnd) {
      let powerA = v128.load(state), powerB = v128.load(state, 16);
      let dcA = v128.load(state, DC), dcB = v128.load(state, DC + 16);
      let most = f64x2.splat(0);
      inPart += <u32>((fourEnd - at) >> 4);
      for (; at < fourEnd; at += 64) {
        const a = v128.load(at), b = v128.load(at, 16), c = v128.load(at, 32), d = v128.load(at, 48);
        const aa = f64x2.mul(a, a), bb = f64x2.mul(b, b), cc = f64x2.mul(c, c), dd = f64x2.mul(d, d);
        const ab = f64x2.add(v128.shuffle<f64>(aa, bb, 0, 2), v128.shuffle<f64>(aa, bb, 1, 3));
        const cd = f64x2.add(v128.shuffle<f64>(cc, dd, 0, 2), v128.shuffle<f64>(cc, dd, 1, 3));
        powerA = f64x2.add(powerA, ab);
        powerB = f64x2.add(powerB, cd);
        most = f64x2.pmax(most, f64x2.pmax(ab, cd));
        dcA = f64x2.add(f64x2.add(dcA, a), c);
        dcB = f64x2.add(f64x2.add(dcB, b), d);
      }
      v128.store(state, powerA);
      v128.store(state, powerB, 16);
      v128.store(state, dcA, DC);
      v128.store(state, dcB, DC + 16);
      largest = max(largest, max(f64x2.extract_lane(most, 0), f64x2.extract_lane(most, 1)));
    }
    for (; at < end; at += 16) largest = max(largest, measureOne(state, at, inPart++));
    const component = min(load<f64>(state, COMPONENTS), load<f64>(state, COMPONENTS + 8));
    if (largest >= component * component) findComponents(state, begin, part);
    if (largest > load<f64>(state, PEAK)) findPeak(state, begin, part, samples);
    samples += <f64>part;
    count -= part;
    if (inPart == PART) {
      closePart(state);
      inPart = 0;
    }
  }
  store<f64>(state, <f64>inPart, IN_PART);
  store<f64>(state, samples, SAMPLES);
}

/** Adds to the counts (f64 components, f64 samples) what lies outside least…most of `count` samples times scale, rounded. */
function countOver(counts: usize, at: usize, count: u32, scale: f64, least: f64, most: f64): void {
  let components: f64 = 0;
  let samples: f64 = 0;
  for (let i: u32 = 0; i < count; i++, at += 16) {
    const re = load<f64>(at) * scale + ROUNDER - ROUNDER;
    const im = load<f64>(at, 8) * scale + ROUNDER - ROUNDER;
    const over = <i32>(re > most || re < least) + <i32>(im > most || im < least);
    components += <f64>over;
    if (over > 0) samples += 1;
  }
  store<f64>(counts, load<f64>(counts) + components);
  store<f64>(counts, load<f64>(counts, 8) + samples, 8);
}

/**
 * `count` samples times scale as 16-bit words, rounded half to even and saturated at least and most, two words a sample.
 * Writes up to 3 samples more than asked for. What saturated is added to the counts.
 */
export function integerWords(
  at: usize, count: u32, to: usize, scale: f64, least: f64, most: f64, counts: usize,
): void {
  const gain = f64x2.splat(scale), low = f64x2.splat(least), high = f64x2.splat(most);
  while (count > 0) {
    const part = min(count, PART);
    const end = to + (<usize>part << 2);
    let over = i32x4.splat(0);
    for (let from = at; to < end; from += 64, to += 16) {
      const a = f64x2.mul(v128.load(from), gain), b = f64x2.mul(v128.load(from, 16), gain);
      const c = f64x2.mul(v128.load(from, 32), gain), d = f64x2.mul(v128.load(from, 48), gain);
      const aIn = f64x2.pmin(f64x2.pmax(a, low), high), bIn = f64x2.pmin(f64x2.pmax(b, low), high);
      const cIn = f64x2.pmin(f64x2.pmax(c, low), high), dIn = f64x2.pmin(f64x2.pmax(d, low), high);
      over = v128.or(over, v128.or(
        v128.or(f64x2.ne(a, aIn), f64x2.ne(b, bIn)), v128.or(f64x2.ne(c, cIn), f64x2.ne(d, dIn)),
      ));
      const rounder = f64x2.splat(ROUNDER);
      v128.store(to, i16x8.narrow_i32x4_s(
        v128.shuffle<i32>(f64x2.add(aIn, rounder), f64x2.add(bIn, rounder), 0, 2, 4, 6),
        v128.shuffle<i32>(f64x2.add(cIn, rounder), f64x2.add(dIn, rounder), 0, 2, 4, 6),
      ));
    }
    to = end;
    if (v128.any_true(over)) countOver(counts, at, part, scale, least, most);
    at += <usize>part << 4;
    count -= part;
  }
}

/** `count` samples times scale in single precision, two numbers a sample; counts what lies beyond ±1. */
export function floatWords(at: usize, count: u32, to: usize, scale: f64, counts: usize): void {
  const gain = f64x2.splat(scale);
  const one = f32x4.splat(1);
  for (let i: u32 = 0; i < count; i++, at += 16, to += 8) {
    const word = f32x4.demote_f64x2_zero(f64x2.mul(v128.load(at), gain));
    v128.store64_lane(to, word, 0);
    const over = i32x4.bitmask(f32x4.gt(f32x4.abs(word), one));
    if (over != 0) {
      store<f64>(counts, load<f64>(counts) + <f64>popcnt(over));
      store<f64>(counts, load<f64>(counts, 8) + 1, 8);
    }
  }
}
