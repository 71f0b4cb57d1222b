import { Pressable, StyleSheet, View } from 'react-native';
import { GridPicture } from '@/components/ui/GridPicture';
import { Text } from '@/components/ui/Text';
import { color } from '@/components/ui/theme';
import { gridPicture } from '@/lib/drawing/gridPicture';
import { formatFraction } from '@/lib/drawing/quantities';
import type { Start } from './starts';

/** A group of starts: picture, name and citation, size and spacing. */
export function StartList({
  title,
  starts,
  chosenId,
  onChoose,
}: {
  title: string;
  starts: readonly Start[];
  chosenId: string;
  onChoose: (start: Start) => void;
}) {
  return (
    <View style={styles.group}>
      <Text variant="label" tone="quiet" style={styles.title}>
        {title}
      </Text>
      <View role="radiogroup" aria-label={title} style={styles.list}>
        {starts.map((start) => (
          <Entry
            key={start.startId}
            start={start}
            chosen={start.startId === chosenId}
            onPress={() => onChoose(start)}
          />
        ))}
      </View>
    </View>
  );
}

function Entry({ start, chosen, onPress }: { start: Start; chosen: boolean; onPress: () => void }) {
  const { content } = start.document;
  const spacing = formatFraction(content.subcarrierSpacingHz);
  return (
    <Pressable
      role="radio"
      aria-checked={chosen}
      onPress={onPress}
      style={(state) => [
        styles.entry,
        chosen ? styles.chosen : null,
        !chosen && (state as { hovered?: boolean }).hovered ? styles.hovered : null,
      ]}
    >
      <View style={styles.picture}>
        <GridPicture picture={gridPicture(content, 144, 21)} width="100%" height={42} />
      </View>
      <View style={styles.words}>
        <Text variant="bodyStrong" tone={chosen ? 'onSelected' : 'strong'} numberOfLines={1}>
          {start.title}
        </Text>
        <Text variant="small" tone={chosen ? 'onSelected' : 'quiet'} numberOfLines={1}>
          {start.source}
        </Text>
      </View>
      <View style={styles.numbers}>
        <Text variant="figureSmall" weight={600} tone={chosen ? 'onSelected' : 'strong'}>
          {`${content.fftSize} · ${spacing.value} ${spacing.unit}`}
        </Text>
        <Text variant="small" tone={chosen ? 'onSelected' : 'quiet'}>
          {`${content.symbolCount} symbols`}
        </Text>
      </View>
    </Pressable>
  );
}

const styles = StyleSheet.create({
  group: { marginBottom: 20 },
  title: { paddingBottom: 6, borderBottomWidth: 1.5, borderBottomColor: color.rule.strong },
  list: {},
  entry: {
    minHeight: 60,
    flexDirection: 'row',
    alignItems: 'center',
    gap: 14,
    paddingHorizontal: 8,
    paddingVertical: 8,
    backgroundColor: color.surface.sheet,
    borderBottomWidth: 1,
    borderBottomColor: color.rule.hair,
    borderLeftWidth: 3,
    borderLeftColor: 'transparent',
  },
  chosen: { backgroundColor: color.surface.selected, borderLeftColor: color.ink.strong },
  hovered: { backgroundColor: color.surface.hover },
  picture: { width: 112, flexShrink: 0 },
  words: { flexGrow: 1, flexShrink: 1, minWidth: 0 },
  numbers: { alignItems: 'flex-end', flexShrink: 0 },
});
