import { createElement } from 'react';
import { StyleSheet, TextInput } from 'react-native';
import { useNumberKeys } from './NumberField';
import { textStyle } from './Text';
import { color } from './theme';
import { useBreakpoint } from './useBreakpoint';

/** A blank of a sentence that takes a number. It grows with what is in it; a value that is not taken is ruled in danger. */
export function Blank(props: {
  /** What the blank means, for readers: "first subcarrier". */
  label: string;
  value: string;
  onSet: (text: string) => void;
  onStep?: (steps: number) => void;
  onText?: (text: string) => void;
  wrong?: boolean;
  off?: boolean;
}) {
  const { label, wrong, off } = props;
  const touch = useBreakpoint() !== 'wide';
  const { draft, input } = useNumberKeys(props);
  return (
    <TextInput
      aria-label={label}
      aria-invalid={wrong || undefined}
      inputMode="decimal"
      autoComplete="off"
      selectTextOnFocus
      readOnly={off}
      {...input}
      style={[
        textStyle('figureSmall', 500),
        styles.blank,
        { height: touch ? 44 : 26, width: Math.max(34, draft.length * 8 + 18) },
        { borderColor: wrong ? color.danger.rule : color.rule.control },
      ]}
    />
  );
}

export interface ChoiceOption<T extends string> {
  value: T;
  label: string;
}

/** A blank that takes one of several words. */
export function ChoiceBlank<T extends string>(props: {
  label: string;
  value: T;
  options: readonly ChoiceOption<T>[];
  onSet: (value: T) => void;
  off?: boolean;
  fill?: boolean;
}) {
  const { label, value, options, onSet, off, fill } = props;
  const touch = useBreakpoint() !== 'wide';
  return createElement(
    'select',
    {
      'aria-label': label,
      value,
      disabled: off,
      onChange: (event: { target: { value: string } }) => onSet(event.target.value as T),
      style: {
        ...(StyleSheet.flatten([textStyle('figureSmall', 500)]) as object),
        lineHeight: 'normal',
        height: fill ? (touch ? 48 : 36) : touch ? 44 : 26,
        width: fill ? '100%' : undefined,
        maxWidth: '100%',
        margin: 0,
        padding: '0 6px',
        border: `1px solid ${color.rule.control}`,
        borderRadius: 3,
        background: color.surface.raised,
        color: color.ink.strong,
      },
    },
    options.map((option) => createElement('option', { key: option.value, value: option.value }, option.label)),
  );
}

const styles = StyleSheet.create({
  blank: {
    borderWidth: 1,
    borderRadius: 3,
    paddingHorizontal: 7,
    textAlign: 'right',
    color: color.ink.strong,
    backgroundColor: color.surface.raised,
  },
});
