import { useState, type ReactNode } from 'react';
import { StyleSheet, View } from 'react-native';
import { Text } from '@/components/ui/Text';
import { TextField } from '@/components/ui/TextField';
import { color } from '@/components/ui/theme';
import { useBreakpoint } from '@/components/ui/useBreakpoint';
import { AnyOf, OneOf } from '@/components/ui/WordsToPress';
import type { BenchContent } from '@/lib/synth';
import { Below, fieldStyles, Group, NumberBlank, Words, type BenchFormProps } from './BenchFields';
import { fullScaleText, numbers, whyNot, withContainer, withWord, type NumberSpec } from './fields';

/** All fields of a bench profile in six groups. */
export function BenchForm(props: BenchFormProps) {
  const { profile, onChange, errors, warnings, readOnly } = props;
  const { content } = profile;
  const set = (next: BenchContent) => {
    if (!readOnly) onChange({ ...profile, content: next });
  };
  const lookOnly = readOnly ? 'Changing a bench needs the admin role.' : null;
  const fixedWord =
    content.word === 'int8'
      ? 'An 8-bit word has 8 bits, right-aligned.'
      : content.word === 'float32'
        ? 'A float has neither bits nor alignment.'
        : null;
  const noOrder =
    content.container === 'csv'
      ? 'Text has no byte order.'
      : content.word === 'int8'
        ? 'A word of one byte has no byte order.'
        : null;
  /** A choice that no file can have stays, and says why when it is pressed. */
  const choice = <T extends string>(value: T, label: string, next: BenchContent, own: string | null = null) => ({
    value,
    label,
    offBecause: own ?? whyNot(next),
  });
  const phone = useBreakpoint() === 'phone';
  const [openGroup, setOpenGroup] = useState<string | null>('Name');
  const group = (name: string, pointers: string, children: ReactNode) => (
    <Group
      name={name}
      folded={phone && openGroup !== name}
      toMend={Object.keys(errors).filter((pointer) => new RegExp(pointers).test(pointer)).length}
      {...(phone ? { onFold: () => setOpenGroup(openGroup === name ? null : name) } : {})}
    >
      {children}
    </Group>
  );
  const number = (spec: NumberSpec, isFixed = false) => (
    <NumberBlank key={spec.pointer} spec={spec} {...props} readOnly={readOnly || isFixed} set={set} />
  );
  const below = (pointer: string) => (
    <Below error={errors[pointer]} warning={warnings.find((one) => one.pointer === pointer)?.message} />
  );
  return (
    <View>
      {group(
        'Name',
        '^/about',
        <>
          <TextField
            label="Name"
            value={profile.about.name}
            readOnly={readOnly}
            onChangeText={(name) => onChange({ ...profile, about: { ...profile.about, name } })}
            error={errors['/about/name'] ?? null}
            style={fieldStyles.field}
          />
          <TextField
            label="Notes"
            value={profile.about.notes}
            readOnly={readOnly}
            onChangeText={(notes) => onChange({ ...profile, about: { ...profile.about, notes } })}
            error={errors['/about/notes'] ?? null}
            style={fieldStyles.two}
          />
        </>,
      )}
      {group(
        'Clock',
        'sampleClockHz',
        <>
          {number(numbers.clockLeast)}
          {number(numbers.clockMost)}
          {number(numbers.clockStep)}
        </>,
      )}
      {group(
        'Word',
        '(word|bits|align|numberFormat|byteOrder)$',
        <>
          <Words label="Type">
            <OneOf
              label="Type"
              choices={[
                choice('int8', '8 bit', withWord(content, 'int8')),
                choice('int16', '16 bit', withWord(content, 'int16')),
                choice('float32', 'float', withWord(content, 'float32')),
              ]}
              offBecause={lookOnly}
              value={content.word}
              onChange={(word: BenchContent['word']) => set(withWord(content, word))}
            />
            {below('/content/word')}
          </Words>
          {number(numbers.bits, fixedWord !== null)}
          <Words label="Align">
            <OneOf
              label="Align"
              choices={[
                choice('left', 'left', { ...content, align: 'left' }, fixedWord),
                choice('right', 'right', { ...content, align: 'right' }),
              ]}
              offBecause={lookOnly}
              value={content.align}
              onChange={(align: BenchContent['align']) => set({ ...content, align })}
            />
            {below('/content/align')}
          </Words>
          <Words label="Number format">
            <OneOf
              label="Number format"
              choices={[
                choice('twosComplement', 'two’s complement', { ...content, numberFormat: 'twosComplement' }),
                choice(
                  'offsetBinary',
                  'offset',
                  { ...content, numberFormat: 'offsetBinary' },
                  content.word === 'float32' ? 'A float has a sign of its own.' : null,
                ),
              ]}
              offBecause={lookOnly}
              value={content.numberFormat}
              onChange={(numberFormat: BenchContent['numberFormat']) => set({ ...content, numberFormat })}
            />
            {below('/content/numberFormat')}
          </Words>
          <Words label="Byte order">
            <OneOf
              label="Byte order"
              choices={[
                choice('little', 'low first', { ...content, byteOrder: 'little' }, noOrder),
                choice('big', 'high first', { ...content, byteOrder: 'big' }, noOrder),
              ]}
              offBecause={lookOnly}
              value={content.byteOrder}
              onChange={(byteOrder: BenchContent['byteOrder']) => set({ ...content, byteOrder })}
            />
            {below('/content/byteOrder')}
          </Words>
          <View style={fieldStyles.field}>
            <Text variant="small" weight={500} style={fieldStyles.label}>
              Full scale
            </Text>
            <View style={styles.derived}>
              <Text variant="figure">{fullScaleText(content)}</Text>
            </View>
          </View>
        </>,
      )}
      {group(
        'File',
        '(container|layout|swapIq|negateQ|fileName)',
        <>
          <Words label="Container">
            <OneOf
              label="Container"
              choices={[
                choice('raw', 'raw', withContainer(content, 'raw')),
                choice('wav', 'WAV', withContainer(content, 'wav')),
                choice('npy', 'npy', withContainer(content, 'npy')),
                choice('csv', 'CSV', withContainer(content, 'csv')),
              ]}
              offBecause={lookOnly}
              value={content.container}
              onChange={(container: BenchContent['container']) => set(withContainer(content, container))}
            />
            {below('/content/container')}
          </Words>
          <Words label="I and Q">
            <OneOf
              label="I and Q"
              choices={[
                choice('interleaved', 'interleaved', { ...content, layout: 'interleaved' }),
                choice('split', 'two files', { ...content, layout: 'split' }),
              ]}
              offBecause={lookOnly}
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
              offBecause={lookOnly}
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
            style={fieldStyles.field}
          />
        </>,
      )}
      {group(
        'Length',
        'content/(granularity|least(Samples)|most|modes)',
        <>
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
              offBecause={lookOnly}
              values={content.modes}
              onToggle={(mode, on) =>
                set({
                  ...content,
                  modes: (['loop', 'burst'] as const).filter((one) =>
                    one === mode ? on : content.modes.includes(one),
                  ),
                })
              }
            />
            {below('/content/modes')}
          </Words>
        </>,
      )}
      {group(
        'Level',
        '(Headroom|levelMeans)',
        <>
          <Words label="Setting means" wide>
            <OneOf
              label="Setting means"
              choices={[
                { value: 'fileRms', label: 'mean of file' },
                { value: 'activeRms', label: 'mean while active' },
                { value: 'fullScaleTone', label: 'full-scale tone' },
                { value: 'unknown', label: 'unknown' },
              ]}
              offBecause={lookOnly}
              value={content.levelMeans}
              onChange={(levelMeans: BenchContent['levelMeans']) => set({ ...content, levelMeans })}
            />
          </Words>
          {number(numbers.headroom)}
        </>,
      )}
      {group(
        'Markers',
        'markers',
        <>
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
                choice(
                  'lowBits',
                  'low bits',
                  { ...content, markers: { ...content.markers, packing: 'lowBits' } },
                  content.markers.count === 0 ? 'There is no marker.' : null,
                ),
              ]}
              offBecause={lookOnly}
              value={content.markers.packing}
              onChange={(packing: BenchContent['markers']['packing']) =>
                set({ ...content, markers: { ...content.markers, packing } })
              }
            />
            {below('/content/markers/packing')}
          </Words>
          {number(numbers.markerLeast)}
          {number(numbers.markerStep)}
        </>,
      )}
    </View>
  );
}

const styles = StyleSheet.create({
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
