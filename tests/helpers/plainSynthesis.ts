import { createCellValues, expandGrid, type WaveformContent } from '@/lib/synth';
import { unit } from './directTransform';

/**
 * The formulas of docs/signal.md written down plainly: every sample a sum over subcarriers, every symbol added at its start with its
 * ramps, wrapped or kept at the end, then turned. Slow; shares only the cells' values with the product.
 */
export function plainSynthesis(content: WaveformContent): Float64Array {
  const { fftSize, symbolCount, oversampling: M, prefixSamples, overlapSamples, timing } = content;
  const cells = expandGrid(content.grid, fftSize);
  const values = createCellValues(content, cells);
  const prefixOf = (l: number): number => prefixSamples[l % prefixSamples.length]!;
  let frame = symbolCount * fftSize;
  for (let l = 0; l < symbolCount; l++) frame += prefixOf(l);
  const V = overlapSamples * M;
  const tail = timing.mode === 'burst' ? V : 0;
  const samples = timing.repeats * (frame + timing.gapSamples) * M + timing.padSamples + tail;
  const out = new Float64Array(2 * samples);
  const half = Math.floor(fftSize / 2);
  const size = fftSize * M;
  const roots = Array.from({ length: size }, (_, i) => unit(i, size));
  const row = new Float64Array(2 * fftSize);
  for (let r = 0; r < timing.repeats; r++) {
    let start = r * (frame + timing.gapSamples) * M;
    for (let l = 0; l < symbolCount; l++) {
      values.write(r, l, row);
      const prefix = prefixOf(l) * M;
      for (let n = -prefix; n < size + V; n++) {
        let re = 0;
        let im = 0;
        for (let p = 0; p < fftSize; p++) {
          const [c, s] = roots[((((p - half) * n) % size) + size) % size]!;
          re += row[2 * p]! * c - row[2 * p + 1]! * s;
          im += row[2 * p]! * s + row[2 * p + 1]! * c;
        }
        let weight = 1 / Math.sqrt(fftSize);
        const i = n + prefix;
        if (i < V) weight *= 0.5 * (1 - Math.cos((Math.PI * (i + 0.5)) / V));
        if (n >= size) weight *= 0.5 * (1 + Math.cos((Math.PI * (n - size + 0.5)) / V));
        const at = (start + i) % samples;
        out[2 * at]! += weight * re;
        out[2 * at + 1]! += weight * im;
      }
      start += prefix + size;
    }
  }
  const [spacing, per] = content.subcarrierSpacingHz;
  const turnsPerSample = BigInt(content.frequencyOffsetHz) * BigInt(per);
  const whole = BigInt(size) * BigInt(spacing);
  for (let n = 0; n < samples && turnsPerSample !== 0n; n++) {
    const [c, s] = unit(Number((((turnsPerSample * BigInt(n)) % whole) + whole) % whole), Number(whole));
    const re = out[2 * n]!;
    const im = out[2 * n + 1]!;
    out[2 * n] = re * c - im * s;
    out[2 * n + 1] = re * s + im * c;
  }
  return out;
}
