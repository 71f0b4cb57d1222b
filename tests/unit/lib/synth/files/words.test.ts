import fc from 'fast-check';
import {
  bytesPerSample,
  createWordReader,
  createWordWriter,
  fullScaleOf,
  wordScale,
  type BenchContent,
  type WordScale,
} from '@/lib/synth';

const plain: BenchContent = {
  sampleClockHz: { least: 1, most: 1e9, step: null },
  word: 'int16',
  bits: 16,
  align: 'right',
  numberFormat: 'twosComplement',
  byteOrder: 'little',
  layout: 'interleaved',
  container: 'raw',
  swapIq: false,
  negateQ: false,
  granularitySamples: 1,
  leastSamples: 1,
  mostSamples: 1e9,
  leastHeadroomDb: 0,
  levelMeans: 'unknown',
  markers: { count: 0, packing: 'none', leastSamples: 1, stepSamples: 1 },
  modes: ['loop', 'burst'],
  fileName: { most: 31, extension: 'iq' },
};
const unit: WordScale = { scale: 1, fullScale: 32767, referenceLevel: 1, isSilent: false };

function written(
  bench: BenchContent,
  samples: number[],
  scale: WordScale = unit,
): { bytes: number[]; components: number; samples: number } {
  const writer = createWordWriter(bench, { ...scale, fullScale: fullScaleOf(bench) });
  const bytes = new Uint8Array((samples.length / 2) * writer.bytesPerSample + 1).fill(0xee);
  expect(writer.write(Float64Array.from(samples), samples.length / 2, bytes)).toBe(bytes.length - 1);
  expect(bytes[bytes.length - 1]).toBe(0xee);
  return { bytes: [...bytes.subarray(0, -1)], ...writer.saturated };
}

describe('words', () => {
  it('round half to even, in two’s complement, the low byte first', () => {
    expect(written(plain, [1, -1, 0.5, 1.5, -0.5, -2.5]).bytes).toEqual([1, 0, 255, 255, 0, 0, 2, 0, 0, 0, 254, 255]);
  });
  it('saturate at −F−1 and F, count components and samples, never wrap', () => {
    const found = written(plain, [40000, -40000, 32767.4, -32768.4, 32767.6, 0]);
    expect(found.bytes).toEqual([255, 127, 0, 128, 255, 127, 0, 128, 255, 127, 0, 0]);
    expect([found.components, found.samples]).toEqual([3, 2]);
  });
  it('stand left-aligned with low bits zero, or right-aligned with their sign', () => {
    const twelve = { ...plain, bits: 12 };
    expect(written(twelve, [2047, -2048, 1, -1]).bytes).toEqual([0xff, 0x07, 0x00, 0xf8, 1, 0, 0xff, 0xff]);
    expect(written({ ...twelve, align: 'left' }, [2047, -2048, 1, -1]).bytes).toEqual([
      0xf0, 0x7f, 0x00, 0x80, 0x10, 0, 0xf0, 0xff,
    ]);
    expect(written({ ...twelve, align: 'left', byteOrder: 'big' }, [2047, -2048]).bytes).toEqual([
      0x7f, 0xf0, 0x80, 0x00,
    ]);
  });
  it('of eight bits are bytes; floats are single precision, counted beyond one and kept', () => {
    expect(written({ ...plain, word: 'int8', bits: 8 }, [127, -128, 200, -1]).bytes).toEqual([127, 128, 127, 255]);
    const float: BenchContent = { ...plain, word: 'float32', byteOrder: 'big' };
    const found = written(float, [1.5, -0.1]);
    expect(found.bytes).toEqual([0x3f, 0xc0, 0, 0, 0xbd, 0xcc, 0xcc, 0xcd]);
    expect([found.components, found.samples]).toEqual([1, 1]);
  });
  it('start at any byte of a buffer', () => {
    const bytes = new Uint8Array(9);
    createWordWriter(plain, unit).write(Float64Array.of(258, -2), 1, bytes, 3);
    expect([...bytes]).toEqual([0, 0, 0, 2, 1, 254, 255, 0, 0]);
  });
  it('have no scale when all is zero', () => {
    const levels = { interpolatedPeak: 0, samplePeak: 0, componentPeak: 0, rms: 0 };
    const scale = wordScale({ reference: 'rms', headroomDb: 3 }, levels, plain);
    expect(scale).toMatchObject({ scale: 0, isSilent: true });
    expect(written(plain, [0, 0], scale).bytes).toEqual([0, 0, 0, 0]);
  });
  it('refuse small buffers', () => {
    const writer = createWordWriter(plain, unit);
    expect(() => writer.write(new Float64Array(4), 2, new Uint8Array(7))).toThrow(
      expect.objectContaining({ code: 'buffer_too_small' }),
    );
  });
});

describe('every layout', () => {
  const layout = fc.oneof(
    fc.record({ word: fc.constant('int8' as const), bits: fc.constant(8), align: fc.constant('right' as const) }),
    fc.record({
      word: fc.constant('int16' as const),
      bits: fc.integer({ min: 8, max: 16 }),
      align: fc.constantFrom('left' as const, 'right' as const),
    }),
    fc.record({ word: fc.constant('float32' as const), bits: fc.constant(16), align: fc.constant('right' as const) }),
  );
  it('comes back as the same words', () => {
    fc.assert(
      fc.property(
        layout,
        fc.constantFrom('little' as const, 'big' as const),
        fc.array(fc.float({ noNaN: true, min: -2, max: 2 }), { minLength: 2, maxLength: 200 }),
        fc.integer({ min: 0, max: 3 }),
        (shape, byteOrder, parts, shift) => {
          const bench = { ...plain, ...shape, byteOrder };
          const samples = Float64Array.from(parts.length % 2 === 0 ? parts : [...parts, 0]);
          const count = samples.length / 2;
          const fullScale = fullScaleOf(bench);
          const scale = { scale: fullScale * 0.7, fullScale, referenceLevel: 1, isSilent: false };
          const bytes = new Uint8Array(count * bytesPerSample(bench) + shift);
          createWordWriter(bench, scale).write(samples, count, bytes, shift);
          const words = new Float64Array(2 * count);
          createWordReader(bench).readWords(bytes, shift, count, words);
          words.forEach((word, i) => {
            const exact = samples[i]! * scale.scale;
            const wanted =
              shape.word === 'float32' ? Math.fround(exact) : Math.max(-fullScale - 1, Math.min(fullScale, exact));
            expect(Math.abs(word - wanted)).toBeLessThanOrEqual(shape.word === 'float32' ? 0 : 0.5);
            if (shape.word !== 'float32') expect(Number.isInteger(word)).toBe(true);
          });
          const back = new Float64Array(2 * count);
          createWordReader(bench).readSamples(bytes, shift, count, scale.scale, back);
          back.forEach((value, i) => expect(value).toBe(words[i]! / scale.scale));
        },
      ),
      { numRuns: 200 },
    );
  });
});
