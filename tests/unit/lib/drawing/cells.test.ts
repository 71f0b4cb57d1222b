import { cellMark } from '@/lib/drawing/cellMarks';
import { reduceRow, reduceRuns, toothPitch, toothPitches, toothWidthPx } from '@/lib/drawing/cellReduction';
import { gridPicture, pictureBlocks } from '@/lib/drawing/gridPicture';
import { inkStyleOf, inkWord, markOf, priorityOf } from '@/lib/drawing/inkStyle';
import type { InkStyleKey } from '@/lib/drawing/inkStyle';
import { compressGrid } from '@/lib/synth/index';
import { testDocument, testTray } from '../../../helpers/headlessEditor';
import { seededRandom } from '../../../helpers/mutateDocument';

const styles = testTray.map(inkStyleOf);

describe('inks', () => {
  it('have a style, a mark and a word', () => {
    expect(styles).toEqual(['null', 'qpsk', 'qam16', 'pilot', 'tone', 'reserved']);
    expect(styles.map(markOf)).toEqual(['bare', 'pips-1', 'pips-2', 'tooth', 'ring', 'hatch']);
    expect(testTray.map(inkWord)).toEqual(['null', 'QPSK', '16-QAM', 'pilot', 'tone', 'reserved']);
  });
});

describe('cell marks', () => {
  it('show as many pips as a map has bits on each axis', () => {
    const pips = (style: InkStyleKey) => cellMark(markOf(style), 14, 14).filter(({ shape }) => shape === 'dot').length;
    expect((['qpsk', 'qam16', 'qam64', 'qam256', 'qam1024', 'qam4096'] as const).map(pips)).toEqual([1, 2, 3, 4, 5, 6]);
  });

  it('stay within the cell, centred, at most 14 px', () => {
    for (const name of ['dash', 'slant', 'pips-6', 'tooth', 'ring'] as const) {
      for (const [width, height] of [
        [10, 24],
        [40, 12],
        [64, 64],
      ] as const) {
        const points = cellMark(name, width, height).flatMap((shape) =>
          shape.shape === 'line'
            ? [
                [shape.x1Px, shape.y1Px],
                [shape.x2Px, shape.y2Px],
              ]
            : [
                [shape.xPx - shape.radiusPx, shape.yPx - shape.radiusPx],
                [shape.xPx + shape.radiusPx, shape.yPx + shape.radiusPx],
              ],
        );
        const xs = points.map(([x]) => x!);
        const ys = points.map(([, y]) => y!);
        expect(Math.min(...xs) + Math.max(...xs)).toBeCloseTo(width, 6);
        expect(Math.max(...ys) - Math.min(...ys)).toBeLessThanOrEqual(14);
        expect(Math.min(...xs, ...ys)).toBeGreaterThanOrEqual(0);
      }
    }
  });

  it('begin at 10 px; the hatch stands at every size and the bare point from 18', () => {
    expect(cellMark('pips-4', 9.9, 30)).toEqual([]);
    expect(cellMark('pips-4', 10, 10)).toHaveLength(4);
    expect(cellMark('hatch', 4, 4).length).toBeGreaterThan(0);
    expect(cellMark('bare', 17, 17)).toEqual([]);
    expect(cellMark('bare', 18, 18)).toHaveLength(1);
  });

  it('hatch neighbouring cells as one', () => {
    const lines = (xPx: number) =>
      cellMark('hatch', 10, 10, xPx).map((line) => (line.shape === 'line' ? line.x1Px + line.y1Px + xPx : 0));
    const pitch = 4 * Math.SQRT2;
    for (const c of [...lines(0), ...lines(10), ...lines(20)]) expect(c / pitch).toBeCloseTo(Math.round(c / pitch), 9);
  });
});

describe('cells below a pixel', () => {
  const priorities = styles.map(priorityOf);
  const reduce = (row: number[], first: number, px: number, columns: number) => {
    const out = new Int16Array(columns);
    reduceRow(Uint8Array.from(row), first, px, priorities, out);
    return [...out];
  };

  it('give their pixel the ink that comes first, each to one column', () => {
    expect(reduce([1, 1, 0, 3, 2, 4, 5, 0], 0, 0.5, 4)).toEqual([1, 3, 4, 5]);
    expect(reduce([3, 0, 0, 0, 0, 0, 0, 0], 0, 0.25, 2)).toEqual([3, 0]);
    expect(reduce([1, 2], 0, 0.5, 3)).toEqual([2, -1, -1]);
    expect(reduce([1, 1, 3, 1], -2, 0.5, 4)).toEqual([-1, 1, 3, -1]);
  });

  it('keep every tooth of a comb at any zoom', () => {
    const row = Array.from({ length: 2048 }, (_, p) => (p % 12 === 0 ? 3 : 1));
    const shown = reduce(row, 0, 783 / 2048, 783).filter((ink) => ink === 3).length;
    expect(shown).toBe(171);
  });

  it('come from runs as from cells', () => {
    const random = seededRandom(20270301);
    for (let round = 0; round < 60; round++) {
      const runs: number[] = [];
      for (let ink = -1; runs.length < 2 + 60 * random();) {
        ink = (ink + 1 + Math.floor(random() * (styles.length - 1))) % styles.length;
        runs.push(1 + Math.floor(random() ** 3 * 40), ink);
      }
      const row = runs.flatMap((entry, i) => (i % 2 === 0 ? new Array<number>(entry).fill(runs[i + 1]!) : []));
      const [first, px, columns] = [
        row.length * (random() - 0.3),
        0.05 + 0.94 * random(),
        1 + Math.floor(random() * 90),
      ];
      const out = new Int16Array(columns);
      reduceRuns(runs, first, px, priorities, out);
      expect([...out]).toEqual(reduce(row, first, px, columns));
      const pitches = styles.map((_, ink) => toothPitch(Uint8Array.from(row), ink));
      expect([...toothPitches(runs, styles.length)]).toEqual(pitches);
    }
  });

  it('draw teeth two px wide where they stand 6 px apart', () => {
    expect(toothPitch(Uint8Array.from([0, 3, 0, 0, 3, 0, 3]), 3)).toBe(2);
    expect(toothPitch(Uint8Array.from([0, 3, 0]), 3)).toBe(Infinity);
    expect(toothWidthPx('pilot', 6, 0.5)).toBe(2);
    expect(toothWidthPx('pilot', 5, 0.5)).toBe(1);
    expect(toothWidthPx('tone', 1, 0.5)).toBe(2);
    expect(toothWidthPx('pilot', 60, 5)).toBe(5);
  });
});

describe('grid pictures', () => {
  const symbolCount = 14;
  const fftSize = 2048;
  const cells = new Uint8Array(symbolCount * fftSize);
  for (let l = 0; l < symbolCount; l++) {
    cells.fill(l < 2 ? 1 : 2, l * fftSize + 436, l * fftSize + 1612);
    if (l % 3 === 2) for (let p = 436 + (l % 2) * 6; p < 1612; p += 12) cells[l * fftSize + p] = 3;
  }
  const { content } = testDocument({ fftSize, symbolCount, grid: compressGrid(cells, fftSize, symbolCount) });
  const fills = Object.fromEntries(
    styles.map((style, i) => [style, ['#ffffff', '#b4bae8', '#9299d8', '#1e8371', '#b85c1f', '#efe6d2'][i]!]),
  ) as Record<InkStyleKey, string>;

  it('cover the whole area once', () => {
    const picture = gridPicture(content, 144, 36);
    expect(picture).toMatchObject({ columns: 144, rowCount: 14 });
    let area = 0;
    for (const block of pictureBlocks(picture, fills)) area += block.width * block.height;
    expect(area).toBe(144 * 14);
    expect(gridPicture(content, 112, 6).rowCount).toBe(6);
  });

  it('mix a comb with its ground instead of closing to a bar', () => {
    const blocks = pictureBlocks(gridPicture(content, 144, 36), fills);
    const row = blocks.filter(({ y, height }) => y <= 2 && y + height > 2);
    expect(row.some(({ fill }) => fill === fills.pilot)).toBe(false);
    const ground = row.filter(({ fill }) => fill !== fills.null && fill !== fills.qam16);
    const width = ground.reduce((sum, block) => sum + block.width, 0);
    expect(width).toBeGreaterThan(70);
  });

  it('are small', () => {
    expect(JSON.stringify(gridPicture(content, 144, 36)).length).toBeLessThan(8000);
    const bare = gridPicture(testDocument().content, 144, 36);
    expect(JSON.stringify(bare).length).toBeLessThan(300);
  });
});
