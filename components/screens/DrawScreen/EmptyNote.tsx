import { StyleSheet, View } from 'react-native';
import type { TableLayout } from '@/components/canvas/CanvasGate';
import { Text } from '@/components/ui/Text';
import { color } from '@/components/ui/theme';
import { useLive } from './liveReader';
import type { TableContext } from './tableContext';

/** Over a grid that holds nothing yet: what to do. It takes no pointer, so that the first stroke may begin under it. */
export function EmptyNote({ table, layout }: { table: TableContext; layout: TableLayout }) {
  const isEmpty = useLive(table.live, ({ result, isStale }) => result?.worstSymbol === null && !isStale);
  if (!isEmpty) return null;
  const { x, y, width, height } = layout.grid;
  return (
    <View style={[styles.place, { left: x, top: y, width, height }]}>
      <View style={styles.words}>
        <Text tone="quiet">Paint a cell to see the waveform.</Text>
      </View>
    </View>
  );
}

const styles = StyleSheet.create({
  place: { position: 'absolute', alignItems: 'center', justifyContent: 'center', pointerEvents: 'none' },
  words: { backgroundColor: color.surface.sheet, paddingHorizontal: 12, paddingVertical: 6 },
});
