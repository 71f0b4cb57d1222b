import { npyType, offsetOf, shiftBits, type BenchContent } from '@/lib/synth';
import { wordWords } from './wordWords.ts';

export interface ReadmeInput {
  baseName: string;
  stateWords: string;
  /** What to see of a sidedness waveform, null for any other. */
  sidednessWords: string | null;
  versions: string;
  /** One, or I's and Q's. */
  vectors: { name: string; bytes: number; sha256: string }[];
  /** Of one file; of two: of I's bytes with Q's behind them. */
  vectorSha256Hex: string;
  /** Bytes before a file's first sample. */
  headBytes: number;
  /** Why there is no SigMF metadata; null where there is. */
  metaMissing: string | null;
  markersName: string | null;
  bench: BenchContent;
  /** LSB of the b-bit number for an amplitude of 1. */
  scale: number;
  samples: number;
  clockWords: string;
  mode: 'loop' | 'burst';
  repeats: number;
  /** Repeats that payload and reference files hold. */
  referenceRepeats: number;
  cellsWritten: boolean;
  payloadNames: string[];
  frequencyOffsetHz: number;
  saturatedWords: string | null;
  /** Values as they are sent, where a lowered peak changed them. */
  sentReferenceName: string | null;
}

/** Lines around the reader, so that a person and a test can cut it out. */
export const readerBegins = '# ---- reader.py begins ----';
export const readerEnds = '# ---- reader.py ends ----';

/** NumPy's name of the vector's words. */
export function numpyWord(bench: BenchContent): string {
  const order = bench.byteOrder === 'little' ? '<' : '>';
  if (bench.word === 'float32') return `${order}f4`;
  const kind = bench.numberFormat === 'offsetBinary' ? 'u' : 'i';
  return bench.word === 'int8' ? `${kind}1` : `${order}${kind}2`;
}

/** One file as an array of two columns, or of one where I and Q lie apart. */
function loadWords(input: ReadmeInput, name: string): string {
  const { bench } = input;
  if (bench.container === 'csv') return `np.loadtxt('${name}', delimiter=',', skiprows=1, ndmin=2)`;
  if (bench.container === 'npy')
    return `np.load('${name}')${npyType(bench).endsWith('c8') ? `.view('${numpyWord(bench)}')` : ''}`;
  const offset = input.headBytes > 0 ? `, offset=${input.headBytes}` : '';
  return `np.fromfile('${name}', '${numpyWord(bench)}'${offset})`;
}

/** From stored numbers to those that were meant. */
function meantWords(bench: BenchContent): string {
  if (bench.word === 'float32') return 'raw';
  const shift = shiftBits(bench);
  const shifted = shift === 0 ? 'raw.astype(int)' : `(raw.astype(int) >> ${shift})`;
  return offsetOf(bench) === 0 ? shifted : `(${shifted} - ${offsetOf(bench)})`;
}

function reader(input: ReadmeInput): string {
  const { bench, vectors } = input;
  const [i, q] = bench.swapIq ? [1, 0] : [0, 1];
  const loaded = vectors.map(({ name }) => loadWords(input, name));
  return `${readerBegins}
import json, numpy as np
m = json.load(open('manifest.json'))
d = json.load(open('document.combwright.json'))['content']
N, L, M = d['fftSize'], d['symbolCount'], d['oversampling']
raw = ${loaded.length === 1 ? `${loaded[0]}.reshape(-1, 2)` : `np.stack([${loaded.map((one) => `${one}.ravel()`).join(',\n                ')}], 1)`}
w = ${meantWords(bench)} / m['word']['scaleLsbPerUnit']
x = w[:, ${i}] ${bench.negateQ ? '-' : '+'} 1j * w[:, ${q}]
fs = N * M * d['subcarrierSpacingHz'][0] / d['subcarrierSpacingHz'][1]
x *= np.exp(-2j * np.pi * np.mod(np.arange(x.size) * (d['frequencyOffsetHz'] / fs), 1))
used = np.array([ink['role'] != 'null' for ink in d['tray']])
rows = [used[np.repeat(row[1::2], row[0::2])] for row in d['grid']['rows']]
k = np.arange(N) - N // 2
step = m['samples']['repeatSamples']
found = []
for r in range(${input.referenceRepeats}):
    for l in range(L):
        at = r * step + m['symbols'][l]['usefulStartSample']
        a = np.fft.fft(x[at:at + M * N]) / (M * np.sqrt(N))
        found.append(a[k % (M * N)][rows[d['grid']['rowOfSymbol'][l]]])
found, meant = np.concatenate(found), np.fromfile('${input.sentReferenceName ?? 'reference.cf32'}', '<c8')
evm = np.sqrt(np.sum(np.abs(found - meant) ** 2) / np.sum(np.abs(meant) ** 2))
print('EVM %.2f dB over %d cells' % (20 * np.log10(evm), meant.size))
${readerEnds}`;
}

/** README.txt: how a stranger reads and demodulates the vector without this program. */
export function readmeText(input: ReadmeInput): string {
  const rest = [
    ...input.vectors.map(({ name }, i) => `  ${name}  the vector${vectorPart(input, i)}`),
    input.metaMissing === null
      ? `  ${input.baseName}.sigmf-meta  the same in SigMF's words`
      : `  no SigMF metadata: ${input.metaMissing}`,
    ...(input.markersName ? [`  ${input.markersName}  markers, one byte a sample, bit m is marker m`] : []),
    ...input.payloadNames.map((name) => `  ${name}  bits of the stream's cells in fill order, most significant first`),
    `  reference.cf32  values of all cells that are not null, ${repeatsWords(input.referenceRepeats)}: symbols in order,`,
    '    subcarriers upwards, complex 32-bit floats, little-endian',
    ...(input.sentReferenceName
      ? [
          `  ${input.sentReferenceName}  the same values as they are sent: the peak was lowered, and the reader compares with these`,
        ]
      : []),
    ...(input.cellsWritten
      ? ['  cells.csv  every cell that is not null: symbol, subcarrier, ink, stream, its first bit in the payload file']
      : []),
    '  manifest.json  every figure, digest and position',
    '  document.combwright.json, bench.json  what it was made from',
    '  level-card.txt  what to set, what not to exceed',
  ];
  return `${input.baseName}
${input.stateWords}${input.sidednessWords === null ? '' : `\n${input.sidednessWords}`}
${input.versions}

This vector makes radio energy. Read level-card.txt before a generator's output is switched on.

The vector
${fileLines(input).join('\n')}
  words     ${wordWords(input.bench)}
  samples   ${input.samples} (I/Q pairs), played as a ${input.mode}, ${repeatsWords(input.repeats)}
  clock     ${input.clockWords}
  scale     an amplitude of 1 is ${input.scale}${input.bench.word === 'float32' ? '' : ' steps'}${input.saturatedWords === null ? '' : `\n  saturated ${input.saturatedWords}`}

The files
${rest.join('\n')}

How to demodulate it
  The signal is x = I + jQ. Symbol l of the frame is x[n] = 1/sqrt(N) * sum over k of a(k) * exp(+j*2*pi*k*n/(M*N)),
  with n = 0 at its useful start (manifest.json, symbols) and k from -floor(N/2) upwards, 0 at the carrier.
  So: undo the frequency offset of ${input.frequencyOffsetHz} Hz (phase 0 at the file's first sample), take M*N samples from
  the useful start, transform, divide by M*sqrt(N), and pick the cells that are not null.
  The same in Python with NumPy; unpack the zip, go into the folder, run it:

${reader(input)}

Nothing here replaces the instrument's manual, local rules or licensed practice.
`;
}

/** What a generator takes a file of its own for. */
const vectorPart = ({ vectors }: ReadmeInput, i: number): string =>
  vectors.length === 1 ? '' : `, what the generator takes as ${i === 0 ? 'I' : 'Q'}`;

function fileLines({ vectors, vectorSha256Hex, headBytes }: ReadmeInput): string[] {
  const head = headBytes > 0 ? `, ${headBytes} of them before the first sample` : '';
  const lines = vectors.flatMap(({ name, bytes, sha256 }) => [
    `  file      ${name}, ${bytes} bytes${head}`,
    `  SHA-256   ${sha256}`,
  ]);
  if (vectors.length > 1) lines.push(`  together  ${vectorSha256Hex}, the first file with the second behind it`);
  return lines;
}

const repeatsWords = (repeats: number): string => (repeats === 1 ? '1 repeat' : `${repeats} repeats`);
