import type { ReactNode } from 'react';
import { Pressable, StyleSheet, View, type ViewStyle } from 'react-native';
import { NumberField } from '@/components/ui/NumberField';
import { Text } from '@/components/ui/Text';
import { color } from '@/components/ui/theme';
import type { BenchWarning } from '@/lib/contracts/benchWarnings';
import { formatNumber } from '@/lib/drawing/quantities';
import type { BenchContent, BenchProfile } from '@/lib/synth';
import { numberText, type NumberSpec } from './fields';

export interface BenchFormProps {
  profile: BenchProfile;
  onChange: (profile: BenchProfile) => void;
  /** Messages by JSON Pointer: what cannot be saved, and what may be saved but will not work. */
  errors: Readonly<Record<string, string>>;
  warnings: readonly BenchWarning[];
  onTyping: (pointer: string, message: string | null) => void;
  readOnly: boolean;
}

export function NumberBlank({
  spec,
  profile,
  errors,
  warnings,
  onTyping,
  readOnly,
  set,
}: BenchFormProps & { spec: NumberSpec; set: (content: BenchContent) => void }) {
  const { value, unit } = numberText(spec, profile.content);
  const warning = warnings.find((one) => one.pointer === spec.pointer);
  const use = warning?.use ?? null;
  return (
    <View style={fieldStyles.field}>
      <NumberField
        label={spec.label}
        value={value}
        unit={unit}
        limits={readOnly ? undefined : spec.limits}
        readOnly={readOnly}
        words
        error={errors[spec.pointer] ?? null}
        remedy={
          use === null || readOnly
            ? null
            : { label: `Use ${formatNumber(use)}`, onPress: () => set(spec.write(profile.content, use)) }
        }
        onSet={(text) => {
          if (readOnly) return;
          const parsed = spec.parse(text);
          onTyping(spec.pointer, parsed.ok ? null : parsed.message);
          if (parsed.ok) set(spec.write(profile.content, parsed.value));
        }}
      />
      {errors[spec.pointer] ? null : <Below error={undefined} warning={warning?.message} />}
    </View>
  );
}

export function Below({ error, warning }: { error: string | undefined; warning: string | undefined }) {
  if (!error && !warning) return null;
  return (
    <Text
      variant="small"
      weight={warning && !error ? 600 : 400}
      tone={error ? 'danger' : 'warning'}
      role={error ? 'alert' : 'status'}
    >
      {error ?? warning}
    </Text>
  );
}

export function Words({ label, wide, children }: { label: string; wide?: boolean; children: ReactNode }) {
  return (
    <View style={wide ? fieldStyles.two : fieldStyles.field}>
      <Text variant="small" weight={500} style={fieldStyles.label} aria-hidden>
        {label}
      </Text>
      {children}
    </View>
  );
}

/** A group of fields; on a phone its name folds it, and says what is to be mended inside. */
export function Group({
  name,
  folded,
  toMend,
  onFold,
  children,
}: {
  name: string;
  folded: boolean;
  toMend: number;
  onFold?: () => void;
  children: ReactNode;
}) {
  return (
    <View role="group" aria-label={name} style={[fieldStyles.group, onFold ? fieldStyles.groupPhone : null]}>
      {onFold ? (
        <Text heading={2}>
          <Pressable role="button" aria-expanded={!folded} onPress={onFold} style={fieldStyles.fold}>
            <Text variant="heading" tone="strong">
              {name}
            </Text>
            <Text variant="small" weight={toMend > 0 ? 600 : 400} tone={toMend > 0 ? 'danger' : 'quiet'}>
              {toMend > 0 ? `${toMend} to mend` : folded ? 'Open' : 'Close'}
            </Text>
          </Pressable>
        </Text>
      ) : (
        <Text variant="heading" heading={2} tone="strong" style={fieldStyles.groupName}>
          {name}
        </Text>
      )}
      {folded ? null : <View style={onFold ? fieldStyles.fieldsPhone : fieldStyles.fields}>{children}</View>}
    </View>
  );
}

export const fieldStyles = StyleSheet.create({
  group: { flexDirection: 'row', gap: 16, paddingVertical: 12, borderTopWidth: 1, borderTopColor: color.rule.line },
  groupPhone: { flexDirection: 'column', gap: 4, paddingVertical: 4 },
  fold: { minHeight: 44, width: '100%', flexDirection: 'row', alignItems: 'center', justifyContent: 'space-between' },
  fieldsPhone: { gap: 8, paddingBottom: 8 },
  groupName: { width: 112, flexShrink: 0, paddingTop: 24 },
  fields: {
    // three to a row, as long as each keeps 200 px
    display: 'grid' as 'flex',
    gridTemplateColumns: 'repeat(auto-fill, minmax(200px, 1fr))',
    flex: 1,
    minWidth: 0,
    columnGap: 16,
    rowGap: 8,
  } as ViewStyle,
  field: { minWidth: 0 },
  two: { minWidth: 0, gridColumnEnd: 'span 2' } as ViewStyle,
  label: { marginBottom: 4 },
});
