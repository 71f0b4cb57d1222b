import { useEffect, useRef } from 'react';
import { StyleSheet, TextInput, View, type ViewStyle } from 'react-native';
import { readPreferences } from './preferences';
import { Text, textStyle } from './Text';
import { color } from './theme';
import { useBreakpoint } from './useBreakpoint';

/** Is the keyboard in a field, where a letter is a letter? */
function isTyping(event: KeyboardEvent): boolean {
  const at = event.target instanceof HTMLElement ? event.target : null;
  return (
    at !== null &&
    (/^(INPUT|TEXTAREA|SELECT)$/.test(at.tagName) || at.closest('[role=dialog],[role=alertdialog]') !== null)
  );
}

/** May a single letter or sign act as a key of the page now? */
export function isKeyOfPage(event: KeyboardEvent): boolean {
  return readPreferences().singleKeys && !event.ctrlKey && !event.metaKey && !event.altKey && !isTyping(event);
}

/** A field to find by: `/` goes to it, Escape clears it. */
export function FindField({
  label,
  value,
  onChange,
  onLeave,
  autoFocus,
  style,
}: {
  label: string;
  value: string;
  onChange: (value: string) => void;
  /** Escape: after clearing. */
  onLeave?: () => void;
  autoFocus?: boolean;
  style?: ViewStyle;
}) {
  const size = useBreakpoint();
  const ref = useRef<TextInput>(null);
  useEffect(() => {
    const onKey = (event: KeyboardEvent) => {
      if (event.key !== '/' || !isKeyOfPage(event)) return;
      event.preventDefault();
      ref.current?.focus();
    };
    window.addEventListener('keydown', onKey);
    return () => window.removeEventListener('keydown', onKey);
  }, []);
  return (
    <View style={[styles.frame, style]}>
      <TextInput
        ref={ref}
        aria-label={label}
        placeholder={label}
        placeholderTextColor={color.ink.quiet}
        value={value}
        onChangeText={onChange}
        autoCapitalize="none"
        autoComplete="off"
        autoFocus={autoFocus}
        inputMode="search"
        onKeyPress={(event) => {
          if (event.nativeEvent.key !== 'Escape') return;
          onChange('');
          onLeave?.();
        }}
        style={[textStyle('body'), styles.input, { height: size === 'phone' ? 44 : 36 }]}
      />
      {size === 'wide' && value === '' ? (
        <View aria-hidden style={styles.key}>
          <Text variant="figureSmall" tone="quiet">
            /
          </Text>
        </View>
      ) : null}
    </View>
  );
}

const styles = StyleSheet.create({
  frame: { position: 'relative' },
  input: {
    width: '100%',
    borderWidth: 1,
    borderRadius: 3,
    borderColor: color.rule.control,
    paddingHorizontal: 12,
    backgroundColor: color.surface.raised,
    color: color.ink.strong,
  },
  key: {
    position: 'absolute',
    right: 10,
    top: 8,
    height: 20,
    paddingHorizontal: 6,
    borderWidth: 1,
    borderColor: color.rule.control,
    borderRadius: 3,
    justifyContent: 'center',
    pointerEvents: 'none',
  },
});
