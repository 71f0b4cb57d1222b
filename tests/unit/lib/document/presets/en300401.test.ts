import { phaseReference } from '@/lib/document/presets/en300401';
import { createSynthesis, frameLayout } from '@/lib/synth/index';
import { readCheck, titleOf } from '@/tests/helpers/checks';
import { contentOf, frameSamples, powerOf, presetCells } from '@/tests/helpers/presetCells';

const modeI = readCheck<Record<string, number>>('en300401.modeI');
const cells = presetCells(contentOf('en300401-mode-i'));
const { content } = cells;

test(titleOf(modeI), () => {
  const { expected } = modeI;
  expect(content.fftSize).toBe(expected.fft);
  expect(content.subcarrierSpacingHz).toEqual([expected.scs_hz, 1]);
  expect(content.fftSize * expected.scs_hz!).toBe(expected.fs_mhz! * 1e6);
  expect(content.symbolCount).toBe(expected.symbols_per_frame! + 1);
  expect(frameSamples(content)).toBe(expected.frame_samples);
  const { symbolStarts, prefixes } = frameLayout(content, 1);
  expect(symbolStarts[1]).toBe(expected.null_samples);
  expect(symbolStarts[2]! - symbolStarts[1]!).toBe(expected.symbol_samples);
  expect(prefixes[1]).toBe(expected.guard_samples);
  for (const symbol of [1, 2, 76]) {
    const used = cells.subcarriersOf(symbol);
    expect([used.length, used[0], used.at(-1), used.includes(0)]).toEqual([expected.carriers, -768, 768, false]);
  }
});

test('the null symbol is silent, sample by sample', () => {
  expect(cells.subcarriersOf(0)).toEqual([]);
  const block = new Float64Array(2 * 2657);
  createSynthesis(content, { oversampling: 1 }).read(block);
  expect(block.subarray(0, 2 * 2656).every((part) => part === 0)).toBe(true);
  expect(Math.hypot(block[2 * 2656]!, block[2 * 2656 + 1]!)).toBeGreaterThan(0);
});

describe('the phase reference symbol of 14.3.2, from memory', () => {
  /** Rows of h as recalled one by one; the preset derives them from the first. */
  const rows = ['0200001120002211', '0323013021232330', '0002021322022013', '0121033223212132'];
  /** [k′, i, n] of some blocks of mode I. */
  const blocks: [number, number, number][] = [
    [-768, 0, 1],
    [-640, 0, 3],
    [-352, 1, 2],
    [-32, 3, 2],
    [1, 0, 3],
    [33, 3, 1],
    [97, 1, 1],
    [737, 1, 1],
  ];

  test('is e^{jπ/2·(h + n)} in each block, at the power of the data', () => {
    const found = cells.cellsOf(1, 'Phase reference');
    const at = new Map(found.map(({ subcarrier, re, im }) => [subcarrier, [re, im]]));
    for (const [first, i, n] of blocks)
      for (let j = 0; j < 32; j += 1) {
        const turns = (Number(rows[i]![j % 16]) + n) % 4;
        expect([first + j, at.get(first + j)]).toEqual([
          first + j,
          [
            [1, 0],
            [0, 1],
            [-1, 0],
            [0, -1],
          ][turns],
        ]);
      }
    expect(powerOf(found)).toBe(1);
    expect(phaseReference()).toHaveLength(1536);
  });
});
