import { createSynthesis, frameLayout, interpolationOf } from '@/lib/synth';
import { NULL_INK, factor, pilotInk, smallContent } from '../../../../helpers/content';
import { renderSamples } from '../../../../helpers/renderWords';

const painted = { tray: [NULL_INK, pilotInk(1, [factor({ kind: 'alternating' })])] };

describe('positions', () => {
  it('follow the prefix list cyclically, with gap, pad and burst tail', () => {
    const layout = frameLayout(
      smallContent({
        symbolCount: 5,
        prefixSamples: [10, 4],
        overlapSamples: 3,
        oversampling: 2,
        timing: { mode: 'burst', repeats: 3, gapSamples: 7, padSamples: 11 },
      }),
    );
    expect([...layout.prefixes]).toEqual([20, 8, 20, 8, 20]);
    expect([...layout.symbolStarts]).toEqual([0, 148, 284, 432, 568]);
    expect(layout.frameSamples).toBe(716);
    expect(layout.repeatSamples).toBe(730);
    expect(layout.samples).toBe(3 * 730 + 11 + 6);
    // a suffix of six output samples stands in each gap of fourteen
    expect([layout.activeSamples, layout.lastActiveSamples]).toEqual([722, 722]);
  });

  it('scale the pad with the interpolation and nothing else oddly', () => {
    const content = smallContent({
      oversampling: 3,
      timing: { mode: 'loop', repeats: 1, gapSamples: 2, padSamples: 5 },
    });
    expect([1, 2, 3, 4, 5, 7, 16].map(interpolationOf)).toEqual([4, 4, 6, 4, 5, 7, 16]);
    expect(frameLayout(content, 6).samples).toBe(64 * 6 + 12 + 10);
    expect(() => frameLayout(content, 4)).toThrow(expect.objectContaining({ code: 'bad_size' }));
  });

  it('refuse what no file can hold', () => {
    const content = smallContent({ timing: { mode: 'loop', repeats: 65536, gapSamples: 2147483647, padSamples: 0 } });
    expect(() => frameLayout(content)).toThrow(expect.objectContaining({ code: 'too_large' }));
  });
});

describe('ends of the file', () => {
  const row = { rows: [[20, 0, 20, 1, 24, 0]], rowOfSymbol: [0, 0] };
  const base = smallContent({ ...painted, symbolCount: 2, prefixSamples: [8], overlapSamples: 8, grid: row });
  const plain = renderSamples({ ...base, overlapSamples: 0 });

  it('a loop of alike symbols with overlap has no seam: it equals the periodic signal', () => {
    // both symbols carry the same values, so the overlap of one with the next is a change from its suffix to its own copy
    const found = renderSamples(base);
    expect(found.length).toBe(plain.length);
    const weight = (i: number): number => 0.5 * (1 - Math.cos((Math.PI * (i + 0.5)) / 8));
    for (let i = 0; i < 8; i++) {
      // prefix sample i: own prefix rising, the other's suffix (its first useful samples) falling
      for (const part of [0, 1]) {
        const wanted = plain[2 * i + part]! * weight(i) + plain[2 * (8 + i) + part]! * weight(7 - i);
        expect(Math.abs(found[2 * i + part]! - wanted)).toBeLessThan(1e-15);
        expect(Math.abs(found[2 * (72 + i) + part]! - wanted)).toBeLessThan(1e-15);
      }
    }
  });

  it('a burst starts from nothing and keeps its suffix', () => {
    const found = renderSamples({ ...base, timing: { ...base.timing, mode: 'burst' } });
    expect(found.length).toBe(plain.length + 16);
    const fall = 0.5 * (1 + Math.cos((Math.PI * 7.5) / 8));
    expect(Math.abs(found[found.length - 2]! - plain[2 * 15]! * fall)).toBeLessThan(1e-15);
  });

  it('in a gap shorter than the suffix, the rest goes on into the next repeat or round the loop', () => {
    const found = renderSamples({ ...base, timing: { mode: 'loop', repeats: 2, gapSamples: 3, padSamples: 0 } });
    const pure = renderSamples({
      ...base,
      overlapSamples: 0,
      timing: { mode: 'loop', repeats: 2, gapSamples: 3, padSamples: 0 },
    });
    const weight = (i: number): number => 0.5 * (1 - Math.cos((Math.PI * (i + 0.5)) / 8));
    const repeat = 2 * 72 + 3;
    for (const start of [0, repeat]) {
      for (let i = 0; i < 5; i++) {
        const wanted = pure[2 * (start + i)]! * weight(i) + pure[2 * (8 + i + 3)]! * weight(7 - i - 3);
        expect(Math.abs(found[2 * (start + i)]! - wanted)).toBeLessThan(1e-15);
      }
    }
  });
});

describe('long files', () => {
  it('are read in little memory, and alike repeats are alike to the bit', () => {
    const content = smallContent({
      ...painted,
      fftSize: 4096,
      symbolCount: 14,
      prefixSamples: [288],
      grid: { rows: [[448, 0, 3200, 1, 448, 0]], rowOfSymbol: new Array<number>(14).fill(0) },
      timing: { mode: 'loop', repeats: 65536, gapSamples: 0, padSamples: 0 },
    });
    const synthesis = createSynthesis(content);
    expect(synthesis.samples).toBe(65536 * 14 * 4384);
    const before = process.memoryUsage().arrayBuffers;
    const block = new Float64Array(2 * 14 * 4384);
    synthesis.read(block);
    const first = Buffer.from(new Uint8Array(block.buffer.slice(0)));
    for (let i = 0; i < 20; i++) synthesis.read(block);
    expect(Buffer.from(block.buffer).equals(first)).toBe(true);
    expect(process.memoryUsage().arrayBuffers - before).toBeLessThan(40e6);
  });
});
