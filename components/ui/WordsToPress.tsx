import { useEffect, useRef, useState } from 'react';
import { Pressable, StyleSheet, View, type ViewStyle } from 'react-native';
import { Text } from './Text';
import { color } from './theme';
import { useAriaDisabled } from './useAriaDisabled';
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
  /** None of the words can be pressed: who may only look is told why. */
  offBecause?: string | null;
}

/** One of several words: a radio group; arrows move the choice. */
export function OneOf<T extends string>(props: Common<T> & { value: T | null; onChange: (value: T) => void }) {
  const { label, choices, value, onChange, style, bare, offBecause } = props;
  const refs = useRef(new Map<T, { focus: () => void }>());
  const [why, setWhy] = useState<string | null>(null);
  const press = (choice: WordChoice<T>) => {
    const off = offBecause ?? choice.offBecause ?? null;
    setWhy(choice.value === value ? null : off);
    if (!off) onChange(choice.value);
  };
  /** Arrows move the choice; a word that cannot be pressed is reached too, and says why. */
  const step = (from: number, by: number) => {
    const next = choices[(from + by + choices.length) % choices.length]!;
    press(next);
    refs.current.get(next.value)?.focus();
  };
  const hasChosen = choices.some((choice) => choice.value === value);
  return (
    <View style={style}>
      <View
        role="radiogroup"
        aria-label={label}
        style={[styles.row, bare ? styles.bareRow : [styles.framed, styles.wraps]]}
      >
        {choices.map((choice, i) => (
          <Word
            key={choice.value}
            choice={choice}
            bare={bare}
            allOff={Boolean(offBecause)}
            role="radio"
            chosen={choice.value === value}
            tabbable={choice.value === value || (!hasChosen && i === 0)}
            onPress={() => press(choice)}
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
  const { label, choices, values, onToggle, style, bare, offBecause } = props;
  const [why, setWhy] = useState<string | null>(null);
  return (
    <View style={style}>
      <View role="group" aria-label={label} style={[styles.row, bare ? styles.bareRow : [styles.framed, styles.wraps]]}>
        {choices.map((choice) => (
          <Word
            key={choice.value}
            choice={choice}
            bare={bare}
            allOff={Boolean(offBecause)}
            role="button"
            chosen={values.includes(choice.value)}
            tabbable
            onPress={() => {
              const off = offBecause ?? choice.offBecause ?? null;
              setWhy(off);
              if (!off) onToggle(choice.value, !values.includes(choice.value));
            }}
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
  allOff: boolean;
  onPress: () => void;
  onKey?: (key: string) => boolean;
  register?: (node: { focus: () => void } | null) => void;
}) {
  const { choice, chosen, role, tabbable, bare, allOff, onPress, onKey, register } = props;
  const touch = useBreakpoint() === 'phone';
  const ref = useAriaDisabled(allOff || Boolean(choice.offBecause));
  useEffect(() => register?.(ref.current));
  const state = role === 'radio' ? { 'aria-checked': chosen } : { 'aria-pressed': chosen };
  return (
    <Pressable
      ref={ref as never}
      role={role}
      {...state}
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
        tone={(allOff || choice.offBecause) && !chosen ? 'quiet' : chosen ? 'onSelected' : 'body'}
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
  // four long words do not fit a narrow phone in one row
  wraps: { flexWrap: 'wrap' },
  framed: {
    borderWidth: 1,
    borderColor: color.rule.control,
    borderRadius: 3,
    backgroundColor: color.surface.raised,
  },
  bareRow: { gap: 4 },
  word: { flexDirection: 'row', gap: 6, alignItems: 'center', justifyContent: 'center', borderBottomWidth: 2 },
  framedWord: {
    flexGrow: 1,
    minWidth: 0,
    paddingHorizontal: 8,
    borderRightWidth: 1,
    borderRightColor: color.rule.hair,
  },
  bareWord: { paddingHorizontal: 11, minWidth: 44, flexShrink: 0 },
  text: { fontSize: 14, lineHeight: 20 },
  struck: { textDecorationLine: 'line-through', textDecorationColor: color.rule.control },
  why: { marginTop: 4 },
});
