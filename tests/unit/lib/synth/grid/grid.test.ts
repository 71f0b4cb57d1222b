import { compressGrid, expandGrid, lowestSubcarrier } from '@/lib/synth';

describe('the run-length grid', () => {
  it('goes out and back, canonical', () => {
    const cells = Uint8Array.of(0, 0, 1, 1, 2, 2, 2, 2, 0, 0, 1, 1, 5, 0, 5, 0);
    const grid = compressGrid(cells, 4, 4);
    expect(grid).toEqual({
      rows: [
        [2, 0, 2, 1],
        [4, 2],
        [1, 5, 1, 0, 1, 5, 1, 0],
      ],
      rowOfSymbol: [0, 1, 0, 2],
    });
    expect(expandGrid(grid, 4)).toEqual(cells);
  });

  it('merges what a stranger cut', () => {
    const loose = {
      rows: [
        [1, 3, 1, 3, 2, 0],
        [4, 1],
        [2, 3, 2, 0],
      ],
      rowOfSymbol: [2, 0, 1],
    };
    expect(compressGrid(expandGrid(loose, 4), 4, 3)).toEqual({
      rows: [
        [2, 3, 2, 0],
        [4, 1],
      ],
      rowOfSymbol: [0, 0, 1],
    });
  });

  it.each([
    [{ rows: [[3, 0]], rowOfSymbol: [0] }],
    [{ rows: [[5, 0]], rowOfSymbol: [0] }],
    [{ rows: [[4, 0]], rowOfSymbol: [1] }],
    [{ rows: [[0, 1, 4, 0]], rowOfSymbol: [0] }],
  ])('refuses %j', (grid) => {
    expect(() => expandGrid(grid, 4)).toThrow(expect.objectContaining({ code: 'bad_content' }));
  });

  it('starts at −⌊N/2⌋', () => {
    expect([16, 15, 75].map(lowestSubcarrier)).toEqual([-8, -7, -37]);
    expect(() => compressGrid(new Uint8Array(7), 4, 2)).toThrow(expect.objectContaining({ code: 'bad_size' }));
  });
});
