import { Pressable, ScrollView, StyleSheet, View } from 'react-native';
import { Text } from '@/components/ui/Text';
import { color } from '@/components/ui/theme';
import type { QuantityText } from '@/lib/drawing/quantities';
import { formatNumber } from '@/lib/drawing/quantities';
import type { LevelReference } from '@/lib/synth';
import { streamText } from './inkWords';
import { numberWords } from './numberWords';
import type { OpenSheet } from './sheets';
import type { TableContext } from './tableContext';
import { useIntent, useSettings } from './useEditorState';

interface StripWord {
  name: string;
  value: QuantityText;
  sheet: OpenSheet;
}

const REFERENCES: Record<LevelReference, string> = {
  interpolatedPeak: 'peak',
  samplePeak: 'sample peak',
  componentPeak: 'component peak',
  rms: 'RMS',
};

const bare = (value: string, unit = ''): QuantityText => ({ value, unit });

/** All numbers of the waveform as words that open their field, in the order of the strip. */
export function useStripWords({ editor }: Pick<TableContext, 'editor'>): StripWord[] {
  const settings = useSettings(editor);
  const intent = useIntent(editor);
  const { level, markers, streams } = settings;
  const stream = streams[0];
  return [
    ...numberWords.map((word) => ({
      name: word.name,
      value: word.read(settings),
      sheet: { kind: 'number', id: word.id } as const,
    })),
    {
      name: 'Level',
      value: bare(`${REFERENCES[level.reference]} −${formatNumber(level.headroomDb, 2)}`, 'dB'),
      sheet: { kind: 'level' },
    },
    {
      name: 'Markers',
      value: bare(markers.length === 0 ? 'none' : String(markers.length)),
      sheet: { kind: 'markers' },
    },
    {
      name: 'Payload',
      value: bare(stream ? streamText(stream) + (streams.length > 1 ? ` + ${streams.length - 1}` : '') : 'none'),
      sheet: { kind: 'payload', place: 0 },
    },
    {
      name: 'Device',
      value: intent.outputRmsDbm === null ? bare('not set') : bare(formatNumber(intent.outputRmsDbm, 2), 'dBm'),
      sheet: { kind: 'device' },
    },
  ];
}

/** One line of numbers; it scrolls sideways where it does not fit. */
export function NumbersStrip({ table }: { table: TableContext }) {
  const words = useStripWords(table);
  const { open, sheet } = table;
  return (
    <View role="region" aria-label="Numbers" style={styles.strip}>
      <ScrollView horizontal showsHorizontalScrollIndicator={false} contentContainerStyle={styles.row}>
        {words.map((word, i) => {
          const isOpen = sheet !== null && JSON.stringify(sheet) === JSON.stringify(word.sheet);
          const text = word.value.unit ? `${word.value.value} ${word.value.unit}` : word.value.value;
          return (
            <Pressable
              key={word.name}
              role="button"
              aria-label={`${word.name}, ${text}`}
              aria-expanded={isOpen}
              onPress={() => open(isOpen ? null : word.sheet)}
              style={(state) => [
                styles.word,
                i === 0 ? styles.first : null,
                {
                  backgroundColor: isOpen
                    ? color.surface.selected
                    : (state as { hovered?: boolean }).hovered
                      ? color.surface.hover
                      : 'transparent',
                },
              ]}
            >
              <Text variant="label" tone="quiet">
                {word.name}
              </Text>
              <Text variant="figureSmall" weight={500} tone="strong" style={styles.value} numberOfLines={1}>
                {text}
              </Text>
            </Pressable>
          );
        })}
      </ScrollView>
    </View>
  );
}

const styles = StyleSheet.create({
  strip: {
    height: 38,
    borderTopWidth: 1,
    borderTopColor: color.rule.hair,
    borderBottomWidth: 1,
    borderBottomColor: color.rule.line,
    backgroundColor: color.surface.sheet,
  },
  row: { paddingHorizontal: 20, minHeight: 36 },
  word: {
    flexDirection: 'row',
    alignItems: 'center',
    gap: 8,
    paddingHorizontal: 14,
    borderRightWidth: 1,
    borderRightColor: color.rule.hair,
  },
  first: { paddingLeft: 0 },
  value: {
    borderBottomWidth: 1,
    borderBottomColor: color.rule.control,
    borderStyle: 'dotted',
    lineHeight: 17,
  },
});
