import { useId, useState, type Ref } from 'react';
import { StyleSheet, TextInput, View, type ViewStyle } from 'react-native';
import { Button } from './Button';
import { Text, textStyle } from './Text';
import { color } from './theme';
import { useBreakpoint } from './useBreakpoint';

export interface NumberFieldProps {
  label: string;
  /** The tidy form without its unit. */
  value: string;
  unit?: string;
  /** Units to choose from by pressing, where letters are not at hand (a phone's digit keys). */
  units?: readonly string[];
  onUnit?: (unit: string) => void;
  /** "16 to 16384, only factors 2, 3 and 5": stands below while focused, and in the field's spoken name. */
  limits?: string;
  error?: string | null;
  /** Every key press. */
  onText?: (text: string) => void;
  /** Leaving the field, or Enter, with something new in it. */
  onSet: (text: string) => void;
  /** Up and Down: to the next legal value; Shift ten of them. */
  onStep?: (steps: number) => void;
  /** The nearest legal value as a plain button ("Use 2048"). */
  remedy?: { label: string; onPress: () => void } | null;
  /** The label stands in the field's name only. */
  quietLabel?: boolean;
  autoFocus?: boolean;
  /** Letters are at hand even on a phone: lists and fractions. */
  words?: boolean;
  style?: ViewStyle;
  inputRef?: Ref<TextInput>;
  readOnly?: boolean;
}

interface KeyLike {
  key: string;
  shiftKey: boolean;
  preventDefault(): void;
  stopPropagation(): void;
}

/** Keys of every field that holds a number: steps, set, restore. What was typed stays until it is set or restored. */
export function useNumberKeys(props: Pick<NumberFieldProps, 'value' | 'onSet' | 'onStep' | 'onText'>): {
  draft: string;
  isTyping: boolean;
  input: object;
} {
  const { value, onSet, onStep, onText } = props;
  const [typed, setTyped] = useState<string | null>(null);
  const set = () => {
    if (typed !== null && typed !== value) onSet(typed);
    setTyped(null);
  };
  const input = {
    value: typed ?? value,
    dataSet: { typed: typed !== null && typed !== value ? '1' : '0' },
    onChangeText: (text: string) => {
      setTyped(text);
      onText?.(text);
    },
    onBlur: set,
    // TextInput keeps onKeyDown to itself and hands each key to onKeyPress
    onKeyPress: (event: KeyLike) => {
      if (event.key === 'Enter') set();
      else if (event.key === 'Escape' && typed !== null && typed !== value) {
        event.stopPropagation();
        setTyped(null);
        onText?.(value);
      } else if (onStep && (event.key === 'ArrowUp' || event.key === 'ArrowDown')) {
        event.preventDefault();
        setTyped(null);
        onStep((event.key === 'ArrowUp' ? 1 : -1) * (event.shiftKey ? 10 : 1));
      }
    },
  };
  return { draft: typed ?? value, isTyping: typed !== null, input };
}

/** A number with its unit in a fixed slot, limits below while focused, and keys that step to legal values. */
export function NumberField(props: NumberFieldProps) {
  const { label, unit, units, onUnit, limits, error, remedy, quietLabel, autoFocus, words, style, inputRef, readOnly } =
    props;
  const touch = useBreakpoint() !== 'wide';
  const id = useId();
  const [focused, setFocused] = useState(false);
  const { input } = useNumberKeys(props);
  const below = error ?? (focused ? limits : undefined);
  const keys = input as { onBlur: () => void };
  return (
    <View style={style}>
      {quietLabel ? null : (
        <label htmlFor={id} style={{ display: 'block', marginBottom: 4 }}>
          <Text variant="small" weight={500}>
            {label}
          </Text>
        </label>
      )}
      <View
        style={[styles.frame, { height: touch ? 48 : 36, borderColor: error ? color.danger.rule : color.rule.control }]}
      >
        <TextInput
          id={id}
          ref={inputRef}
          aria-label={[label, unit, limits].filter(Boolean).join(', ')}
          aria-invalid={error ? true : undefined}
          aria-describedby={`${id}-below`}
          inputMode={words ? 'text' : 'decimal'}
          autoComplete="off"
          autoFocus={autoFocus}
          readOnly={readOnly}
          selectTextOnFocus
          {...input}
          onFocus={() => setFocused(true)}
          onBlur={() => {
            setFocused(false);
            keys.onBlur();
          }}
          style={[textStyle('figure'), styles.input]}
        />
        {units && onUnit ? (
          <Button
            kind="plain"
            size="small"
            label={`Unit ${unit}, press for the next`}
            onPress={() => onUnit(nextOf(units, unit))}
          >
            {unit}
          </Button>
        ) : unit ? (
          <Text variant="small" tone="quiet" style={styles.unit}>
            {unit}
          </Text>
        ) : null}
      </View>
      <View style={styles.below}>
        <Text
          variant="small"
          tone={error ? 'danger' : 'quiet'}
          nativeID={`${id}-below`}
          role={error ? 'alert' : undefined}
          style={styles.words}
        >
          {below ?? ''}
        </Text>
        {remedy ? (
          <Button kind="plain" size="small" onPress={remedy.onPress}>
            {remedy.label}
          </Button>
        ) : null}
      </View>
    </View>
  );
}

function nextOf(units: readonly string[], unit: string | undefined): string {
  return units[(units.indexOf(unit ?? '') + 1) % units.length]!;
}

const styles = StyleSheet.create({
  frame: {
    flexDirection: 'row',
    alignItems: 'stretch',
    borderWidth: 1,
    borderRadius: 3,
    backgroundColor: color.surface.raised,
  },
  input: {
    flex: 1,
    minWidth: 0,
    paddingHorizontal: 10,
    textAlign: 'right',
    color: color.ink.strong,
    backgroundColor: 'transparent',
  },
  unit: {
    minWidth: 64,
    paddingHorizontal: 10,
    alignSelf: 'stretch',
    display: 'flex',
    alignItems: 'center',
    borderLeftWidth: 1,
    borderLeftColor: color.rule.hair,
  },
  below: { minHeight: 18, marginTop: 2, flexDirection: 'row', alignItems: 'center', gap: 8 },
  words: { flexShrink: 1 },
});
