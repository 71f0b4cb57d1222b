import { render, screen } from '@testing-library/react';
import { gridPaths } from '@/components/drawing/gridRuns';
import { GridSheet } from '@/components/drawing/GridSheet';
import { testDocument } from '../../helpers/headlessEditor';

// There is no layout here: as wide as on a desk.
jest.mock('@/components/drawing/useWidth', () => ({ useWidth: () => ({ widthPx: 900, onLayout: () => undefined }) }));

/** A frame of `symbolCount` symbols: two rows that take turns, a block of 16-QAM with pilots in every second symbol. */
function frameOf(symbolCount: number) {
  const rows = [
    [400, 0, 1248, 2, 400, 0],
    [400, 0, ...Array.from({ length: 104 }, () => [1, 3, 11, 2]).flat(), 400, 0],
  ];
  const rowOfSymbol = Array.from({ length: symbolCount }, (_, l) => l % 2);
  return testDocument({ fftSize: 2048, symbolCount, grid: { rows, rowOfSymbol } }).content;
}

/** Rectangles [x, y, width, height] of a path. */
const rectangles = (path: string) =>
  [...path.matchAll(/M(\S+) (\S+)h(\S+)v(\S+)h\S+z/g)].map((match) => match.slice(1).map(Number));

describe('the paths of a grid', () => {
  const paint = (symbolCount: number, widthPx: number, heightPx: number) => {
    const pixels = new Map<string, string>();
    for (const { style, path } of gridPaths(frameOf(symbolCount), { from: 0, to: 2048 }, widthPx, heightPx))
      for (const [x, y, width, height] of rectangles(path) as [number, number, number, number][])
        for (let row = y; row < y + height; row++)
          for (let column = Math.round(x); column < Math.round(x + width); column++) {
            if (pixels.has(`${column} ${row}`)) throw new Error(`twice at ${column}, ${row}`);
            pixels.set(`${column} ${row}`, style);
          }
    return (column: number, row: number) => pixels.get(`${column} ${row}`) ?? 'null';
  };

  it('stand where the cells do, each pixel once', () => {
    const at = paint(4, 512, 40);
    expect([at(99, 5), at(100, 5), at(256, 5), at(411, 5), at(412, 5)]).toEqual([
      'null',
      'qam16',
      'qam16',
      'qam16',
      'null',
    ]);
    expect([at(100, 15), at(103, 15), at(100, 25), at(100, 35)]).toEqual(['pilot', 'pilot', 'qam16', 'pilot']);
    const near = paint(4, 2048, 40);
    expect([near(400, 15), near(401, 15), near(412, 15), near(399, 15)]).toEqual(['pilot', 'qam16', 'pilot', 'null']);
  });

  it('are one for each look, however many symbols share a pixel', () => {
    const looks = gridPaths(frameOf(4096), { from: 0, to: 2048 }, 512, 210);
    expect(looks.map(({ style }) => style).sort()).toEqual(['pilot', 'qam16']);
    // Twenty symbols a pixel, all the same two rows: what is seen is one row as high as the picture.
    for (const { path } of looks) for (const [, y, , height] of rectangles(path)) expect([y, height]).toEqual([0, 210]);
  });
});

describe('a grid picture', () => {
  const show = (label?: string) =>
    render(<GridSheet content={frameOf(14)} gridHeightPx={280} {...(label ? { label } : {})} />);

  it('that is read has symbol numbers and the units of its rule at the left', () => {
    show('Grid of revision 3');
    const picture = screen.getByRole('img', { name: 'Grid of revision 3' });
    const words = [...picture.querySelectorAll('text')].map((text) => text.textContent);
    for (const word of ['0', '7', '13', 'k', 'MHz', 'DC']) expect(words).toContain(word);
  });

  it('that decorates has none', () => {
    const { container } = show();
    const words = [...container.querySelectorAll('text')].map((text) => text.textContent);
    expect(words).toContain('DC');
    expect(words).not.toContain('MHz');
    expect(words).not.toContain('13');
  });
});
