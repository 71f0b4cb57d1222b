import {
  captureReadings,
  createReception,
  createSynthesis,
  createVectorForm,
  createWordWriter,
  guessLayout,
  layoutOfBench,
  readSigmfMeta,
  type BenchContent,
  type ByteSource,
  type CaptureReading,
  type CaptureResult,
  type LayoutOutcome,
} from '@/lib/synth';
import { openBench, smallDocument } from '@/tests/helpers/documents';
import { createFuzzWatch, expectNoHang, fuzzCount, mutantOf, mutateBytes } from '@/tests/helpers/fuzz';
import { seededRandom } from '@/tests/helpers/mutateDocument';

const seed = 20260420;
const captures = fuzzCount(6_000);
/** The waveform is looked for in one file of so many: a reception takes a quarter of a second. */
const RECEIVED_EACH = 500;
const { content } = smallDocument();

const benches: BenchContent[] = (
  [
    {},
    { byteOrder: 'big', bits: 12, align: 'left' },
    { word: 'int8', bits: 8 },
    { word: 'float32' },
    { container: 'wav' },
    { container: 'wav', word: 'float32' },
    { container: 'npy', numberFormat: 'offsetBinary' },
    { container: 'npy', word: 'float32', byteOrder: 'big' },
    { container: 'csv', word: 'float32' },
  ] as Partial<BenchContent>[]
).map((changes) => openBench(changes).content);

/** The document's own vector in a profile's file, as a receiver without faults would have recorded it. */
function captureFile(bench: BenchContent): Uint8Array {
  const synthesis = createSynthesis(content);
  const samples = new Float64Array(2 * synthesis.samples);
  synthesis.read(samples);
  const fullScale = bench.word === 'float32' ? 1 : 2 ** (bench.bits - 1) - 1;
  const writer = createWordWriter(bench, { scale: 0.2 * fullScale, fullScale, referenceLevel: 1, isSilent: false });
  const bytes = new Uint8Array(synthesis.samples * writer.bytesPerSample);
  writer.write(samples, synthesis.samples, bytes);
  const form = createVectorForm(content, bench);
  return Uint8Array.from([...form.files[0]!.head, ...form.form(bytes, synthesis.samples)[0]!]);
}

function sourceOf(file: Uint8Array): ByteSource {
  return {
    bytes: file.length,
    read(at, count, out) {
      if (at < 0 || count < 0 || at + count > file.length)
        throw new Error(`bytes ${at}…${at + count} are not in the file`);
      out.set(file.subarray(at, at + count));
    },
  };
}

function expectWords(message: string): void {
  if (message.length < 10) throw new Error(`a refusal without words: ${message}`);
}

/** Every sample of every reading is finite, or NaN where the file says so, read from places that the file has. */
function expectNumbers(readings: readonly CaptureReading[]): void {
  const block = new Float64Array(2 * 100);
  for (const [reading, { source }] of readings.entries()) {
    if (!Number.isSafeInteger(source.samples) || source.samples < 0) throw new Error(`${source.samples} samples`);
    const end = reading === 0 ? source.samples : Math.min(100, source.samples); // the others are the same bytes
    for (let from = 0; from < end; from += 100) {
      const count = Math.min(100, end - from);
      source.read(from, count, block);
      for (const part of block.subarray(0, 2 * count)) if (Math.abs(part) === Infinity) throw new Error('no number');
    }
  }
}

/** A measurement is whole: what it shows are numbers, in dB or null. */
function expectWhole(result: CaptureResult): void {
  if (result.kind === 'refused') return expectWords(result.message);
  const { statistics } = result;
  for (const figure of Object.values(statistics) as unknown[])
    if (typeof figure === 'number' && !Number.isFinite(figure)) throw new Error(JSON.stringify(statistics));
  if (result.kind !== 'measured') return;
  const { evm, snrDb, levelDbfs, gainDb, offsetSubcarriers } = result;
  for (const figure of [evm.all.db, snrDb, levelDbfs, gainDb, offsetSubcarriers])
    if (figure !== null && Number.isNaN(figure)) throw new Error('a figure that is no number');
  if (evm.bySymbol.length !== content.symbolCount) throw new Error('symbols are missing');
}

test(`${captures} mutated capture files, seed ${seed}: each is read whole or refused in words`, () => {
  const random = seededRandom(seed);
  const whole = benches.map(captureFile);
  const watch = createFuzzWatch(seed);
  const kinds = new Map<string, number>();
  const count = (kind: string): void => void kinds.set(kind, (kinds.get(kind) ?? 0) + 1);
  for (let at = 0; at < captures; at += 1) {
    const place = at % benches.length;
    const file = mutateBytes(whole[place]!, random);
    const expected = layoutOfBench(benches[place]!);
    watch.run(at, () => {
      const guessed = guessLayout(sourceOf(file), random() < 0.5 ? expected : null);
      if (!guessed.ok) return (expectWords(guessed.message), count('unknown'));
      const running = captureReadings([sourceOf(file)], guessed.layout);
      let step = running.next();
      while (step.done !== true) step = running.next();
      if (!step.value.ok) return (expectWords(step.value.message), count('unreadable'));
      const { readings } = step.value;
      expectNumbers(readings);
      count('read');
      if (at % RECEIVED_EACH !== 0) return;
      const result = createReception({
        content,
        readings: readings.map(({ source }) => source),
        clockHz: guessed.clockHz,
        channel: 'allKnown',
        hasRails: guessed.layout.word !== 'float32',
      }).result();
      expectWhole(result);
      count(result.kind);
    });
  }
  expectNoHang(watch);
  for (const kind of ['unknown', 'read', 'measured']) expect([kind, kinds.get(kind) ?? 0]).not.toEqual([kind, 0]);
});

test('mutated SigMF metadata names a layout or says why not', () => {
  const random = seededRandom(seed + 1);
  const text = JSON.stringify({
    global: { 'core:datatype': 'ci16_le', 'core:version': '1.0.0', 'core:sample_rate': 20e6, 'core:num_channels': 1 },
    captures: [{ 'core:sample_start': 0, 'core:header_bytes': 0 }],
    annotations: [],
  });
  const watch = createFuzzWatch(seed + 1);
  for (let at = 0; at < fuzzCount(2_000); at += 1) {
    const mutant = mutantOf([text], random);
    watch.run(at, () => {
      const outcome: LayoutOutcome = readSigmfMeta(typeof mutant === 'string' ? mutant : JSON.stringify(mutant));
      if (!outcome.ok) return expectWords(outcome.message);
      const { layout, clockHz } = outcome;
      if (!Number.isInteger(layout.headBytes) || layout.headBytes < 0) throw new Error(`${layout.headBytes} bytes`);
      if (clockHz !== null && !(clockHz > 0 && Number.isFinite(clockHz))) throw new Error(`${clockHz} Hz`);
    });
  }
  expectNoHang(watch);
});
