import { StyleSheet, View } from 'react-native';
import { FigureCell } from '@/components/ui/Figure';
import { color } from '@/components/ui/theme';

/** Figures as ruled cells in a strong frame. */
export function FigureBlock({
  figures,
  columns,
}: {
  figures: readonly { name: string; value: string; unit: string }[];
  columns: number;
}) {
  return (
    <View style={styles.block}>
      {figures.map((figure, i) => (
        <FigureCell
          key={figure.name}
          label={figure.name}
          value={figure.value}
          {...(figure.unit ? { unit: figure.unit } : {})}
          style={{
            ...styles.cell,
            width: `${100 / columns}%`,
            borderRightWidth: (i + 1) % columns === 0 ? 0 : 1,
            borderBottomWidth: i >= figures.length - (figures.length % columns || columns) ? 0 : 1,
          }}
        />
      ))}
    </View>
  );
}

const styles = StyleSheet.create({
  block: {
    flexDirection: 'row',
    flexWrap: 'wrap',
    borderWidth: 1.5,
    borderColor: color.rule.strong,
    backgroundColor: color.surface.raised,
  },
  cell: {
    borderColor: color.rule.line,
    paddingHorizontal: 12,
    overflow: 'hidden',
  },
});
