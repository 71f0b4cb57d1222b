import { StyleSheet, View } from 'react-native';
import { Text } from '@/components/ui/Text';
import { color } from '@/components/ui/theme';
import { freeMarkerBits, type BenchContent } from '@/lib/synth';
import { hex } from './WordRow';

/** Which bit is which marker: the names of a waveform's own, or of a stand-in. */
function bitLines(bench: BenchContent, names: readonly string[]): string[] {
  const free = freeMarkerBits(bench) / 2;
  return names.map((name, m) => {
    const own = name === `marker ${m + 1}` ? '' : `, ${name}`;
    if (bench.markers.packing === 'bytes') return `bit ${m} is marker ${m + 1}${own}`;
    if (m >= 2 * free) return `marker ${m + 1}${own} finds no free bit`;
    return `bit ${m % free} of a sample’s ${m < free ? 'first' : 'second'} word is marker ${m + 1}${own}`;
  });
}

/** Markers of the first samples: a byte a sample beside the vector, or the low bits of its words. */
export function MarkerRow({
  bench,
  markers,
  names,
  note,
}: {
  bench: BenchContent;
  markers: readonly number[];
  names: readonly string[];
  note: string;
}) {
  if (bench.markers.packing === 'none') return null;
  const inWords = bench.markers.packing === 'lowBits';
  return (
    <View style={styles.all}>
      <Text variant="small">
        <Text variant="small" weight={600} tone="strong">
          Markers
        </Text>{' '}
        {inWords ? 'in the low bits of the words above' : 'beside it, a byte a sample'}
        {note}
      </Text>
      {names.length === 0 ? (
        <Text variant="small" tone="quiet">
          This waveform has none: every bit is 0.
        </Text>
      ) : (
        <Text variant="small" tone="quiet">
          {`${bitLines(bench, names).join('; ')}.`}
        </Text>
      )}
      <View role="img" aria-label={markers.map((byte, i) => `sample ${i}, ${hex(byte)}`).join('; ')} style={styles.row}>
        {markers.map((byte, i) => (
          <View key={i} style={styles.cell}>
            <View style={styles.box}>
              <Text variant="figureSmall" weight={600} tone="strong">
                {hex(byte)}
              </Text>
            </View>
            <Text variant="axis" tone="quiet" style={styles.centre}>
              {i % 4 === 0 ? i : ' '}
            </Text>
          </View>
        ))}
      </View>
    </View>
  );
}

const styles = StyleSheet.create({
  all: { gap: 4 },
  row: { flexDirection: 'row', flexWrap: 'wrap', gap: 2 },
  cell: { width: 24 },
  box: {
    height: 26,
    alignItems: 'center',
    justifyContent: 'center',
    borderWidth: 1,
    borderColor: color.rule.control,
    backgroundColor: color.plot.traceFill,
  },
  centre: { textAlign: 'center' },
});
