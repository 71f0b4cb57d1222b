import { GRID_SHARE, phonePlaces, widePlaces } from '@/components/screens/DrawScreen/tableLayout';

const wide = (height: number, width = 1440) =>
  widePlaces({ width, height, gridShare: GRID_SHARE, page: null, figureRows: 4 });

test('at 1440 × 900 the main column is 964 px and the margin column 412 px wide', () => {
  const { mainWidth, marginX, marginWidth, layout } = wide(690);
  expect([mainWidth, marginX, marginWidth]).toEqual([964, 1008, 412]);
  expect(layout.grid).toEqual({ x: 68, y: 54, width: 812, height: 350 });
});

test('grid and spectrum share their columns, with the straightedge between', () => {
  const { layout } = wide(690);
  expect(layout.spectrum).toMatchObject({ x: layout.grid.x, width: layout.grid.width });
  expect(layout.straightedge.y).toBeGreaterThanOrEqual(layout.grid.y + layout.grid.height);
  expect(layout.spectrum!.y).toBeGreaterThanOrEqual(layout.straightedge.y + layout.straightedge.height);
});

test.each([580, 690, 900])('nothing runs over the table’s lower edge at %i px', (height) => {
  const { layout, titleBlock } = wide(height);
  const { spectrum, ccdf } = layout;
  expect(spectrum!.y + spectrum!.height).toBeLessThanOrEqual(height);
  expect(ccdf!.y + ccdf!.height).toBeLessThanOrEqual(titleBlock);
  expect(titleBlock + 4 * 45 + 3).toBeLessThanOrEqual(height);
});

test('a drag of the edge keeps both views in sight', () => {
  const { shareAt } = wide(690);
  for (const y of [-500, 0, 300, 5000]) {
    const { layout } = widePlaces({ width: 1440, height: 690, gridShare: shareAt(y), page: null, figureRows: 4 });
    expect(layout.grid.height).toBeGreaterThanOrEqual(119);
    expect(layout.spectrum!.height).toBeGreaterThanOrEqual(99);
  }
});

test('a phone shows one view at a time, and the spectrum under the grid’s own columns', () => {
  const time = phonePlaces(390, 588, 'time').layout;
  expect([time.time === null, time.spectrum, time.ccdf]).toEqual([false, null, null]);
  const spectrum = phonePlaces(390, 588, 'spectrum').layout;
  expect(spectrum.spectrum).toMatchObject({ x: spectrum.grid.x, width: spectrum.grid.width });
});
