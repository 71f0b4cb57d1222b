import { readFileSync } from 'node:fs';
import { join } from 'node:path';
import { sha256 } from '@noble/hashes/sha2.js';
import { bytesToHex } from '@noble/hashes/utils.js';
import type { BenchProfile, WaveformDocument } from '@/lib/synth';
import { renderSamples, renderWords } from '../../../helpers/renderWords';

// Source: an independent NumPy program, see SOURCE.md beside the fixtures.
const FIXTURES = join(__dirname, '../../fixtures/examples');
const read = (name: string): unknown => JSON.parse(readFileSync(join(FIXTURES, name), 'utf8'));

interface Expected {
  samples: number;
  rms: number;
  peakOfSamples: number;
  firstSamples: [number, number][];
  saturatedComponents: number;
  int16LittleEndianSha256: string;
  firstWords: number[];
}
const { expected } = read('expected.json') as { expected: Record<string, Expected> };
const bench = (read('int16.bench.json') as BenchProfile).content;

describe.each(Object.entries(expected))('the example %s', (name, wanted) => {
  const { content } = read(`${name}.combwright.json`) as WaveformDocument;
  const rendered = renderWords(content, bench);

  it('has the independent program’s levels', () => {
    expect(rendered.stats.samples).toBe(wanted.samples);
    expect(rendered.stats.rms / wanted.rms).toBeCloseTo(1, 13);
    expect(rendered.stats.samplePeak / wanted.peakOfSamples).toBeCloseTo(1, 13);
    expect(rendered.saturatedComponents).toBe(wanted.saturatedComponents);
  });

  it('has the independent program’s first samples', () => {
    const samples = renderSamples(content);
    wanted.firstSamples.forEach(([re, im], i) => {
      expect(Math.abs(samples[2 * i]! - re)).toBeLessThan(1e-13 * wanted.peakOfSamples);
      expect(Math.abs(samples[2 * i + 1]! - im)).toBeLessThan(1e-13 * wanted.peakOfSamples);
    });
  });

  it('has the independent program’s words', () => {
    const words = new Int16Array(rendered.bytes.buffer.slice(0, 2 * wanted.firstWords.length));
    expect([...words]).toEqual(wanted.firstWords);
    expect(bytesToHex(sha256(rendered.bytes))).toBe(wanted.int16LittleEndianSha256);
  });
});
