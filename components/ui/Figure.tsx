import { Pressable, StyleSheet, type ViewStyle } from 'react-native';
import { copyAndSay } from './copyText';
import { Text, type TextVariant } from './Text';
import { color } from './theme';
import { useBreakpoint } from './useBreakpoint';

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

/** What a figure that copies on press says of itself, and does. */
function copying(name: string, value: string, unit: string | undefined, ...more: (string | undefined)[]) {
  const words = [value, unit].filter(Boolean).join(' ');
  return {
    role: 'button' as const,
    'aria-label': [name, words, ...more, 'copy'].filter(Boolean).join(', '),
    onPress: () => void copyAndSay(words, `${name} copied`),
  };
}

const ground = (state: object) => {
  const { hovered, pressed } = state as { hovered?: boolean; pressed?: boolean };
  return { backgroundColor: pressed ? color.surface.pressed : hovered ? color.surface.hover : 'transparent' };
};

/** Label over figure, for cells of a ruled block; press copies value and unit. */
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
    <Pressable
      {...copying(label, value, unit, stale ? 'out of date' : undefined)}
      style={(state) => [styles.cell, ground(state), style]}
    >
      <Text variant="label" weight={400} tone="quiet" numberOfLines={1}>
        {label}
      </Text>
      <Figure value={value} {...(unit ? { unit } : {})} {...(stale ? { stale } : {})} />
    </Pressable>
  );
}

/** Name, value, unit and a verdict in words; press copies value and unit. */
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
  const touch = useBreakpoint() === 'phone';
  return (
    <Pressable
      {...copying(name, value, unit, verdict)}
      style={(state) => [styles.row, { minHeight: touch ? 52 : 36 }, ground(state)]}
    >
      <Text variant="small" style={styles.name} numberOfLines={2}>
        {name}
      </Text>
      <Figure value={value} variant="figureSmall" tone="body" {...(unit ? { unit } : {})} />
      {verdict ? (
        <Text variant="small" weight={600} tone={verdictTone} style={styles.verdict}>
          {verdict}
        </Text>
      ) : null}
    </Pressable>
  );
}

const styles = StyleSheet.create({
  cell: { paddingVertical: 6, paddingHorizontal: 8, gap: 1, minWidth: 0 },
  row: {
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
