import { useId, useState, type Ref } from 'react';
import { Pressable, StyleSheet, TextInput, View, type TextInputProps, type ViewStyle } from 'react-native';
import { Text, textStyle } from './Text';
import { color } from './theme';
import { useBreakpoint } from './useBreakpoint';

export interface TextFieldProps extends Omit<TextInputProps, 'style' | 'onChange'> {
  label: string;
  hint?: string;
  error?: string | null;
  /** Adds Show and Hide. */
  secret?: boolean;
  style?: ViewStyle;
  inputRef?: Ref<TextInput>;
  /** The label stands in the field's name only. */
  quietLabel?: boolean;
}

/** Label above, hint or error below in a line that is kept free, so nothing jumps. */
export function TextField(props: TextFieldProps) {
  const { label, hint, error, secret, style, inputRef, quietLabel, multiline, ...input } = props;
  const touch = useBreakpoint() === 'phone';
  const id = useId();
  const [shown, setShown] = useState(false);
  const below = error ?? hint;
  const height = multiline ? undefined : touch ? 48 : 36;
  return (
    <View style={style}>
      {quietLabel ? null : (
        <label htmlFor={id} style={{ display: 'block', marginBottom: 4 }}>
          <Text variant="small" weight={500}>
            {label}
          </Text>
        </label>
      )}
      <View style={styles.frame}>
        <TextInput
          id={id}
          ref={inputRef}
          aria-label={label}
          aria-invalid={error ? true : undefined}
          aria-describedby={below ? `${id}-below` : undefined}
          placeholderTextColor={color.ink.quiet}
          secureTextEntry={secret ? !shown : undefined}
          multiline={multiline}
          {...input}
          style={[
            textStyle('body'),
            styles.input,
            { height, borderColor: error ? color.danger.rule : color.rule.control },
            multiline ? styles.multiline : null,
            secret ? styles.withShow : null,
          ]}
        />
        {secret ? (
          <Pressable
            role="button"
            aria-label={shown ? `Hide ${label}` : `Show ${label}`}
            onPress={() => setShown(!shown)}
            style={styles.show}
          >
            <Text variant="small" weight={600} tone="accent">
              {shown ? 'Hide' : 'Show'}
            </Text>
          </Pressable>
        ) : null}
      </View>
      <Text
        variant="small"
        tone={error ? 'danger' : 'quiet'}
        nativeID={`${id}-below`}
        role={error ? 'alert' : undefined}
        style={styles.below}
      >
        {below ?? ''}
      </Text>
    </View>
  );
}

const styles = StyleSheet.create({
  frame: { position: 'relative' },
  input: {
    borderWidth: 1,
    borderRadius: 3,
    paddingHorizontal: 12,
    backgroundColor: color.surface.raised,
    color: color.ink.strong,
  },
  multiline: { minHeight: 88, paddingVertical: 8, textAlignVertical: 'top' },
  withShow: { paddingRight: 64 },
  show: {
    position: 'absolute',
    right: 0,
    top: 0,
    bottom: 0,
    width: 60,
    alignItems: 'center',
    justifyContent: 'center',
  },
  below: { minHeight: 18, marginTop: 2 },
});
