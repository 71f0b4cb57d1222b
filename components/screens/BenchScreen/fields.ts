import { formatNumber, formatQuantity, parseInteger, parseQuantity, type Parsed } from '@/lib/drawing/quantities';
import { freeMarkerBits, layoutRefusals, type BenchContent } from '@/lib/synth';

/** A number of the profile: how it is read, written and typed. */
export interface NumberSpec {
  pointer: string;
  label: string;
  unit: string;
  limits: string;
  read: (content: BenchContent) => number | null;
  write: (content: BenchContent, value: number | null) => BenchContent;
  parse: (text: string) => Parsed<number | null>;
}

const hertz = (text: string) => parseQuantity(text, 'Hz');
const whole = (text: string) => parseInteger(text);
const orEmpty =
  (parse: (text: string) => Parsed<number>) =>
  (text: string): Parsed<number | null> =>
    text.trim() === '' || text.trim().toLowerCase() === 'none' ? { ok: true, value: null } : parse(text);

export const numbers = {
  clockLeast: {
    pointer: '/content/sampleClockHz/least',
    label: 'Slowest',
    unit: 'Hz',
    limits: 'above 0, at most 10 THz',
    read: (c) => c.sampleClockHz.least,
    write: (c, value) => ({ ...c, sampleClockHz: { ...c.sampleClockHz, least: value ?? 0 } }),
    parse: hertz,
  },
  clockMost: {
    pointer: '/content/sampleClockHz/most',
    label: 'Fastest',
    unit: 'Hz',
    limits: 'not below the slowest, at most 10 THz',
    read: (c) => c.sampleClockHz.most,
    write: (c, value) => ({ ...c, sampleClockHz: { ...c.sampleClockHz, most: value ?? 0 } }),
    parse: hertz,
  },
  clockStep: {
    pointer: '/content/sampleClockHz/step',
    label: 'Step',
    unit: 'Hz',
    limits: 'clocks are whole multiples of it; empty for none',
    read: (c) => c.sampleClockHz.step,
    write: (c, value) => ({ ...c, sampleClockHz: { ...c.sampleClockHz, step: value } }),
    parse: orEmpty(hertz),
  },
  bits: {
    pointer: '/content/bits',
    label: 'Converter bits',
    unit: 'of 16',
    limits: '8 to 16',
    read: (c) => c.bits,
    write: (c, value) => ({ ...c, bits: value ?? 0 }),
    parse: whole,
  },
  nameMost: {
    pointer: '/content/fileName/most',
    label: 'File name, at most',
    unit: 'characters',
    limits: '20 to 64, without the extension',
    read: (c) => c.fileName.most,
    write: (c, value) => ({ ...c, fileName: { ...c.fileName, most: value ?? 0 } }),
    parse: whole,
  },
  granularity: {
    pointer: '/content/granularitySamples',
    label: 'Granularity',
    unit: 'samples',
    limits: '1 to 1 048 576',
    read: (c) => c.granularitySamples,
    write: (c, value) => ({ ...c, granularitySamples: value ?? 0 }),
    parse: whole,
  },
  leastSamples: {
    pointer: '/content/leastSamples',
    label: 'Shortest',
    unit: 'samples',
    limits: 'at least 1',
    read: (c) => c.leastSamples,
    write: (c, value) => ({ ...c, leastSamples: value ?? 0 }),
    parse: whole,
  },
  mostSamples: {
    pointer: '/content/mostSamples',
    label: 'Longest',
    unit: 'samples',
    limits: 'not below the shortest',
    read: (c) => c.mostSamples,
    write: (c, value) => ({ ...c, mostSamples: value ?? 0 }),
    parse: whole,
  },
  headroom: {
    pointer: '/content/leastHeadroomDb',
    label: 'Least headroom',
    unit: 'dB',
    limits: '0 to 60',
    read: (c) => c.leastHeadroomDb,
    write: (c, value) => ({ ...c, leastHeadroomDb: value ?? 0 }),
    parse: (text) => parseQuantity(text, 'dB'),
  },
  markerCount: {
    pointer: '/content/markers/count',
    label: 'Count',
    unit: '',
    limits: '0 to 8',
    read: (c) => c.markers.count,
    write: (c, value) => {
      const count = value ?? 0;
      const packing = count === 0 ? 'none' : c.markers.packing === 'none' ? 'bytes' : c.markers.packing;
      return { ...c, markers: { ...c.markers, count, packing } };
    },
    parse: whole,
  },
  markerLeast: {
    pointer: '/content/markers/leastSamples',
    label: 'Shortest mark',
    unit: 'samples',
    limits: 'at least 1',
    read: (c) => c.markers.leastSamples,
    write: (c, value) => ({ ...c, markers: { ...c.markers, leastSamples: value ?? 0 } }),
    parse: whole,
  },
  markerStep: {
    pointer: '/content/markers/stepSamples',
    label: 'Step of a mark',
    unit: 'samples',
    limits: 'at least 1',
    read: (c) => c.markers.stepSamples,
    write: (c, value) => ({ ...c, markers: { ...c.markers, stepSamples: value ?? 0 } }),
    parse: whole,
  },
} satisfies Record<string, NumberSpec>;

/** The tidy form of a number: value and unit apart. */
export function numberText(spec: NumberSpec, content: BenchContent): { value: string; unit: string } {
  const value = spec.read(content);
  if (value === null) return { value: 'none', unit: spec.unit };
  if (spec.unit === 'Hz') return formatQuantity(value, 'Hz', 12);
  return { value: formatNumber(value, spec.unit === 'dB' ? 2 : 0), unit: spec.unit };
}

/** Words that decide others take them along: some spellings are fixed for a type. */
export function withWord(content: BenchContent, word: BenchContent['word']): BenchContent {
  const fixed: Partial<BenchContent> =
    word === 'int8'
      ? { bits: 8, align: 'right' }
      : word === 'float32'
        ? { bits: 16, align: 'right', numberFormat: 'twosComplement' }
        : {};
  return withContainer({ ...content, word, ...fixed }, content.container);
}

/** A container takes along what it leaves no choice of: WAV has one byte order, and one number format for each word. */
export function withContainer(content: BenchContent, container: BenchContent['container']): BenchContent {
  if (container !== 'wav') return { ...content, container };
  const numberFormat = content.word === 'int8' ? 'offsetBinary' : 'twosComplement';
  return { ...content, container, byteOrder: 'little', numberFormat };
}

/** Why no file can have this layout, as a sentence for the choice that would lead to it; null where one can. */
export function whyNot(content: BenchContent): string | null {
  const [refusal] = layoutRefusals(content);
  if (refusal) return refusal.reason;
  if (content.markers.packing !== 'lowBits' || freeMarkerBits(content) > 0) return null;
  return 'Low bits are free in left-aligned 16-bit words of fewer than 16 bits.';
}

export function fullScaleText(content: BenchContent): string {
  return content.word === 'float32' ? '±1.0' : `±${formatNumber(2 ** (content.bits - 1) - 1)}`;
}

/** A profile to begin with: a plain 16-bit layout, its limits to be taken from the generator's manual. */
export const newBenchContent: BenchContent = {
  sampleClockHz: { least: 1_000_000, most: 200_000_000, step: null },
  word: 'int16',
  bits: 16,
  align: 'right',
  numberFormat: 'twosComplement',
  byteOrder: 'little',
  layout: 'interleaved',
  container: 'raw',
  swapIq: false,
  negateQ: false,
  granularitySamples: 1,
  leastSamples: 1024,
  mostSamples: 67_108_864,
  leastHeadroomDb: 1,
  levelMeans: 'unknown',
  markers: { count: 0, packing: 'none', leastSamples: 1, stepSamples: 1 },
  modes: ['loop', 'burst'],
  fileName: { most: 31, extension: 'sigmf-data' },
};
