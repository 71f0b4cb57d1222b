import {
  captureReadings,
  createWordWriter,
  guessLayout,
  layoutWords,
  plainLayout,
  readSigmfMeta,
  type ByteSource,
  type CaptureLayout,
  type SampleSource,
} from '@/lib/synth';
import { npyHead, wavHead } from '@/lib/synth/files/fileHeads';
import { noise, normalPair } from '@/tests/helpers/measures';
import { openBench } from '@/tests/helpers/documents';

const COUNT = 3000;

/** Gaussian samples whose RMS stands 12 dB below full scale, as a receiver with headroom records them. */
const signal = (() => {
  const random = noise(17);
  const data = new Float64Array(2 * COUNT);
  for (let i = 0; i < COUNT; i++) {
    const [re, im] = normalPair(random);
    data.set([Math.max(-0.99, Math.min(0.99, 0.18 * re)), Math.max(-0.99, Math.min(0.99, 0.18 * im))], 2 * i);
  }
  return data;
})();

const bytesOf = (bytes: Uint8Array): ByteSource => ({
  bytes: bytes.length,
  read: (at, count, out) => out.set(bytes.subarray(at, at + count)),
});
const textOf = (text: string): ByteSource => bytesOf(new TextEncoder().encode(text));

function written(layout: CaptureLayout): Uint8Array {
  const bench = openBench({ ...layout, container: 'raw', layout: 'interleaved' }).content;
  const scale = layout.word === 'float32' ? 1 : 2 ** (layout.bits - 1) - 1;
  const writer = createWordWriter(bench, { scale, fullScale: scale, referenceLevel: 1, isSilent: false });
  const bytes = new Uint8Array(COUNT * writer.bytesPerSample);
  writer.write(signal, COUNT, bytes);
  return bytes;
}

function firstReading(sources: ByteSource[], layout: CaptureLayout): SampleSource {
  const opening = captureReadings(sources, layout);
  for (;;) {
    const next = opening.next();
    if (next.done !== true) continue;
    if (!next.value.ok) throw new Error(next.value.message);
    return next.value.readings[0]!.source;
  }
}

function expectSignal(source: SampleSource, within: number): void {
  expect(source.samples).toBe(COUNT);
  const read = new Float64Array(2 * COUNT);
  source.read(0, COUNT, read);
  expect(read.reduce((most, value, i) => Math.max(most, Math.abs(value - signal[i]!)), 0)).toBeLessThan(within);
  const few = new Float64Array(20);
  source.read(1234, 10, few);
  expect([...few]).toEqual([...read.subarray(2468, 2488)]);
}

const layouts: Partial<CaptureLayout>[] = [
  {},
  { byteOrder: 'big' },
  { numberFormat: 'offsetBinary' },
  { numberFormat: 'offsetBinary', byteOrder: 'big' },
  { bits: 12, align: 'left' },
  { bits: 14, align: 'left', byteOrder: 'big' },
  { bits: 8, align: 'left' },
  { bits: 8, align: 'left', byteOrder: 'big', numberFormat: 'offsetBinary' },
  { word: 'int8', bits: 8 },
  { word: 'int8', bits: 8, numberFormat: 'offsetBinary' },
  { word: 'float32' },
  { word: 'float32', byteOrder: 'big' },
];

describe('raw words are told apart by their bytes alone', () => {
  test.each(layouts.map((changes) => [layoutWords({ ...plainLayout, ...changes }), changes] as const))(
    '%s',
    (_, changes) => {
      const layout = { ...plainLayout, ...changes };
      const bytes = bytesOf(written(layout));
      const guessed = guessLayout(bytes, null);
      expect(guessed).toEqual({ ok: true, clockHz: null, layout });
      expectSignal(firstReading([bytes], layout), 1.1 / (layout.word === 'float32' ? 1e6 : 2 ** (layout.bits - 1) - 1));
    },
  );

  test("what the bytes leave open is the pack's: 12 bits right-aligned", () => {
    const expected = { ...plainLayout, bits: 12 };
    expect(guessLayout(bytesOf(written(expected)), expected)).toMatchObject({ layout: { bits: 12, align: 'right' } });
  });

  test('components that are swapped for the generator are not taken for swapped in a capture', () => {
    const expected = { ...plainLayout, swapIq: true, negateQ: true };
    for (const file of [bytesOf(written(plainLayout)), textOf('I,Q\n0.1,0.2\n')])
      expect(guessLayout(file, expected)).toMatchObject({ layout: { swapIq: false, negateQ: false } });
  });

  test.each([8, 11, 14])("the pack's %i right-aligned bits in offset binary are read as such", (bits) => {
    for (const byteOrder of ['little', 'big'] as const) {
      const expected: CaptureLayout = { ...plainLayout, bits, numberFormat: 'offsetBinary', byteOrder };
      const bytes = bytesOf(written(expected));
      expect(guessLayout(bytes, expected)).toMatchObject({ layout: expected });
      const plain: CaptureLayout = { ...expected, numberFormat: 'twosComplement' };
      expect(guessLayout(bytesOf(written(plain)), expected)).toMatchObject({ layout: plain });
    }
  });

  test.each(['little', 'big'] as const)('saturated words are %s-endian by their limits', (byteOrder) => {
    const layout: CaptureLayout = { ...plainLayout, byteOrder };
    const words = new DataView(new ArrayBuffer(4 * COUNT));
    for (let i = 0; i < 2 * COUNT; i++) {
      const value = Math.max(-32768, Math.min(32767, Math.round(signal[i]! * 4e6)));
      words.setInt16(2 * i, value, byteOrder === 'little');
    }
    for (const other of [null, plainLayout, { ...plainLayout, byteOrder: 'big' as const }])
      expect(guessLayout(bytesOf(new Uint8Array(words.buffer)), other)).toMatchObject({ layout });
  });

  test.each([
    [12, 'little'],
    [12, 'big'],
    [14, 'little'],
    [10, 'big'],
  ] as const)(
    "markers in the low bits of the pack's %i bits do not turn its words over: %s-endian",
    (bits, byteOrder) => {
      const expected: CaptureLayout = { ...plainLayout, bits, align: 'left', byteOrder };
      const marked = written(expected);
      const low = byteOrder === 'little' ? 0 : 1;
      for (let i = low; i < marked.length; i += 2)
        marked[i] = marked[i]! | (i < 400 ? (1 << (16 - bits)) - 1 : (i >> 7) & 1);
      expect(guessLayout(bytesOf(marked), expected)).toMatchObject({ layout: expected });
    },
  );

  test('the other readings swap bytes and number format', () => {
    const opening = captureReadings([bytesOf(written(plainLayout))], plainLayout);
    const { value } = opening.next();
    expect(value).toMatchObject({
      ok: true,
      readings: [{ words: '' }, { words: 'with the bytes of each word swapped' }, { words: 'as offset binary' }],
    });
  });
});

describe('containers say what they hold', () => {
  test.each([
    [{ word: 'int16' }, {}],
    [{ word: 'float32' }, {}],
    [{ word: 'int8' }, { bits: 8, numberFormat: 'offsetBinary' }],
  ] as const)('WAV of %j', (word, changes) => {
    const layout: CaptureLayout = { ...plainLayout, ...word, ...changes };
    const head = wavHead(layout, COUNT, 1920000);
    const file = bytesOf(Uint8Array.from([...head, ...written(layout)]));
    const found = guessLayout(file, null);
    expect(found).toMatchObject({
      ok: true,
      clockHz: 1920000,
      layout: { ...layout, container: 'wav', headBytes: head.length, dataBytes: written(layout).length },
    });
    if (found.ok) expectSignal(firstReading([file], found.layout), 0.01);
  });

  test.each([{}, { byteOrder: 'big' }, { word: 'float32' }, { word: 'int8', bits: 8 }] as Partial<CaptureLayout>[])(
    'NumPy of %j',
    (changes) => {
      const layout: CaptureLayout = { ...plainLayout, ...changes };
      const head = npyHead(layout, COUNT);
      const file = bytesOf(Uint8Array.from([...head, ...written(layout)]));
      const found = guessLayout(file, null);
      expect(found).toMatchObject({
        ok: true,
        layout: { word: layout.word, byteOrder: layout.byteOrder, container: 'npy' },
      });
      if (found.ok) expectSignal(firstReading([file], found.layout), 0.01);
    },
  );

  test.each(['twosComplement', 'offsetBinary'] as const)(
    "a NumPy file in the pack's own layout has the pack's bits: %s",
    (numberFormat) => {
      const expected: CaptureLayout = { ...plainLayout, container: 'npy', bits: 10, numberFormat };
      const file = bytesOf(Uint8Array.from([...npyHead(expected, COUNT), ...written(expected)]));
      const found = guessLayout(file, expected);
      expect(found).toMatchObject({ ok: true, layout: { bits: 10 } });
      if (found.ok) expectSignal(firstReading([file], found.layout), 1.1 / 511);
      expect(guessLayout(file, { ...expected, container: 'raw' })).toMatchObject({ layout: { bits: 16 } });
    },
  );

  test('values that are not numbers stay so: floats and text', () => {
    const floats = bytesOf(new Uint8Array(Float32Array.of(0.5, NaN, Infinity, 1e30).buffer));
    for (const [file, layout] of [
      [floats, { ...plainLayout, word: 'float32' }],
      [textOf('I,Q\n0.5,nan\n-inf,x\n'), { ...plainLayout, container: 'csv', word: 'float32' }],
    ] as [ByteSource, CaptureLayout][]) {
      const out = new Float64Array(4);
      firstReading([file], layout).read(0, 2, out);
      expect([...out]).toEqual([0.5, NaN, NaN, 0]);
    }
  });

  test('CSV with a head, with other separators, and columns named the other way round', () => {
    const rows = (separator: string, order: [number, number]): string =>
      Array.from({ length: COUNT }, (_, i) =>
        order.map((part) => signal[2 * i + part]!.toFixed(9)).join(separator),
      ).join('\n');
    for (const text of [
      `I,Q\n${rows(',', [0, 1])}\n`,
      rows(';', [0, 1]),
      `time of day\nQ\tI\n${rows('\t', [1, 0])}\n\n`,
    ]) {
      const file = textOf(text);
      const found = guessLayout(file, null);
      expect(found).toMatchObject({ ok: true, layout: { container: 'csv' } });
      if (found.ok) expectSignal(firstReading([file], found.layout), 1e-8);
    }
  });

  test('columns that are told to be swapped and negated are', () => {
    const layout: CaptureLayout = { ...plainLayout, container: 'csv', word: 'float32' };
    const read = (changes: Partial<CaptureLayout>): number[] => {
      const out = new Float64Array(4);
      firstReading([textOf('I,Q\n1,2\n3,4\n')], { ...layout, ...changes }).read(0, 2, out);
      return [...out];
    };
    expect(read({})).toEqual([1, 2, 3, 4]);
    expect(read({ swapIq: true })).toEqual([2, 1, 4, 3]);
    expect(read({ negateQ: true })).toEqual([1, -2, 3, -4]);
    expect(read({ swapIq: true, negateQ: true })).toEqual([2, -1, 4, -3]);
  });

  test("I's and Q's files are read side by side", () => {
    const whole = written(plainLayout);
    const column = (first: number): ByteSource =>
      bytesOf(Uint8Array.from({ length: 2 * COUNT }, (_, i) => whole[4 * Math.floor(i / 2) + first + (i % 2)]!));
    const found = guessLayout(column(0), null, true);
    expect(found).toMatchObject({ ok: true, layout: { layout: 'split', word: 'int16' } });
    if (found.ok) expectSignal(firstReading([column(0), column(2)], found.layout), 1e-4);
  });

  test.each([
    ['cf32_le', { word: 'float32', byteOrder: 'little' }],
    ['ci16_be', { word: 'int16', byteOrder: 'big', numberFormat: 'twosComplement' }],
    ['cu8', { word: 'int8', numberFormat: 'offsetBinary', bits: 8 }],
  ])('SigMF type %s', (type, layout) => {
    const meta = {
      global: { 'core:datatype': type, 'core:sample_rate': 7680000 },
      captures: [{ 'core:sample_start': 0, 'core:header_bytes': 44 }],
    };
    expect(readSigmfMeta(JSON.stringify(meta))).toMatchObject({
      ok: true,
      clockHz: 7680000,
      layout: { ...layout, headBytes: 44 },
    });
  });
});

test.each([
  [() => guessLayout(bytesOf(new Uint8Array(0)), null), 'The file is empty.'],
  [() => guessLayout(bytesOf(wavHead({ word: 'int16' }, 4, 8000).slice(0, 36)), null), 'no data'],
  [
    () =>
      guessLayout(
        bytesOf(Uint8Array.from(wavHead({ word: 'int16' }, 4, 8000), (byte, i) => (i === 22 ? 6 : byte))),
        null,
      ),
    '6 channels',
  ],
  [() => guessLayout(bytesOf(npyHead(plainLayout, 4).slice(0, 40)), null), 'ends in its head'],
  [
    // NumPy's own complex numbers are of 16 bytes
    () => {
      const head = npyHead({ ...plainLayout, word: 'float32' }, 4);
      const text = String.fromCharCode(...head).replace("'<c8', ", "'<c16',");
      return guessLayout(bytesOf(Uint8Array.from(text, (letter) => letter.charCodeAt(0))), null);
    },
    'items of type c16',
  ],
  [() => readSigmfMeta('{'), 'no JSON'],
  [() => readSigmfMeta('{"global":{"core:datatype":"rf32_le"}}'), 'rf32_le'],
  [() => readSigmfMeta('{"global":{"core:datatype":"cf32_le","core:num_channels":2}}'), 'several channels'],
])('what cannot be taken is refused in words: %#', (attempt, words) => {
  const outcome = attempt();
  expect(outcome.ok).toBe(false);
  expect(!outcome.ok && outcome.message).toContain(words);
});
