import type { BenchContent } from '@/lib/synth';

/** The word layout in words and bytes, as it stands in README, manifest and card. */
export function wordWords(bench: BenchContent): string {
  const pairs = bench.swapIq ? 'Q0 I0 Q1 I1 …' : 'I0 Q0 I1 Q1 …';
  const order = `${pairs}${bench.negateQ ? ', Q negated' : ''}`;
  const little = bench.byteOrder === 'little';
  const endian = little ? 'little-endian' : 'big-endian';
  if (bench.word === 'float32')
    return `32-bit floats (IEEE 754), ${endian}: the value 1 is stored ${little ? '00 00 80 3F' : '3F 80 00 00'}; ${order}`;
  if (bench.word === 'int8') return `8-bit signed integers, two's complement: the value 1 is stored 01; ${order}`;
  const shift = bench.align === 'left' ? 16 - bench.bits : 0;
  const hex = (1 << shift).toString(16).toUpperCase().padStart(4, '0');
  const bytes = [hex.slice(0, 2), hex.slice(2)];
  const stored = (little ? bytes.reverse() : bytes).join(' ');
  const inWord = bench.bits === 16 ? '' : `, ${bench.bits} bits aligned to the ${bench.align}`;
  return `16-bit signed integers, two's complement${inWord}, ${endian}: the value 1 is stored ${stored}; ${order}`;
}
