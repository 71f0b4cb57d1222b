import { useRef, useState } from 'react';
import { Pressable, StyleSheet, View, type ViewStyle } from 'react-native';
import { Text } from './Text';
import { color } from './theme';
import { useBreakpoint } from './useBreakpoint';

export interface WordChoice<T extends string> {
  value: T;
  label: string;
  /** A count behind the word. */
  count?: number;
  /** The word stays and says why it cannot be pressed. */
  offBecause?: string | null;
}

interface Common<T extends string> {
  label: string;
  choices: readonly WordChoice<T>[];
  style?: ViewStyle;
  /** Without the frame: filter words and tabs. */
  bare?: boolean;
}

/** One of several words: a radio group; arrows move the choice. */
export function OneOf<T extends string>(props: Common<T> & { value: T | null; onChange: (value: T) => void }) {
  const { label, choices, value, onChange, style, bare } = props;
  const refs = useRef(new Map<T, { focus: () => void }>());
  const [why, setWhy] = useState<string | null>(null);
  const step = (from: number, by: number) => {
    for (let i = 1; i <= choices.length; i++) {
      const next = choices[(from + by * i + choices.length * i) % choices.length];
      if (next && !next.offBecause) {
        onChange(next.value);
        refs.current.get(next.value)?.focus();
        return;
      }
    }
  };
  return (
    <View style={style}>
      <View role="radiogroup" aria-label={label} style={[styles.row, bare ? styles.bareRow : styles.framed]}>
        {choices.map((choice, i) => (
          <Word
            key={choice.value}
            choice={choice}
            bare={bare}
            role="radio"
            chosen={choice.value === value}
            tabbable={choice.value === value || (value === null && i === 0)}
            onPress={() => (choice.offBecause ? setWhy(choice.offBecause) : (setWhy(null), onChange(choice.value)))}
            onKey={(key) => {
              if (key === 'ArrowRight' || key === 'ArrowDown') return (step(i, 1), true);
              if (key === 'ArrowLeft' || key === 'ArrowUp') return (step(i, -1), true);
              return false;
            }}
            register={(node) => {
              if (node) refs.current.set(choice.value, node);
            }}
          />
        ))}
      </View>
      <Why words={why} />
    </View>
  );
}

/** Any of several words: toggles. */
export function AnyOf<T extends string>(
  props: Common<T> & { values: readonly T[]; onToggle: (value: T, on: boolean) => void },
) {
  const { label, choices, values, onToggle, style, bare } = props;
  const [why, setWhy] = useState<string | null>(null);
  return (
    <View style={style}>
      <View role="group" aria-label={label} style={[styles.row, bare ? styles.bareRow : styles.framed]}>
        {choices.map((choice) => (
          <Word
            key={choice.value}
            choice={choice}
            bare={bare}
            role="button"
            chosen={values.includes(choice.value)}
            tabbable
            onPress={() =>
              choice.offBecause
                ? setWhy(choice.offBecause)
                : (setWhy(null), onToggle(choice.value, !values.includes(choice.value)))
            }
          />
        ))}
      </View>
      <Why words={why} />
    </View>
  );
}

function Why({ words }: { words: string | null }) {
  return words ? (
    <Text variant="small" tone="quiet" role="status" style={styles.why}>
      {words}
    </Text>
  ) : null;
}

function Word<T extends string>(props: {
  choice: WordChoice<T>;
  chosen: boolean;
  role: 'radio' | 'button';
  tabbable: boolean;
  bare?: boolean;
  onPress: () => void;
  onKey?: (key: string) => boolean;
  register?: (node: { focus: () => void } | null) => void;
}) {
  const { choice, chosen, role, tabbable, bare, onPress, onKey, register } = props;
  const touch = useBreakpoint() === 'phone';
  const state = role === 'radio' ? { 'aria-checked': chosen } : { 'aria-pressed': chosen };
  return (
    <Pressable
      ref={register as never}
      role={role}
      {...state}
      aria-disabled={choice.offBecause ? true : undefined}
      tabIndex={tabbable ? 0 : -1}
      onPress={onPress}
      {...({
        onKeyDown: (event: { key: string; preventDefault: () => void }) => {
          if (onKey?.(event.key)) event.preventDefault();
        },
      } as object)}
      style={(press) => [
        styles.word,
        bare ? styles.bareWord : styles.framedWord,
        {
          height: touch ? 44 : 36,
          backgroundColor: chosen
            ? color.surface.selected
            : (press as { hovered?: boolean }).hovered
              ? color.surface.hover
              : 'transparent',
          borderBottomColor: chosen ? color.ink.strong : 'transparent',
        },
      ]}
    >
      <Text
        weight={chosen ? 600 : 500}
        tone={choice.offBecause && !chosen ? 'quiet' : chosen ? 'onSelected' : 'body'}
        style={[styles.text, choice.offBecause && !chosen ? styles.struck : null]}
        numberOfLines={1}
      >
        {choice.label}
      </Text>
      {choice.count === undefined ? null : (
        <Text variant="figureSmall" tone={chosen ? 'onSelected' : 'quiet'}>
          {choice.count}
        </Text>
      )}
    </Pressable>
  );
}

const styles = StyleSheet.create({
  row: { flexDirection: 'row' },
  framed: {
    borderWidth: 1,
    borderColor: color.rule.control,
    borderRadius: 3,
    backgroundColor: color.surface.raised,
    overflow: 'hidden',
  },
  bareRow: { gap: 4 },
  word: { flexDirection: 'row', gap: 6, alignItems: 'center', justifyContent: 'center', borderBottomWidth: 2 },
  framedWord: { flexGrow: 1, paddingHorizontal: 8, borderRightWidth: 1, borderRightColor: color.rule.hair },
  bareWord: { paddingHorizontal: 11, flexShrink: 0 },
  text: { fontSize: 14, lineHeight: 20 },
  struck: { textDecorationLine: 'line-through', textDecorationColor: color.rule.control },
  why: { marginTop: 4 },
});
