import type { BenchContent } from '@/lib/synth';
import { wordWords } from './wordWords.ts';

export interface ReadmeInput {
  baseName: string;
  stateWords: string;
  versions: string;
  vectorName: string;
  vectorBytes: number;
  vectorSha256Hex: string;
  metaWritten: boolean;
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
}

/** Lines around the reader, so that a person and a test can cut it out. */
export const readerBegins = '# ---- reader.py begins ----';
export const readerEnds = '# ---- reader.py ends ----';

/** NumPy's name of the vector's words. */
export function numpyWord(bench: BenchContent): string {
  if (bench.word === 'int8') return 'i1';
  return (bench.byteOrder === 'little' ? '<' : '>') + (bench.word === 'float32' ? 'f4' : 'i2');
}

function reader(input: ReadmeInput): string {
  const { bench } = input;
  const shift = bench.word === 'int16' && bench.align === 'left' ? 16 - bench.bits : 0;
  const [i, q] = bench.swapIq ? [1, 0] : [0, 1];
  return `${readerBegins}
import json, numpy as np
m = json.load(open('manifest.json'))
d = json.load(open('document.combwright.json'))['content']
N, L, M = d['fftSize'], d['symbolCount'], d['oversampling']
raw = np.fromfile('${input.vectorName}', '${numpyWord(bench)}').astype(float) / ${shift === 0 ? 'm' : `2**${shift} / m`}['word']['scaleLsbPerUnit']
x = raw[${i}::2] ${bench.negateQ ? '-' : '+'} 1j * raw[${q}::2]
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
found, meant = np.concatenate(found), np.fromfile('reference.cf32', '<c8')
evm = np.sqrt(np.sum(np.abs(found - meant) ** 2) / np.sum(np.abs(meant) ** 2))
print('EVM %.2f dB over %d cells' % (20 * np.log10(evm), meant.size))
${readerEnds}`;
}

/** README.txt: how a stranger reads and demodulates the vector without this program. */
export function readmeText(input: ReadmeInput): string {
  const rest = [
    `  ${input.vectorName}  the vector`,
    ...(input.metaWritten ? [`  ${input.baseName}.sigmf-meta  the same in SigMF's words`] : []),
    ...(input.markersName ? [`  ${input.markersName}  markers, one byte a sample, bit m is marker m`] : []),
    ...input.payloadNames.map((name) => `  ${name}  bits of the stream's cells in fill order, most significant first`),
    `  reference.cf32  values of all cells that are not null, ${repeatsWords(input.referenceRepeats)}: symbols in order,`,
    '    subcarriers upwards, complex 32-bit floats, little-endian',
    ...(input.cellsWritten
      ? ['  cells.csv  every cell that is not null: symbol, subcarrier, ink, stream, its first bit in the payload file']
      : []),
    '  manifest.json  every figure, digest and position',
    '  document.combwright.json, bench.json  what it was made from',
    '  level-card.txt  what to set, what not to exceed',
  ];
  return `${input.baseName}
${input.stateWords}
${input.versions}

This vector makes radio energy. Read level-card.txt before a generator's output is switched on.

The vector
  file      ${input.vectorName}, ${input.vectorBytes} bytes
  SHA-256   ${input.vectorSha256Hex}
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

const repeatsWords = (repeats: number): string => (repeats === 1 ? '1 repeat' : `${repeats} repeats`);
