import { numberWord, parsePrefix, prefixText } from '@/components/screens/DrawScreen/numberWords';
import { createEditor } from '@/lib/editor/store';
import { paLadder } from '@/lib/document/demoDocuments';

const { settings } = createEditor(paLadder()).document;

test('a prefix list counts equal neighbours, and is read back', () => {
  const list = [160, 144, 144, 144, 144, 144, 144];
  expect(prefixText(list)).toBe('160, 144 × 6');
  expect(parsePrefix('160, 144 × 6', 14)).toEqual({ ok: true, value: list });
  expect(parsePrefix('160,144x6', 14)).toEqual({ ok: true, value: list });
});

test('a prefix list longer than the symbols, or no list at all, is refused in words', () => {
  expect(parsePrefix('144 × 15', 14)).toEqual({ ok: false, message: 'There are 14 symbols: at most one length each.' });
  expect(parsePrefix('144 x', 14)).toMatchObject({ ok: false });
  expect(parsePrefix('-1', 14)).toMatchObject({ ok: false });
});

test('the spacing is kept exact, also as a fraction', () => {
  const spacing = numberWord('spacing');
  expect(spacing.parse('15k', settings)).toEqual({ ok: true, value: { subcarrierSpacingHz: [15000, 1] } });
  expect(spacing.parse('3125000/7', settings)).toEqual({ ok: true, value: { subcarrierSpacingHz: [3125000, 7] } });
  expect(spacing.text({ ...settings, subcarrierSpacingHz: [3125000, 7] })).toBe('3125000/7');
});

test('arrows lead to the next legal FFT size', () => {
  const size = numberWord('fftSize');
  expect(size.step!({ ...settings, fftSize: 2048 }, 1)).toEqual({ fftSize: 2160 });
  expect(size.step!({ ...settings, fftSize: 2048 }, -1)).toEqual({ fftSize: 2025 });
});

test('every word reads back what it shows', () => {
  for (const id of [
    'fftSize',
    'spacing',
    'symbols',
    'prefix',
    'overlap',
    'oversampling',
    'offset',
    'mode',
    'gap',
    'repeats',
    'pad',
  ] as const) {
    const word = numberWord(id);
    const parsed = word.parse(word.text(settings), settings);
    expect(parsed.ok).toBe(true);
    if (parsed.ok) expect({ ...settings, ...parsed.value }).toEqual(settings);
  }
});
