import { StyleSheet, TextInput, View } from 'react-native';
import { Button } from '@/components/ui/Button';
import { Text, textStyle } from '@/components/ui/Text';
import { color } from '@/components/ui/theme';
import { useBreakpoint } from '@/components/ui/useBreakpoint';
import type { BareGridText } from './starts';

/** "Grid of [2048] points, [15 kHz] apart, [14] symbols, prefix [144]": the blanks are the form. */
export function BareGridSentence({
  text,
  onChange,
  onChoose,
  error,
  chosen,
}: {
  text: BareGridText;
  onChange: (text: BareGridText) => void;
  onChoose: () => void;
  error: string | null;
  chosen: boolean;
}) {
  const touch = useBreakpoint() === 'phone';
  const blank = (key: keyof BareGridText, label: string, width: number) => (
    <TextInput
      aria-label={label}
      value={text[key]}
      onChangeText={(value) => onChange({ ...text, [key]: value })}
      onSubmitEditing={onChoose}
      style={[textStyle('figureSmall', 500), styles.blank, { width, height: touch ? 44 : 28 }]}
    />
  );
  return (
    <View style={styles.group}>
      <Text variant="label" heading={2} tone="quiet" style={styles.title}>
        A bare grid
      </Text>
      <View style={[styles.sentence, chosen ? styles.chosen : null]}>
        <Text>Grid of</Text>
        {blank('fftSize', 'Points', 54)}
        <Text>points,</Text>
        {blank('spacing', 'Spacing', 76)}
        <Text>apart,</Text>
        {blank('symbols', 'Symbols', 46)}
        <Text>symbols, prefix</Text>
        {blank('prefix', 'Prefix', 48)}
        <Button kind="plain" onPress={onChoose}>
          Choose
        </Button>
      </View>
      {error ? (
        <Text variant="small" tone="danger" role="alert">
          {error}
        </Text>
      ) : null}
    </View>
  );
}

const styles = StyleSheet.create({
  group: { marginBottom: 20 },
  title: { paddingBottom: 6, borderBottomWidth: 1.5, borderBottomColor: color.rule.strong },
  sentence: {
    flexDirection: 'row',
    flexWrap: 'wrap',
    alignItems: 'center',
    gap: 6,
    padding: 8,
    backgroundColor: color.surface.sheet,
    borderBottomWidth: 1,
    borderBottomColor: color.rule.hair,
    borderLeftWidth: 3,
    borderLeftColor: 'transparent',
  },
  chosen: { backgroundColor: color.surface.selected, borderLeftColor: color.ink.strong },
  blank: {
    borderWidth: 1,
    borderColor: color.rule.control,
    borderRadius: 3,
    paddingHorizontal: 7,
    textAlign: 'right',
    backgroundColor: color.surface.raised,
    color: color.ink.strong,
  },
});
