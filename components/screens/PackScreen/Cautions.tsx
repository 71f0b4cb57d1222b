import { StyleSheet, View } from 'react-native';
import { Button } from '@/components/ui/Button';
import { Sheet } from '@/components/ui/overlay';
import { Text } from '@/components/ui/Text';
import { color } from '@/components/ui/theme';
import type { Caution } from '@/lib/synth';

/** Under the card a point has two lines at most; the list of all has the whole of it. */
const BRIEF: Record<number, string> = {
  3: 'Output off while a file, level or frequency changes. Start low and raise: a new file has a new peak.',
};

function Point({ point, brief = false }: { point: Caution; brief?: boolean }) {
  return (
    <View role="listitem" style={styles.point}>
      <Text variant="figureSmall" weight={600} tone={point.severe ? 'danger' : 'warning'} style={styles.number}>
        {point.number}
      </Text>
      <Text
        variant="small"
        weight={point.severe ? 600 : 400}
        tone={point.severe ? 'danger' : 'body'}
        style={styles.words}
      >
        {(brief ? BRIEF[point.number] : null) ?? point.text}
      </Text>
    </View>
  );
}

/** Points 3 and 4 under the card; 1 and 2 are the card itself. */
export function CautionStrip({ points, onAll }: { points: readonly Caution[]; onAll: () => void }) {
  return (
    <View style={styles.strip}>
      <View role="list" aria-label="First cautions">
        {points
          .filter((point) => point.number === 3 || point.number === 4)
          .map((point) => (
            <Point key={point.number} point={point} brief />
          ))}
      </View>
      <View style={styles.all}>
        <Button kind="plain" onPress={onAll}>
          {`All cautions, ${points.length}`}
        </Button>
      </View>
    </View>
  );
}

export function CautionsSheet({ points, onClose }: { points: readonly Caution[]; onClose: () => void }) {
  return (
    <Sheet title={`All cautions, ${points.length}`} onClose={onClose}>
      <View role="list" style={styles.list}>
        {points.map((point) => (
          <Point key={point.number} point={point} />
        ))}
      </View>
    </Sheet>
  );
}

const styles = StyleSheet.create({
  strip: {
    backgroundColor: color.warning.wash,
    borderLeftWidth: 3,
    borderLeftColor: color.warning.rule,
    paddingTop: 8,
    paddingHorizontal: 13,
  },
  point: { flexDirection: 'row', gap: 8, marginBottom: 4 },
  number: { width: 20, flexShrink: 0 },
  words: { flex: 1, minWidth: 0 },
  all: { alignItems: 'flex-start', marginLeft: -8 },
  list: { gap: 8 },
});
