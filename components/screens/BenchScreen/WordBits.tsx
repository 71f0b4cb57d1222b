import { StyleSheet, View } from 'react-native';
import { Text } from '@/components/ui/Text';
import { color } from '@/components/ui/theme';
import { shiftBits, type BenchContent } from '@/lib/synth';
import type { ShownWord } from './firstWords';
import { hex, numberOf } from './WordRow';

const ordinals = ['first', 'second', 'third', 'fourth'];

/** Which bits of an integer word hold the number, and what the others are. */
export function bitWords(bench: BenchContent, word: ShownWord): string {
  const width = 8 * word.bytes.length;
  const number = numberOf(bench, word.value);
  if (bench.word === 'float32')
    return `together ${number}: sign in bit 31, exponent in bits 30 to 23, fraction in bits 22 to 0`;
  const isOffset = bench.numberFormat === 'offsetBinary';
  const kind = isOffset ? `offset binary, ${2 ** (bench.bits - 1)} more than the number` : 'two’s complement';
  const free = shiftBits(bench);
  const top = free + bench.bits - 1;
  const sign = isOffset ? '' : `, sign in bit ${top}`;
  const place = bench.bits === width ? '' : `, the number in bits ${top} to ${free}`;
  const rest = free > 0 ? freeWords(bench, free) : bench.bits < width ? restWords(bench, width, isOffset) : '';
  return `together ${number}: ${kind}${place}${sign}${rest}`;
}

const spanOf = (high: number, low: number) => (high === low ? `bit ${low}` : `bits ${high} to ${low}`);

const freeWords = (bench: BenchContent, free: number) =>
  bench.markers.packing === 'lowBits'
    ? `; ${spanOf(free - 1, 0)} hold${free === 1 ? 's' : ''} markers`
    : `; ${spanOf(free - 1, 0)} free, always 0`;

const restWords = (bench: BenchContent, width: number, isOffset: boolean) =>
  `; ${spanOf(width - 1, bench.bits)} ${isOffset ? 'always 0' : 'as the sign'}`;

/** One word as bits, its bytes in file order; bits that are not the number's stand apart. */
export function WordBits({ bench, word }: { bench: BenchContent; word: ShownWord }) {
  const size = word.bytes.length;
  const free = shiftBits(bench);
  const top = bench.word === 'float32' ? 31 : free + bench.bits - 1;
  const isLittle = bench.byteOrder === 'little' || size === 1;
  return (
    <View style={styles.all}>
      <View style={styles.bytes} role="img" aria-label={spokenOf(word, isLittle)}>
        {word.bytes.map((byte, i) => {
          const lowest = 8 * (isLittle ? i : size - 1 - i);
          return (
            <View key={i} style={styles.byte}>
              <Text variant="small" numberOfLines={1}>
                {`${size === 1 ? 'byte' : `${ordinals[i]} byte`} ${hex(byte)}`}
              </Text>
              <View style={styles.bits}>
                {Array.from({ length: 8 }, (_, b) => {
                  const place = lowest + 7 - b;
                  const isOne = ((byte >> (7 - b)) & 1) === 1;
                  const isOwn = place >= free && place <= top;
                  return (
                    <View
                      key={b}
                      style={[
                        styles.bit,
                        isOwn ? (isOne ? styles.one : null) : styles.other,
                        b > 0 ? styles.next : null,
                      ]}
                    >
                      <Text variant="figureSmall" weight={500} tone={isOwn && isOne ? 'onSolid' : 'strong'}>
                        {isOne ? '1' : '0'}
                      </Text>
                    </View>
                  );
                })}
              </View>
              <View style={styles.ends}>
                <Text variant="axis" tone="quiet">
                  {lowest + 7}
                </Text>
                <Text variant="axis" tone="quiet">
                  {lowest}
                </Text>
              </View>
            </View>
          );
        })}
      </View>
      <Text variant="small">{bitWords(bench, word)}</Text>
    </View>
  );
}

function spokenOf(word: ShownWord, isLittle: boolean): string {
  const size = word.bytes.length;
  return word.bytes
    .map((byte, i) => {
      const lowest = 8 * (isLittle ? i : size - 1 - i);
      return `byte ${hex(byte)}, bits ${lowest + 7} to ${lowest}: ${byte.toString(2).padStart(8, '0')}`;
    })
    .join('; ');
}

const styles = StyleSheet.create({
  all: { gap: 6 },
  bytes: { flexDirection: 'row', flexWrap: 'wrap', columnGap: 24, rowGap: 8 },
  byte: { width: 8 * 24 + 2, gap: 2 },
  bits: { flexDirection: 'row', borderWidth: 1, borderColor: color.rule.control },
  bit: { width: 24, height: 28, alignItems: 'center', justifyContent: 'center', backgroundColor: color.surface.raised },
  next: { borderLeftWidth: 1, borderLeftColor: color.rule.control },
  one: { backgroundColor: color.plot.point },
  // no part of the number: free, a marker, or a copy of the sign
  other: { backgroundColor: color.surface.sunken },
  ends: { flexDirection: 'row', justifyContent: 'space-between', paddingHorizontal: 8 },
});
