import { bytesPerWord, freeMarkerBits, offsetOf, shiftBits, type BenchContent } from '@/lib/synth';

const hexBytes = (value: number, count: number, little: boolean): string => {
  const hex = value
    .toString(16)
    .toUpperCase()
    .padStart(2 * count, '0');
  const bytes = Array.from({ length: count }, (_, i) => hex.slice(2 * i, 2 * i + 2));
  return (little ? bytes.reverse() : bytes).join(' ');
};

/** Which bits hold which markers, null where none do. */
export function markerBitWords(bench: BenchContent): string | null {
  if (bench.markers.packing !== 'lowBits') return null;
  const free = freeMarkerBits(bench) / 2;
  const range = (from: number) =>
    free === 1 ? `bit 0 is marker ${from}` : `bits 0 to ${free - 1} are markers ${from} to ${from + free - 1}`;
  return `low bits: in the first word of a sample ${range(0)}, in the second ${range(free)}`;
}

/** I and Q as they follow each other, or lie apart. */
function orderWords(bench: BenchContent): string {
  const [first, second] = bench.swapIq ? ['Q', 'I'] : ['I', 'Q'];
  const order =
    bench.layout === 'split'
      ? `${first} in the file that ends in -i, ${second} in the one that ends in -q`
      : bench.container === 'csv'
        ? `columns ${first},${second}`
        : `${first}0 ${second}0 ${first}1 ${second}1 …`;
  return `${order}${bench.negateQ ? ', Q negated' : ''}`;
}

const containerWords: Record<BenchContent['container'], string> = {
  raw: '',
  wav: '; behind a WAV header, two channels',
  npy: '; behind a .npy header, C order',
  csv: '; a header line, dots, lines end with LF, all as long as each other',
};

function numberWords(bench: BenchContent): string {
  const little = bench.byteOrder === 'little';
  const endian = little ? 'little-endian' : 'big-endian';
  if (bench.container === 'csv')
    return 'decimal numbers of single precision, full scale 1.0: the value 0.5 is stored +5.00000000e-01';
  if (bench.word === 'float32')
    return `32-bit floats (IEEE 754), ${endian}: the value 1 is stored ${little ? '00 00 80 3F' : '3F 80 00 00'}`;
  const width = bytesPerWord(bench);
  const stored = (value: number) => hexBytes((value + offsetOf(bench)) << shiftBits(bench), width, little);
  const isOffset = bench.numberFormat === 'offsetBinary';
  const kind = isOffset ? 'unsigned integers, offset binary' : "signed integers, two's complement";
  const inWord = bench.bits === 8 * width ? '' : `, ${bench.bits} bits aligned to the ${bench.align}`;
  const zero = isOffset ? `0 is stored ${stored(0)}, ` : '';
  return `${8 * width}-bit ${kind}${inWord}${width === 1 ? '' : `, ${endian}`}: ${zero}the value 1 is stored ${stored(1)}`;
}

/** The word layout in words and bytes, as it stands in README, manifest and card. */
export function wordWords(bench: BenchContent): string {
  const markers = markerBitWords(bench);
  const parts = [`${numberWords(bench)}; ${orderWords(bench)}${containerWords[bench.container]}`];
  if (markers !== null) parts.push(markers);
  return parts.join('; ');
}
