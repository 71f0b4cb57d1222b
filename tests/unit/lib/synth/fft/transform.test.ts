import { createTransform, isFiveSmooth } from '@/lib/synth';
import { directTransform, noise, relativeDb } from '../../../../helpers/directTransform';

/** Against a plain sum with exact angles: what sixteen levels of double arithmetic leave, with room. */
const MOST_ERROR_DB = -290;

describe('transforms', () => {
  const sizes: number[] = [];
  for (let n = 1; n <= 150; n++) if (isFiveSmooth(n)) sizes.push(n);

  sizes.push(180, 240, 256, 375, 405, 625);
  it.each(sizes)('of size %i equal the plain sum, both ways', (size) => {
    const input = noise(size, size);
    const output = new Float64Array(2 * size);
    const transform = createTransform(size);
    transform.forward(input, output);
    expect(relativeDb(output, directTransform(input, -1))).toBeLessThan(MOST_ERROR_DB);
    transform.inverse(input, output);
    expect(relativeDb(output, directTransform(input, 1))).toBeLessThan(MOST_ERROR_DB);
    expect(input).toEqual(noise(size, size));
  });

  it.each([2025, 4096, 16200, 16384, 15625, 262144, 259200])('of size %i come back after both ways', (size) => {
    const input = noise(size, 7);
    const there = new Float64Array(2 * size);
    const back = new Float64Array(2 * size);
    const transform = createTransform(size);
    transform.forward(input, there);
    transform.inverse(there, back);
    for (let i = 0; i < back.length; i++) back[i]! /= size;
    expect(relativeDb(back, input)).toBeLessThan(MOST_ERROR_DB);
  });

  it.each([0, 7, 14, 2.5, 49, -4, NaN, 8388608])('of size %p are refused', (size) => {
    expect(() => createTransform(size)).toThrow(expect.objectContaining({ code: 'bad_size' }));
  });
});
