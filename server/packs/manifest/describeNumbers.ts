import type { Manifest } from '@/lib/document/manifestSchema';
import {
  bytesPerSample,
  createVectorGather,
  createWordReader,
  deriveFigures,
  exactFraction,
  fractionToNumber,
  fullScaleOf,
  shiftBits,
  type BenchContent,
  type FrameLayout,
  type WaveformContent,
} from '@/lib/synth';
import { wordWords } from '../wordWords.ts';

export function describeClock(
  content: WaveformContent,
  closing: { turns: number; closes: boolean },
): Manifest['clock'] {
  const figures = deriveFigures(content);
  const [numerator, denominator] = content.subcarrierSpacingHz;
  const spacing = exactFraction(BigInt(numerator), BigInt(denominator));
  const digits = (f: { numerator: bigint; denominator: bigint }): [string, string] => [
    f.numerator.toString(),
    f.denominator.toString(),
  ];
  return {
    sampleClockFraction: digits(figures.sampleClock),
    sampleClockHz: figures.sampleClockHz,
    subcarrierSpacingFraction: digits(spacing),
    subcarrierSpacingHz: fractionToNumber(spacing),
    frequencyOffsetHz: content.frequencyOffsetHz,
    offsetTurns: closing.turns,
    closesLoop: closing.closes,
  };
}

export function describeSamples(content: WaveformContent, layout: FrameLayout): Manifest['samples'] {
  return {
    mode: content.timing.mode,
    fftSize: content.fftSize,
    oversampling: content.oversampling,
    symbolCount: content.symbolCount,
    repeats: content.timing.repeats,
    prefixSamples: content.prefixSamples,
    overlapSamples: content.overlapSamples,
    gapSamples: content.timing.gapSamples,
    padSamples: content.timing.padSamples,
    repeatSamples: layout.repeatSamples,
    activeSamples: (layout.repeats - 1) * layout.activeSamples + layout.lastActiveSamples,
    fileSamples: layout.samples,
    durationSec: deriveFigures(content).fileTimeSec,
  };
}

const firstSamples = 4;

/** The first words in file order as they are stored, of two files the first one's before the second's. */
function firstNumbers(bench: BenchContent, firstParts: readonly Uint8Array[], count: number): number[] {
  // as stored: neither swapped nor negated back
  const reader = createWordReader({ ...bench, swapIq: false, negateQ: false });
  const words = new Float64Array(2 * count);
  reader.readWords(createVectorGather(bench).gather(firstParts, count), 0, count, words);
  const all = Array.from(words);
  if (bench.layout === 'interleaved') return all;
  return [...all.filter((_, i) => i % 2 === 0), ...all.filter((_, i) => i % 2 === 1)];
}

/** `firstParts`: the first samples of each finished file, at most four, heads left out. */
export function describeWord(bench: BenchContent, scale: number, firstParts: readonly Uint8Array[]): Manifest['word'] {
  const size = bytesPerSample(bench);
  const stored = Buffer.concat(firstParts.map((part) => part.subarray(0, (firstSamples * size) / firstParts.length)));
  const firstWords = firstNumbers(bench, firstParts, Math.floor(stored.length / size));
  return {
    word: bench.word,
    bits: bench.bits,
    align: bench.align,
    shiftBits: shiftBits(bench),
    numberFormat: bench.numberFormat,
    byteOrder: bench.byteOrder,
    layout: bench.layout,
    container: bench.container,
    swapIq: bench.swapIq,
    negateQ: bench.negateQ,
    bytesPerSample: size,
    words: wordWords(bench),
    fullScale: fullScaleOf(bench),
    scaleLsbPerUnit: scale,
    scaleText: scale.toPrecision(17),
    firstWords: firstWords.map((word) => word + 0),
    firstBytes: Array.from(stored, (byte) => byte.toString(16).padStart(2, '0')).join(' '),
  };
}

export function describeSymbols(layout: FrameLayout): Manifest['symbols'] {
  return Array.from({ length: layout.symbolCount }, (_, symbol) => ({
    symbol,
    startSample: layout.symbolStarts[symbol]!,
    usefulStartSample: layout.symbolStarts[symbol]! + layout.prefixes[symbol]!,
    prefixSamples: layout.prefixes[symbol]!,
  }));
}

export function describeRamp(layout: FrameLayout): Manifest['ramp'] {
  const rampSamples = layout.overlapSamples;
  if (rampSamples === 0) return { kind: 'none', rampSamples, words: 'Symbols follow each other without a ramp.' };
  return {
    kind: 'raisedCosine',
    rampSamples,
    words: `Each symbol rises over the first ${rampSamples} samples of its prefix, r[i] = ½(1 − cos(π(i + ½)/${rampSamples})), and falls over a cyclic suffix of as many, which adds onto the next symbol's rise.`,
  };
}

export function describeTransform(content: WaveformContent): Manifest['transform'] {
  const n = content.fftSize;
  return {
    exponentSign: 1,
    scale: 1 / Math.sqrt(n),
    words: `x[n] = (1/√${n}) Σ a(k) e^(+j2πkn/${n * content.oversampling}), n = 0 at the useful start, k from −${Math.floor(n / 2)} to ${Math.ceil(n / 2) - 1}, x = I + jQ.`,
  };
}
