import { createSynthesis, type WaveformContent } from '@/lib/synth';

/** All samples of a content, interleaved. */
export function render(content: WaveformContent, oversampling = content.oversampling): Float64Array {
  const synthesis = createSynthesis(content, { oversampling });
  const samples = new Float64Array(2 * synthesis.samples);
  let at = 0;
  while (at < samples.length) at += 2 * synthesis.read(samples.subarray(at));
  return samples;
}

/** The samples as words of `bits` with the largest component at full scale, back in units of the samples. */
export function roundTo(samples: Float64Array, bits: number): Float64Array {
  const fullScale = 2 ** (bits - 1) - 1;
  const scale = fullScale / samples.reduce((peak, value) => Math.max(peak, Math.abs(value)), 0);
  return samples.map((value) => Math.round(value * scale) / scale);
}

/** A repeatable stream of numbers in 0…1 for tests that need noise (a 32-bit mixer; no statistics rest on it beyond that). */
export function noise(seed: number): () => number {
  let state = seed >>> 0;
  return () => {
    state = (state + 0x6d2b79f5) >>> 0;
    let mixed = Math.imul(state ^ (state >>> 15), 1 | state);
    mixed = (mixed + Math.imul(mixed ^ (mixed >>> 7), 61 | mixed)) ^ mixed;
    return ((mixed ^ (mixed >>> 14)) >>> 0) / 4294967296;
  };
}

/** Two independent normal numbers of unit variance (Box and Muller). */
export function normalPair(random: () => number): [number, number] {
  const radius = Math.sqrt(-2 * Math.log(1 - random()));
  const turns = 2 * Math.PI * random();
  return [radius * Math.cos(turns), radius * Math.sin(turns)];
}
