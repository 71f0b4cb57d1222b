import fc from 'fast-check';
import {
  createBitSource,
  createCellValues,
  createSymbolSynthesis,
  expandGrid,
  type Ink,
  type WaveformContent,
} from '@/lib/synth';
import { arbitraryContent } from '../../../../helpers/arbitraryContent';
import { NULL_INK, dataInk, factor, pilotInk, pnStream, smallContent } from '../../../../helpers/content';

const bpsk = (place: number, stream: string): Ink =>
  dataInk(place, { constellation: 'bpsk', bitMap: 'ieee80211', streamId: stream });

/** The signs of a symbol's BPSK cells as bits, . for silence. */
function bitsOf(content: WaveformContent, repeat: number, symbol: number): string {
  const values = new Float64Array(2 * content.fftSize);
  createCellValues(content).write(repeat, symbol, values);
  return Array.from({ length: content.fftSize }, (_, p) =>
    values[2 * p] === 0 ? '.' : values[2 * p]! > 0 ? '1' : '0',
  ).join('');
}

describe('payload', () => {
  const pattern = '110100100011101';
  const make = (fill: 'running' | 'anchored', acrossRepeats: 'restart' | 'continue'): WaveformContent =>
    smallContent({
      fftSize: 16,
      symbolCount: 2,
      tray: [NULL_INK, bpsk(1, 's0'), bpsk(2, 's1')],
      streams: [
        pnStream(0, { source: { kind: 'pattern', bits: pattern }, fill, acrossRepeats }),
        pnStream(1, { source: { kind: 'ones' } }),
      ],
      grid: {
        rows: [
          [3, 1, 2, 2, 4, 1, 7, 0],
          [5, 0, 2, 1, 9, 0],
        ],
        rowOfSymbol: [0, 1],
      },
      timing: { mode: 'loop', repeats: 3, gapSamples: 0, padSamples: 0 },
    });

  it('running: symbols in order, subcarriers upwards, across repeats as said', () => {
    const cycle = pattern.repeat(4);
    expect(bitsOf(make('running', 'restart'), 0, 0)).toBe(`${cycle.slice(0, 3)}11${cycle.slice(3, 7)}.......`);
    expect(bitsOf(make('running', 'restart'), 0, 1)).toBe(`.....${cycle.slice(7, 9)}.........`);
    expect(bitsOf(make('running', 'restart'), 2, 1)).toBe(`.....${cycle.slice(7, 9)}.........`);
    expect(bitsOf(make('running', 'continue'), 2, 1)).toBe(`.....${cycle.slice(25, 27)}.........`);
  });

  it('anchored: bits from 12·(((r·L)+l)·N + p) alone', () => {
    const at = (r: number, l: number, p: number): string => pattern[(12 * ((r * 2 + l) * 16 + p)) % 15]!;
    expect(bitsOf(make('anchored', 'continue'), 2, 1)).toBe(`.....${at(2, 1, 5)}${at(2, 1, 6)}.........`);
    expect(bitsOf(make('anchored', 'restart'), 2, 1)).toBe(`.....${at(0, 1, 5)}${at(0, 1, 6)}.........`);
  });

  it('tells its bits, their count and their first places', () => {
    const content = make('running', 'continue');
    const values = createCellValues(content);
    expect([
      values.bitsPerRepeat(0),
      values.bitsPerRepeat(1),
      values.bitsOfSymbol(0, 0),
      values.bitsOfSymbol(0, 1),
    ]).toEqual([9, 2, 7, 2]);
    const bits = new Uint8Array(16);
    expect(values.readBits(0, 1, 1, bits)).toBe(2);
    expect([...bits.subarray(0, 2)].join('')).toBe(pattern.repeat(2).slice(16, 18));
    const first = new Float64Array(16);
    values.firstBits(1, 0, first);
    expect([...first]).toEqual([9, 10, 11, 0, 1, 12, 13, 14, 15, -1, -1, -1, -1, -1, -1, -1]);
  });

  it('knows whether repeats are alike', () => {
    expect(createCellValues(make('running', 'restart')).isRepeatAlike).toBe(true);
    expect(createCellValues(make('running', 'continue')).isRepeatAlike).toBe(false);
    const unused = make('running', 'continue');
    unused.grid = { rows: [[3, 0, 2, 2, 11, 0]], rowOfSymbol: [0, 0] };
    expect(createCellValues(unused).isRepeatAlike).toBe(true);
  });
});

describe('counters', () => {
  const listed = {
    kind: 'listed',
    points: Array.from({ length: 100 }, (_, i): [number, number] => [i + 1, 0]),
  } as const;
  const counted = (counter: 'cell' | 'symbolCell' | 'subcarrier' | 'symbol', start = 0): number[] => {
    const points = listed.points.map((point): [number, number] => [...point]);
    const content = smallContent({
      fftSize: 16,
      symbolCount: 2,
      tray: [NULL_INK, pilotInk(1, [factor({ kind: 'listed', points }, counter, start)])],
      grid: { rows: [[2, 0, 2, 1, 3, 0, 1, 1, 8, 0]], rowOfSymbol: [0, 0] },
    });
    const values = new Float64Array(32);
    createCellValues(content).write(0, 1, values);
    return [2, 3, 7].map((p) => values[2 * p]! - 1);
  };
  it('count cells, cells of the symbol, subcarriers and symbols', () => {
    expect(counted('cell')).toEqual([3, 4, 5]);
    expect(counted('symbolCell')).toEqual([0, 1, 2]);
    expect(counted('subcarrier', 10)).toEqual([12, 13, 17]);
    expect(counted('symbol', 4)).toEqual([5, 5, 5]);
  });
  it('refuse to go below zero at a painted cell', () => {
    expect(() => counted('subcarrier', -3)).toThrow(expect.objectContaining({ code: 'bad_index' }));
    expect(counted('subcarrier', -2)).toEqual([0, 1, 5]);
  });
});

describe('editing', () => {
  it('after touch, every symbol is what a fresh content gives, in any order', () => {
    fc.assert(
      fc.property(
        arbitraryContent({ cellsMost: 1024 }),
        fc.array(fc.tuple(fc.nat(), fc.nat()), { maxLength: 5 }),
        (content, edits) => {
          const cells = expandGrid(content.grid, content.fftSize);
          const live = createSymbolSynthesis(content, { cells });
          const size = live.layout.usefulSamples;
          const found = new Float64Array(2 * size);
          live.useful(0, content.symbolCount - 1, found);
          for (const [place, ink] of edits) {
            cells[place % cells.length] = ink % content.tray.length;
            live.values.touch(Math.floor((place % cells.length) / content.fftSize));
          }
          const fresh = createSymbolSynthesis(content, { cells: cells.slice() });
          const wanted = new Float64Array(2 * size);
          for (let symbol = content.symbolCount - 1; symbol >= 0; symbol--) {
            live.useful(content.timing.repeats - 1, symbol, found);
            fresh.useful(content.timing.repeats - 1, symbol, wanted);
            expect(Buffer.from(found.buffer).equals(Buffer.from(wanted.buffer))).toBe(true);
          }
        },
      ),
      { numRuns: 30 },
    );
  });

  it('payload bits read back are the source’s', () => {
    fc.assert(
      fc.property(arbitraryContent({ cellsMost: 1024 }), (content) => {
        const values = createCellValues(content);
        const bits = new Uint8Array(12 * content.fftSize);
        const first = new Float64Array(content.fftSize);
        content.streams.forEach((stream, number) => {
          const source = createBitSource(stream.source);
          const repeat = content.timing.repeats - 1;
          let all = 0;
          for (let l = 0; l < content.symbolCount; l++) {
            const count = values.readBits(number, repeat, l, bits);
            expect(count).toBe(values.bitsOfSymbol(number, l));
            all += count;
            values.firstBits(repeat, l, first);
            let at = 0;
            for (let p = 0; p < content.fftSize; p++) {
              const ink = content.tray[values.cells[l * content.fftSize + p]!]!;
              if (ink.role !== 'data') expect(first[p]).toBe(-1);
              else if (ink.value.streamId === stream.streamId) {
                expect(bits[at]).toBe(source.bit(first[p]!));
                at += {
                  bpsk: 1,
                  'pi2-bpsk': 1,
                  qpsk: 2,
                  '16qam': 4,
                  '64qam': 6,
                  '256qam': 8,
                  '1024qam': 10,
                  '4096qam': 12,
                }[ink.value.constellation];
              }
            }
            expect(at).toBe(count);
          }
          expect(values.bitsPerRepeat(number)).toBe(all);
        });
      }),
      { numRuns: 30 },
    );
  });

  it('refuses broken contents', () => {
    const lost = smallContent({ tray: [NULL_INK, bpsk(1, 's7')] });
    expect(() => createCellValues(lost)).toThrow(expect.objectContaining({ code: 'bad_content' }));
    expect(() => createCellValues(smallContent(), new Uint8Array(3))).toThrow(
      expect.objectContaining({ code: 'bad_size' }),
    );
  });
});
