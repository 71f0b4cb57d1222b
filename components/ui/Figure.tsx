import { StyleSheet, View, type ViewStyle } from 'react-native';
import { Text, type TextVariant } from './Text';
import { color } from './theme';

/** A value and its unit, apart: "30.72" "MHz". */
export function Figure({
  value,
  unit,
  variant = 'figure',
  stale,
  tone = 'strong',
}: {
  value: string;
  unit?: string;
  variant?: Extract<TextVariant, 'figure' | 'figureSmall' | 'figureLarge' | 'figureHero'>;
  stale?: boolean;
  tone?: 'strong' | 'body' | 'danger' | 'quiet';
}) {
  return (
    <Text variant={variant} tone={stale ? 'disabled' : tone} numberOfLines={1}>
      {value}
      {unit ? (
        <Text
          variant={variant === 'figureHero' || variant === 'figureLarge' ? 'body' : 'label'}
          weight={400}
          tone="quiet"
        >
          {` ${unit}`}
        </Text>
      ) : null}
    </Text>
  );
}

/** Label over figure, for cells of a ruled block. */
export function FigureCell({
  label,
  value,
  unit,
  stale,
  style,
}: {
  label: string;
  value: string;
  unit?: string;
  stale?: boolean;
  style?: ViewStyle;
}) {
  return (
    <View style={[styles.cell, style]}>
      <Text variant="label" weight={400} tone="quiet" numberOfLines={1}>
        {label}
      </Text>
      <Figure value={value} {...(unit ? { unit } : {})} {...(stale ? { stale } : {})} />
    </View>
  );
}

/** Name, value, unit and a verdict in words. */
export function FigureRow({
  name,
  value,
  unit,
  verdict,
  verdictTone = 'success',
}: {
  name: string;
  value: string;
  unit?: string;
  verdict?: string;
  verdictTone?: 'success' | 'danger' | 'quiet';
}) {
  return (
    <View style={styles.row}>
      <Text variant="small" style={styles.name} numberOfLines={2}>
        {name}
      </Text>
      <Figure value={value} variant="figureSmall" tone="body" {...(unit ? { unit } : {})} />
      {verdict ? (
        <Text variant="small" weight={600} tone={verdictTone} style={styles.verdict}>
          {verdict}
        </Text>
      ) : null}
    </View>
  );
}

const styles = StyleSheet.create({
  cell: { paddingVertical: 6, paddingHorizontal: 8, gap: 1, minWidth: 0 },
  row: {
    minHeight: 36,
    flexDirection: 'row',
    alignItems: 'center',
    gap: 12,
    borderBottomWidth: 1,
    borderBottomColor: color.rule.hair,
    paddingVertical: 6,
  },
  name: { flexGrow: 1, flexShrink: 1 },
  verdict: { minWidth: 52, textAlign: 'right' },
});
