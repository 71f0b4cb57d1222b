import { StyleSheet, View } from 'react-native';
import { Text } from '@/components/ui/Text';
import { formatInteger } from '@/lib/drawing/quantities';
import { inkWord } from '@/lib/drawing/inkStyle';
import type { WaveformContent } from '@/lib/synth';
import { InkSwatch } from './InkSwatch';

/** Cells of each ink, counted from the runs. */
export function cellsOfInks(content: WaveformContent): number[] {
  const rows = content.grid.rows.map((row) => {
    const counts = new Map<number, number>();
    for (let i = 0; i < row.length; i += 2) counts.set(row[i + 1]!, (counts.get(row[i + 1]!) ?? 0) + row[i]!);
    return counts;
  });
  const cells = content.tray.map(() => 0);
  for (const row of content.grid.rowOfSymbol) rows[row]!.forEach((count, ink) => (cells[ink]! += count));
  return cells;
}

/** The inks of a waveform with their cells; null and unused inks are left out. */
export function TrayList({ content }: { content: WaveformContent }) {
  const cells = cellsOfInks(content);
  return (
    <View role="list" aria-label="Inks" style={styles.list}>
      {content.tray.map((ink, i) =>
        i === 0 || cells[i] === 0 ? null : (
          <View key={ink.inkId} role="listitem" style={styles.ink}>
            <InkSwatch ink={ink} />
            <Text variant="small">
              <Text variant="small" weight={600} tone="strong">
                {ink.name}
              </Text>
              {ink.name.toLowerCase() === inkWord(ink).toLowerCase() ? ' ' : ` ${inkWord(ink)} `}
              <Text variant="figureSmall" tone="quiet">
                {formatInteger(cells[i]!)}
              </Text>
            </Text>
          </View>
        ),
      )}
    </View>
  );
}

const styles = StyleSheet.create({
  list: { flexDirection: 'row', flexWrap: 'wrap', gap: 12, columnGap: 20 },
  ink: { flexDirection: 'row', alignItems: 'center', gap: 8 },
});
