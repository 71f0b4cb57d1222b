import { useId } from 'react';
import { View, type ViewStyle } from 'react-native';
import { face } from './fonts';
import { Text } from './Text';
import { color } from './theme';
import { useBreakpoint } from './useBreakpoint';

/** One of many: the browser's own list, which every phone and keyboard knows. */
export function ChoiceField({
  label,
  value,
  choices,
  onChange,
  style,
}: {
  label: string;
  value: string;
  choices: readonly { value: string; label: string }[];
  onChange: (value: string) => void;
  style?: ViewStyle;
}) {
  const id = useId();
  const touch = useBreakpoint() === 'phone';
  return (
    <View style={style}>
      <label htmlFor={id} style={{ display: 'block', marginBottom: 4 }}>
        <Text variant="small" weight={500}>
          {label}
        </Text>
      </label>
      <select
        id={id}
        value={value}
        onChange={(event) => onChange(event.target.value)}
        style={{
          height: touch ? 48 : 36,
          padding: '0 10px',
          border: `1px solid ${color.rule.control}`,
          borderRadius: 3,
          background: color.surface.raised,
          color: color.ink.strong,
          fontFamily: face('text', 400),
          fontSize: touch ? 16 : 15,
          maxWidth: '100%',
        }}
      >
        {choices.map((choice) => (
          <option key={choice.value} value={choice.value}>
            {choice.label}
          </option>
        ))}
      </select>
    </View>
  );
}
