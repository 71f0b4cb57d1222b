import { z } from './zod';
import { bitMaps, constellations } from './inkSchema';
import { levelReferences } from './waveformSchema';

const digest = z.string().regex(/^sha256:[0-9a-f]{64}$/, 'must be "sha256:" and 64 hexadecimal digits');
const hex64 = z.string().regex(/^[0-9a-f]{64}$/, 'must be 64 hexadecimal digits');
const whole = z.int().min(0);
const finite = z.number();
/** A level in dB of something that may be zero: minus infinity is written null. */
const levelDb = z.number().nullable();
const exactFraction = z.tuple([z.string().regex(/^\d+$/), z.string().regex(/^[1-9]\d*$/)]);
const bitText = z.string().regex(/^[01]*$/);
const point = z.tuple([finite, finite]);

export const fileRoles = [
  'vector',
  'vectorI',
  'vectorQ',
  'meta',
  'markers',
  'payload',
  'reference',
  'referenceSent',
  'cells',
  'document',
  'bench',
  'card',
  'readme',
] as const;

const digests = z.strictObject({
  contentDigest: digest,
  intentDigest: digest,
  /** Of the whole files, about too: with state, synthVersion and packVersion they make the packKey again. */
  documentDigest: digest,
  profileDigest: digest,
  profileFileDigest: digest,
  synthVersion: z.string().min(1),
  packVersion: z.string().min(1),
});

const file = z.strictObject({ name: z.string().min(1), role: z.enum(fileRoles), bytes: whole, sha256: hex64 });

const clock = z.strictObject({
  /** Numerator and denominator as decimal digits: the clock's may pass 2^53. */
  sampleClockFraction: exactFraction,
  sampleClockHz: finite,
  subcarrierSpacingFraction: exactFraction,
  subcarrierSpacingHz: finite,
  frequencyOffsetHz: finite,
  /** f0 · T / fs, with its sign. */
  offsetTurns: finite,
  closesLoop: z.boolean(),
});

const samples = z.strictObject({
  mode: z.enum(['loop', 'burst']),
  fftSize: whole,
  oversampling: whole,
  symbolCount: whole,
  repeats: whole,
  /** The document's list, at the base rate, used cyclically; so are overlap and gap. */
  prefixSamples: z.array(whole),
  overlapSamples: whole,
  gapSamples: whole,
  /** Output samples from here on. */
  padSamples: whole,
  repeatSamples: whole,
  activeSamples: whole,
  fileSamples: whole,
  durationSec: finite,
});

const word = z.strictObject({
  word: z.enum(['int8', 'int16', 'float32']),
  bits: whole,
  align: z.enum(['left', 'right']),
  /** A stored integer is the value times 2^shiftBits. */
  shiftBits: whole,
  numberFormat: z.enum(['twosComplement', 'offsetBinary']),
  byteOrder: z.enum(['little', 'big']),
  layout: z.enum(['interleaved', 'split']),
  container: z.enum(['raw', 'wav', 'npy', 'csv']),
  swapIq: z.boolean(),
  negateQ: z.boolean(),
  bytesPerSample: whole,
  words: z.string().min(1),
  /** F: 2^(bits − 1) − 1, 1 for floats. */
  fullScale: finite,
  /** LSB per unit of the rendered samples, before alignment, and the same with 17 digits. */
  scaleLsbPerUnit: finite,
  scaleText: z.string().min(1),
  /** The first 8 words in file order as numbers (before alignment), and their bytes as stored, two digits each. */
  firstWords: z.array(finite).max(8),
  firstBytes: z.string().regex(/^([0-9a-f]{2}( [0-9a-f]{2})*)?$/),
});

const levels = z.strictObject({
  reference: z.enum(levelReferences),
  headroomDb: finite,
  fileRmsDbfs: levelDb,
  activeRmsDbfs: levelDb,
  renderedPeakDbfs: levelDb,
  renderedHeadroomDb: levelDb,
  reconstructedPeakDbfs: levelDb,
  reconstructedHeadroomDb: levelDb,
  reconstructedPeakMethod: z.enum(['exactTransforms', 'polyphaseFilter']),
  /** The mean of the file's words over full scale. */
  dcI: finite,
  dcQ: finite,
  dcDbfs: levelDb,
  saturatedComponents: whole,
  saturatedSamples: whole,
});

const papr = z.strictObject({
  frameDb: finite,
  /** Without symbols that are all null; null where there are none. */
  activeFrameDb: levelDb,
  meanPower: finite,
  meanOver: z.string().min(1),
  /** M′ of the synthesis that was measured. */
  interpolation: whole,
  worstSymbolDb: levelDb,
  worstSymbol: whole.nullable(),
  medianSymbolDb: levelDb,
});

/** Output samples from the file's first one, of the first repeat; a later repeat adds samples.repeatSamples each. */
const symbol = z.strictObject({
  symbol: whole,
  startSample: whole,
  usefulStartSample: whole,
  prefixSamples: whole,
});

const ramp = z.strictObject({
  kind: z.enum(['none', 'raisedCosine']),
  /** V = W·M, output samples. */
  rampSamples: whole,
  words: z.string().min(1),
});

const transform = z.strictObject({
  exponentSign: z.literal(1),
  /** 1/√N. */
  scale: finite,
  words: z.string().min(1),
});

const sequenceReport = z.strictObject({
  kind: z.enum(['constant', 'alternating', 'pn', 'gold', 'zadoffChu', 'newman', 'schroeder', 'listed']),
  words: z.string().min(1),
  polynomial: z.string().nullable(),
  seed: whole.nullable(),
  inverted: z.boolean().nullable(),
  /** Of sequences made of bits: b(0) to b(31). */
  first32Bits: bitText.nullable(),
  /** The first values, at most 8, as [re, im]. */
  firstPoints: z.array(point).max(8),
});

const factorReport = z.strictObject({
  counter: z.enum(['cell', 'symbolCell', 'subcarrier', 'symbol']),
  start: z.int(),
  sequence: sequenceReport,
});

const mapReport = z.strictObject({
  constellation: z.enum(constellations),
  bitMap: z.enum(bitMaps),
  bitsPerCell: whole,
  words: z.string().min(1),
  /** At 0 dB; the bits as the stream gives them. */
  points: z.array(z.strictObject({ bits: bitText, i: finite, q: finite })),
});

const ink = z.strictObject({
  inkId: z.string(),
  name: z.string(),
  role: z.enum(['null', 'data', 'pilot', 'tone', 'reserved']),
  powerDb: finite,
  /** Cells of one repeat. */
  cells: whole,
  streamId: z.string().nullable(),
  map: mapReport.nullable(),
  factors: z.array(factorReport),
  phaseDeg: finite.nullable(),
  continuous: z.boolean().nullable(),
});

const stream = z.strictObject({
  streamId: z.string(),
  name: z.string(),
  source: z.strictObject({
    kind: z.enum(['pn', 'gold', 'zeros', 'ones', 'pattern', 'uploaded']),
    words: z.string().min(1),
    polynomial: z.string().nullable(),
    seed: whole.nullable(),
    inverted: z.boolean().nullable(),
    first32Bits: bitText,
  }),
  fill: z.enum(['running', 'anchored']),
  acrossRepeats: z.enum(['restart', 'continue']),
  /** What the payload file holds: repeats, bits and how many of them are ones; no file for a stream without cells. */
  fileName: z.string().nullable(),
  repeats: whole,
  bits: whole,
  ones: whole,
});

const marker = z.strictObject({
  marker: whole,
  name: z.string(),
  at: z.enum(['file', 'repeat', 'symbol']),
  symbol: whole.nullable(),
  offsetSamples: z.int(),
  lengthSamples: whole,
  /** Marks after joining those that touch, in the whole file; the first 4096 of them listed. */
  rangeCount: whole,
  ranges: z.array(z.strictObject({ startSample: whole, lengthSamples: whole })).max(4096),
});

const evm = { cells: whole, evmPercent: finite, evmDb: levelDb };

const proof = z.strictObject({
  samplesRead: whole,
  wordsCompared: whole,
  wordsDifferent: whole,
  ...evm,
  recipe: z.strictObject({
    cells: z.string().min(1),
    channel: z.string().min(1),
    phaseTracking: z.string().min(1),
    window: z.string().min(1),
    bias: z.string().min(1),
  }),
  inks: z.array(z.strictObject({ inkId: z.string(), name: z.string(), ...evm })),
  /** The strongest null line of the file's words against the mean used cell. */
  worstUnpaintedDbc: levelDb,
  worstUnpaintedSubcarrier: z.int().nullable(),
});

const reductionReport = z.strictObject({
  kind: z.enum(['clipAndFilter', 'toneReservation']),
  targetPaprDb: finite,
  reachedPaprDb: finite,
  passes: whole,
  evmDb: levelDb,
  evmGainFittedDb: levelDb,
  meanPowerChangeDb: finite,
});

/** The pack's own description; keys in this order. Figures follow the signal conventions of lib/synth. */
export const manifestSchema = z
  .strictObject({
    format: z.literal('combwright.manifest'),
    version: z.literal(1),
    packKey: digest,
    state: z.enum(['draft', 'released']),
    edition: z.int().min(1).nullable(),
    digests,
    files: z.array(file),
    clock,
    samples,
    word,
    levels,
    papr,
    symbols: z.array(symbol),
    ramp,
    transform,
    inks: z.array(ink),
    streams: z.array(stream),
    markers: z.array(marker),
    proof,
    peakReduction: reductionReport.nullable(),
    safety: z.array(z.string().min(1)),
  })
  .meta({ id: 'Manifest' });

export type Manifest = z.infer<typeof manifestSchema>;
