import { useState } from 'react';
import { StyleSheet, View } from 'react-native';
import { ChoiceBlank } from '@/components/ui/Blank';
import { Button } from '@/components/ui/Button';
import { NumberField } from '@/components/ui/NumberField';
import { Text } from '@/components/ui/Text';
import { TextField } from '@/components/ui/TextField';
import { color } from '@/components/ui/theme';
import { OneOf } from '@/components/ui/WordsToPress';
import { parseInteger, parseQuantity } from '@/lib/drawing/quantities';
import { planSettings } from '@/lib/editor/commands/settings';
import type { LevelReference, Marker, WaveformIntent } from '@/lib/synth';
import { decibels } from '../numberWords';
import type { TableContext } from '../tableContext';
import { useIntent, useSettings, useTitle } from '../useEditorState';
import { TableSheet } from './TableSheet';

const close = (table: TableContext) => () => table.open(null);

const REFERENCES: readonly { value: LevelReference; label: string }[] = [
  { value: 'interpolatedPeak', label: 'Peak between samples' },
  { value: 'samplePeak', label: 'Sample peak' },
  { value: 'componentPeak', label: 'I or Q peak' },
  { value: 'rms', label: 'RMS' },
];

/** Where full scale stands: what is held under it, and by how much. */
export function LevelSheet({ table }: { table: TableContext }) {
  const { editor, perform } = table;
  const { level } = useSettings(editor);
  const [error, setError] = useState<string | null>(null);
  const set = (change: Partial<typeof level>) =>
    setError(perform(planSettings(editor.document, { level: { ...level, ...change } }, 'Set level')));
  return (
    <TableSheet title="Level" onClose={close(table)}>
      <Text variant="small" weight={500}>
        Held under full scale
      </Text>
      <ChoiceBlank
        label="Held under full scale"
        fill
        value={level.reference}
        options={REFERENCES}
        onSet={(reference) => set({ reference })}
      />
      <NumberField
        label="Headroom"
        unit="dB"
        value={decibels(level.headroomDb)}
        limits="0 to 60 dB"
        error={error}
        style={styles.field}
        onSet={(text) => {
          const parsed = parseQuantity(text, 'dB');
          if (parsed.ok) set({ headroomDb: parsed.value });
          else setError(parsed.message);
        }}
        onStep={(steps) => set({ headroomDb: Math.max(0, Math.min(60, level.headroomDb + steps * 0.1)) })}
      />
      {level.reference === 'rms' ? (
        <Text variant="small" tone="quiet">
          With RMS the peak may pass full scale: what saturates is counted in the pack and shown.
        </Text>
      ) : null}
    </TableSheet>
  );
}

interface IntentWord {
  key: keyof WaveformIntent;
  label: string;
  unit: string;
  limits: string;
  /** May be left empty: no value is given. */
  mayBeEmpty: boolean;
}

const INTENT_WORDS: readonly IntentWord[] = [
  {
    key: 'outputRmsDbm',
    label: 'RMS wanted at the device',
    unit: 'dBm',
    limits: '−200 to 100 dBm; empty: not set',
    mayBeEmpty: true,
  },
  {
    key: 'lossDb',
    label: 'Loss before it, cable and attenuator',
    unit: 'dB',
    limits: '0 to 200 dB',
    mayBeEmpty: false,
  },
  {
    key: 'devicePeakLimitDbm',
    label: 'Peak limit of the device',
    unit: 'dBm',
    limits: '−200 to 100 dBm; empty: no limit given',
    mayBeEmpty: true,
  },
  {
    key: 'deviceMeanLimitDbm',
    label: 'Mean limit of the device',
    unit: 'dBm',
    limits: '−200 to 100 dBm; empty: no limit given',
    mayBeEmpty: true,
  },
  { key: 'levelToleranceDb', label: 'Tolerance of the level', unit: 'dB', limits: '0 to 20 dB', mayBeEmpty: false },
];

/** What is meant at the device's connector. It decides no sample; the level card is made of it. */
export function DeviceSheet({ table }: { table: TableContext }) {
  const { editor, perform } = table;
  const intent = useIntent(editor);
  const [errors, setErrors] = useState<Partial<Record<keyof WaveformIntent, string>>>({});
  const set = ({ key, mayBeEmpty }: IntentWord, text: string) => {
    const isEmpty = text.trim() === '';
    const parsed =
      isEmpty && mayBeEmpty ? ({ ok: true, value: null } as const) : parseQuantity(text.replace(/dBm?/i, ''));
    const error = parsed.ok
      ? perform(planSettings(editor.document, { intent: { ...intent, [key]: parsed.value } }, 'Set device'))
      : parsed.message;
    setErrors(({ [key]: _before, ...others }) => (error === null ? others : { ...others, [key]: error }));
  };
  return (
    <TableSheet title="Device" onClose={close(table)}>
      {INTENT_WORDS.map((word) => {
        const value = intent[word.key];
        return (
          <NumberField
            key={word.key}
            label={word.label}
            unit={word.unit}
            value={value === null ? '' : decibels(value)}
            limits={word.limits}
            error={errors[word.key] ?? null}
            onSet={(text) => set(word, text)}
          />
        );
      })}
    </TableSheet>
  );
}

const AT: readonly { value: Marker['at']; label: string }[] = [
  { value: 'file', label: 'File' },
  { value: 'repeat', label: 'Repeat' },
  { value: 'symbol', label: 'Symbol' },
];

const MARKERS_MOST = 4;

/** Marks of the vector: where each begins and how long it lasts, in output samples. */
export function MarkersSheet({ table }: { table: TableContext }) {
  const { editor, perform } = table;
  const { markers, symbolCount } = useSettings(editor);
  const [error, setError] = useState<{ at: number; words: string } | null>(null);
  const set = (at: number, next: Marker[], label: string) => {
    const words = perform(planSettings(editor.document, { markers: next }, label));
    setError(words === null ? null : { at, words });
  };
  const change = (at: number, to: Partial<Marker>) =>
    set(
      at,
      markers.map((marker, i) => (i === at ? { ...marker, ...to } : marker)),
      `Change marker “${markers[at]!.name}”`,
    );
  const number = (
    at: number,
    text: string,
    toChange: (value: number | null) => Partial<Marker>,
    mayBeEmpty = false,
  ) => {
    if (mayBeEmpty && text.trim() === '') return change(at, toChange(null));
    const parsed = parseInteger(text);
    if (parsed.ok) change(at, toChange(parsed.value));
    else setError({ at, words: parsed.message });
  };
  return (
    <TableSheet
      title="Markers"
      onClose={close(table)}
      foot={
        <Button
          disabledBecause={markers.length >= MARKERS_MOST ? `There are ${MARKERS_MOST} markers already.` : null}
          onPress={() =>
            set(
              markers.length,
              [
                ...markers,
                {
                  name: `Marker ${markers.length + 1}`,
                  at: 'repeat',
                  symbol: null,
                  offsetSamples: 0,
                  lengthSamples: 100,
                },
              ],
              'Add a marker',
            )
          }
        >
          Add a marker
        </Button>
      }
    >
      {markers.length === 0 ? <Text tone="quiet">No markers. The vector plays without them.</Text> : null}
      {markers.map((marker, at) => (
        <View key={at} style={styles.marker}>
          <TextField label="Name" defaultValue={marker.name} onBlur={(event) => change(at, { name: textOf(event) })} />
          <OneOf
            label="From the first sample of"
            choices={AT}
            value={marker.at}
            onChange={(value) => change(at, { at: value, symbol: null })}
          />
          {marker.at === 'symbol' ? (
            <NumberField
              label="Symbol"
              value={marker.symbol === null ? '' : String(marker.symbol)}
              limits={`0 to ${symbolCount - 1}; empty: each symbol`}
              onSet={(text) => number(at, text, (symbol) => ({ symbol }), true)}
            />
          ) : null}
          <View style={styles.pair}>
            <NumberField
              label="Offset"
              unit="samples"
              style={styles.half}
              value={String(marker.offsetSamples).replace('-', '−')}
              limits="output samples, either way"
              onSet={(text) => number(at, text, (value) => ({ offsetSamples: value ?? 0 }))}
            />
            <NumberField
              label="Length"
              unit="samples"
              style={styles.half}
              value={String(marker.lengthSamples)}
              limits="1 or more"
              onSet={(text) => number(at, text, (value) => ({ lengthSamples: value ?? 1 }))}
            />
          </View>
          {error?.at === at ? (
            <Text variant="small" tone="danger" role="alert">
              {error.words}
            </Text>
          ) : null}
          <Button
            kind="plain"
            onPress={() =>
              set(
                at,
                markers.filter((_, i) => i !== at),
                `Remove marker “${marker.name}”`,
              )
            }
          >
            {`Remove “${marker.name}”`}
          </Button>
        </View>
      ))}
    </TableSheet>
  );
}

const textOf = (event: unknown) => (event as { target: { value: string } }).target.value;

/** The waveform's title. It is not in the digest. */
export function TitleSheet({ table }: { table: TableContext }) {
  const { editor, perform } = table;
  const title = useTitle(editor);
  const [text, setText] = useState(title);
  const [error, setError] = useState<string | null>(null);
  const set = () => {
    const words = perform(
      planSettings(
        editor.document,
        { about: { ...editor.document.about, title: text.trim().normalize('NFC') } },
        'Rename',
      ),
    );
    setError(words);
    if (words === null) table.open(null);
  };
  return (
    <TableSheet
      title="Title"
      onClose={close(table)}
      foot={
        <Button kind="filled" onPress={set}>
          Rename the waveform
        </Button>
      }
    >
      <TextField
        label="Title"
        value={text}
        onChangeText={setText}
        maxLength={120}
        error={error}
        onSubmitEditing={set}
        autoFocus
      />
    </TableSheet>
  );
}

const styles = StyleSheet.create({
  field: { marginTop: 12 },
  marker: { gap: 4, paddingVertical: 10, borderBottomWidth: 1, borderBottomColor: color.rule.line },
  pair: { flexDirection: 'row', gap: 12 },
  half: { flex: 1 },
});
