import { countedTooLow, paintLimits } from '@/lib/document/counterRules';
import type { Ink, WaveformDocument } from '@/lib/synth/index';
import { issuesAfter, type Edit, type Loose } from '@/tests/helpers/documentIssues';
import { smallDocument } from '@/tests/helpers/documents';

describe('counters below zero', () => {
  const counting =
    (counter: string, start: number): Edit =>
    (content) =>
      Object.assign(content.tray[2].value.factors[0], { counter, start });
  test.each<[string, number, RegExp]>([
    ['subcarrier', -12, /k2 “Pilots” counts subcarriers from −12.*first place it can hold is subcarrier −20/],
    ['subcarrier', -64, /no place of this grid/],
    ['symbol', -1, /first place it can hold is symbol 1/],
    ['symbol', -4, /no place of this grid/],
    ['symbolCell', -1, /no place of this grid/],
    ['cell', -1, /no place of this grid/],
  ])('%s from %i', (counter, start, message) => {
    const issues = issuesAfter(counting(counter, start));
    expect(issues).toEqual([
      { code: 'invalid', pointer: '/content/tray/2/value/factors/0/start', message: expect.stringMatching(message) },
    ]);
  });

  test('are judged of painted cells alone', () => {
    const laterSymbols: Edit = (content, document) => {
      counting('symbol', -2)(content, document);
      content.grid.rows = [
        [64, 0],
        [32, 2, 32, 0],
      ];
      content.grid.rowOfSymbol = [0, 0, 1, 1];
    };
    expect(issuesAfter(laterSymbols)).toEqual([]);
    expect(
      issuesAfter((content, document) => (laterSymbols(content, document), (content.grid.rowOfSymbol = [0, 1, 1, 1]))),
    ).toHaveLength(1);
  });

  test('paintLimits says where an ink can stand', () => {
    const ink = (...factors: [string, number][]): Ink => ({
      ...(smallDocument() as WaveformDocument).content.tray[2]!,
      role: 'pilot',
      value: {
        factors: factors.map(([counter, start]) => ({ sequence: { kind: 'constant' }, counter, start })),
      } as Loose,
    });
    expect(paintLimits(ink(['cell', 0]))).toEqual({ leastPosition: 0, leastSymbol: 0 });
    expect(paintLimits(ink(['subcarrier', -3], ['symbol', -2], ['subcarrier', -7]))).toEqual({
      leastPosition: 7,
      leastSymbol: 2,
    });
    expect(paintLimits(ink(['subcarrier', -3], ['cell', -1]))).toEqual({
      leastPosition: Infinity,
      leastSymbol: Infinity,
    });
    expect(paintLimits(smallDocument().content.tray[1]!)).toEqual({ leastPosition: 0, leastSymbol: 0 });
    expect(countedTooLow(ink(['symbol', -2]), 0, 64, 4)).toMatch(/symbol 2$/);
  });
});
