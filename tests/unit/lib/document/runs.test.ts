import { paintedGrid } from '@/lib/document/paintedGrid';
import { canonicalGrid } from '@/lib/document/runs';

test('runs are merged, rows made unique in order of first use, unused ones dropped', () => {
  const grid = {
    rows: [
      [8, 0],
      [4, 1, 0, 2, 4, 1],
      [8, 1],
      [3, 0, 5, 0],
      [7, 2, 1, 0],
    ],
    rowOfSymbol: [2, 3, 1, 0, 4],
  };
  const before = structuredClone(grid);
  expect(canonicalGrid(grid)).toEqual({
    rows: [
      [8, 1],
      [8, 0],
      [7, 2, 1, 0],
    ],
    rowOfSymbol: [0, 1, 0, 1, 2],
  });
  expect(grid).toEqual(before);
});

test('a canonical grid stays as it is', () => {
  const grid = {
    rows: [
      [1, 0, 7, 3],
      [8, 0],
    ],
    rowOfSymbol: [0, 1, 1, 0],
  };
  expect(canonicalGrid(grid)).toEqual(grid);
});

test('paintedGrid counts subcarriers from −⌊N/2⌋, odd sizes too', () => {
  expect(paintedGrid(16, 2, (subcarrier, symbol) => (subcarrier === -8 + symbol ? 1 : 0))).toEqual({
    rows: [
      [1, 1, 15, 0],
      [1, 0, 1, 1, 14, 0],
    ],
    rowOfSymbol: [0, 1],
  });
  expect(paintedGrid(25, 1, (subcarrier) => (subcarrier === 0 ? 1 : 0)).rows).toEqual([[12, 0, 1, 1, 12, 0]]);
});
