import type { ReactNode } from 'react';
import { StyleSheet, View } from 'react-native';
import { NumberField } from '@/components/ui/NumberField';
import { Text } from '@/components/ui/Text';
import { TextField } from '@/components/ui/TextField';
import { color } from '@/components/ui/theme';
import { useBreakpoint } from '@/components/ui/useBreakpoint';
import { AnyOf, OneOf } from '@/components/ui/WordsToPress';
import type { BenchWarning } from '@/lib/contracts/benchWarnings';
import { formatNumber } from '@/lib/drawing/quantities';
import type { BenchContent, BenchProfile } from '@/lib/synth';
import { fullScaleText, numbers, numberText, withWord, type NumberSpec } from './fields';

export interface BenchFormProps {
  profile: BenchProfile;
  onChange: (profile: BenchProfile) => void;
  /** Messages by JSON Pointer: what cannot be saved, and what may be saved but will not work. */
  errors: Readonly<Record<string, string>>;
  warnings: readonly BenchWarning[];
  onTyping: (pointer: string, message: string | null) => void;
  readOnly: boolean;
}

/** All fields of a bench profile in six groups. */
export function BenchForm(props: BenchFormProps) {
  const { profile, onChange, errors, warnings, readOnly } = props;
  const { content } = profile;
  const set = (next: BenchContent) => {
    if (!readOnly) onChange({ ...profile, content: next });
  };
  const fixedWord =
    content.word === 'int8'
      ? 'An 8-bit word has 8 bits, right-aligned.'
      : content.word === 'float32'
        ? 'A float has neither bits nor alignment.'
        : null;
  const number = (spec: NumberSpec) => <NumberBlank key={spec.pointer} spec={spec} {...props} set={set} />;
  const below = (pointer: string) => (
    <Below error={errors[pointer]} warning={warnings.find((one) => one.pointer === pointer)?.message} />
  );
  return (
    <View>
      <Group name="Name">
        <TextField
          label="Name"
          value={profile.about.name}
          readOnly={readOnly}
          onChangeText={(name) => onChange({ ...profile, about: { ...profile.about, name } })}
          error={errors['/about/name'] ?? null}
          style={styles.two}
        />
        <TextField
          label="Notes"
          value={profile.about.notes}
          readOnly={readOnly}
          onChangeText={(notes) => onChange({ ...profile, about: { ...profile.about, notes } })}
          error={errors['/about/notes'] ?? null}
          style={styles.two}
        />
      </Group>
      <Group name="Clock">
        {number(numbers.clockLeast)}
        {number(numbers.clockMost)}
        {number(numbers.clockStep)}
      </Group>
      <Group name="Word">
        <Words label="Type">
          <OneOf
            label="Type"
            choices={[
              { value: 'int8', label: '8 bit' },
              { value: 'int16', label: '16 bit' },
              { value: 'float32', label: 'float' },
            ]}
            value={content.word}
            onChange={(word: BenchContent['word']) => set(withWord(content, word))}
          />
          {below('/content/word')}
        </Words>
        {number(numbers.bits)}
        <Words label="Align">
          <OneOf
            label="Align"
            choices={[
              { value: 'left', label: 'left', offBecause: fixedWord },
              { value: 'right', label: 'right' },
            ]}
            value={content.align}
            onChange={(align: BenchContent['align']) => set({ ...content, align })}
          />
          {below('/content/align')}
        </Words>
        <Words label="Number format">
          <OneOf
            label="Number format"
            choices={[
              { value: 'twosComplement', label: 'two’s complement' },
              {
                value: 'offsetBinary',
                label: 'offset',
                offBecause: content.word === 'float32' ? 'A float has a sign of its own.' : null,
              },
            ]}
            value={content.numberFormat}
            onChange={(numberFormat: BenchContent['numberFormat']) => set({ ...content, numberFormat })}
          />
          {below('/content/numberFormat')}
        </Words>
        <Words label="Byte order">
          <OneOf
            label="Byte order"
            choices={[
              { value: 'little', label: 'low first' },
              { value: 'big', label: 'high first' },
            ]}
            value={content.byteOrder}
            onChange={(byteOrder: BenchContent['byteOrder']) => set({ ...content, byteOrder })}
          />
          {below('/content/byteOrder')}
        </Words>
        <View style={styles.field}>
          <Text variant="small" weight={500} style={styles.label}>
            Full scale
          </Text>
          <View style={styles.derived}>
            <Text variant="figure">{fullScaleText(content)}</Text>
          </View>
        </View>
      </Group>
      <Group name="File">
        <Words label="Container">
          <OneOf
            label="Container"
            choices={[
              { value: 'raw', label: 'raw' },
              { value: 'wav', label: 'WAV' },
              { value: 'npy', label: 'npy' },
              { value: 'csv', label: 'CSV' },
            ]}
            value={content.container}
            onChange={(container: BenchContent['container']) => set({ ...content, container })}
          />
          {below('/content/container')}
        </Words>
        <Words label="I and Q">
          <OneOf
            label="I and Q"
            choices={[
              { value: 'interleaved', label: 'interleaved' },
              { value: 'split', label: 'split' },
            ]}
            value={content.layout}
            onChange={(layout: BenchContent['layout']) => set({ ...content, layout })}
          />
          {below('/content/layout')}
        </Words>
        <Words label="Mirrors the spectrum">
          <AnyOf
            label="Mirrors the spectrum"
            choices={[
              { value: 'swapIq', label: 'swap I and Q' },
              { value: 'negateQ', label: 'negate Q' },
            ]}
            values={[
              ...(content.swapIq ? (['swapIq'] as const) : []),
              ...(content.negateQ ? (['negateQ'] as const) : []),
            ]}
            onToggle={(key, on) => set({ ...content, [key]: on })}
          />
        </Words>
        {number(numbers.nameMost)}
        <TextField
          label="Extension"
          value={content.fileName.extension}
          readOnly={readOnly}
          autoCapitalize="none"
          onChangeText={(extension) => set({ ...content, fileName: { ...content.fileName, extension } })}
          error={errors['/content/fileName/extension'] ?? null}
          style={styles.field}
        />
      </Group>
      <Group name="Length">
        {number(numbers.granularity)}
        {number(numbers.leastSamples)}
        {number(numbers.mostSamples)}
        <Words label="Plays">
          <AnyOf
            label="Plays"
            choices={[
              { value: 'loop', label: 'loop' },
              { value: 'burst', label: 'burst' },
            ]}
            values={content.modes}
            onToggle={(mode, on) =>
              set({
                ...content,
                modes: (['loop', 'burst'] as const).filter((one) => (one === mode ? on : content.modes.includes(one))),
              })
            }
          />
          {below('/content/modes')}
        </Words>
      </Group>
      <Group name="Level">
        <Words label="Setting means" wide>
          <OneOf
            label="Setting means"
            choices={[
              { value: 'fileRms', label: 'mean of file' },
              { value: 'activeRms', label: 'mean while active' },
              { value: 'fullScaleTone', label: 'full-scale tone' },
              { value: 'unknown', label: 'unknown' },
            ]}
            value={content.levelMeans}
            onChange={(levelMeans: BenchContent['levelMeans']) => set({ ...content, levelMeans })}
          />
        </Words>
        {number(numbers.headroom)}
      </Group>
      <Group name="Markers">
        {number(numbers.markerCount)}
        <Words label="Packing">
          <OneOf
            label="Packing"
            choices={[
              {
                value: 'none',
                label: 'none',
                offBecause: content.markers.count > 0 ? 'None goes with no marker.' : null,
              },
              {
                value: 'bytes',
                label: 'bytes',
                offBecause: content.markers.count === 0 ? 'There is no marker.' : null,
              },
              {
                value: 'lowBits',
                label: 'low bits',
                offBecause: content.markers.count === 0 ? 'There is no marker.' : null,
              },
            ]}
            value={content.markers.packing}
            onChange={(packing: BenchContent['markers']['packing']) =>
              set({ ...content, markers: { ...content.markers, packing } })
            }
          />
          {below('/content/markers/packing')}
        </Words>
        {number(numbers.markerLeast)}
        {number(numbers.markerStep)}
      </Group>
    </View>
  );
}

function NumberBlank({
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
    <View style={styles.field}>
      <NumberField
        label={spec.label}
        value={value}
        unit={unit}
        limits={spec.limits}
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

function Below({ error, warning }: { error: string | undefined; warning: string | undefined }) {
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

function Words({ label, wide, children }: { label: string; wide?: boolean; children: ReactNode }) {
  return (
    <View style={wide ? styles.two : styles.field}>
      <Text variant="small" weight={500} style={styles.label} aria-hidden>
        {label}
      </Text>
      {children}
    </View>
  );
}

function Group({ name, children }: { name: string; children: ReactNode }) {
  const phone = useBreakpoint() === 'phone';
  return (
    <View role="group" aria-label={name} style={[styles.group, phone ? styles.groupPhone : null]}>
      <Text variant="heading" heading={2} tone="strong" style={phone ? null : styles.groupName}>
        {name}
      </Text>
      <View style={styles.fields}>{children}</View>
    </View>
  );
}

const styles = StyleSheet.create({
  group: { flexDirection: 'row', gap: 16, paddingVertical: 12, borderTopWidth: 1, borderTopColor: color.rule.line },
  groupPhone: { flexDirection: 'column', gap: 8 },
  groupName: { width: 112, flexShrink: 0, paddingTop: 24 },
  fields: {
    flexDirection: 'row',
    flexWrap: 'wrap',
    flexGrow: 1,
    flexShrink: 1,
    flexBasis: 0,
    minWidth: 0,
    gap: 16,
    rowGap: 8,
  },
  field: { flexGrow: 1, flexShrink: 1, flexBasis: 210, maxWidth: 340, minWidth: 200 },
  two: { flexGrow: 2, flexShrink: 1, flexBasis: 340 },
  label: { marginBottom: 4 },
  derived: {
    height: 36,
    alignItems: 'center',
    justifyContent: 'center',
    borderWidth: 1,
    borderStyle: 'dashed',
    borderColor: color.rule.control,
    borderRadius: 3,
  },
});
