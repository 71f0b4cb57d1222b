import { useState } from 'react';
import { StyleSheet, View } from 'react-native';
import type { CaptureState, ChosenCapture } from '@/components/live/useCapture';
import { NumberField } from '@/components/ui/NumberField';
import { Notice } from '@/components/ui/Notice';
import { Text } from '@/components/ui/Text';
import { color } from '@/components/ui/theme';
import { OneOf } from '@/components/ui/WordsToPress';
import type { PackDetail } from '@/lib/contracts/packs';
import { formatNumber, formatQuantity, parseQuantity } from '@/lib/drawing/quantities';
import { layoutWords, type CaptureLayout, type ChannelSource } from '@/lib/synth';

/** What the operator may say of a capture beside its layout. */
export interface CaptureChoices {
  /** Null: what the file says, else the vector's own. */
  clockHz: number | null;
  channel: ChannelSource;
  /** A limit to judge the EVM by; none is given with an edition. */
  limitPercent: number | null;
}

const sayers = { bytes: 'From its bytes', metadata: 'From its metadata', you: 'As you say' };

const bytesText = (bytes: number): string => `${formatNumber(bytes)} bytes`;

/** The chosen file, how its bytes are understood, and the two questions that only the operator can answer. */
export function CaptureForm({
  pack,
  state,
  chosen,
  hasPilots,
  choices,
  onChoices,
  onLayout,
}: {
  pack: PackDetail;
  state: CaptureState;
  chosen: ChosenCapture | null;
  hasPilots: boolean;
  choices: CaptureChoices;
  onChoices: (choices: CaptureChoices) => void;
  onLayout: (layout: CaptureLayout) => void;
}) {
  const words = state.kind === 'empty' || state.kind === 'chosen' ? state.words : null;
  return (
    <View style={styles.form}>
      {words ? <Notice kind={words.startsWith('Cancelled') ? 'plain' : 'danger'}>{words}</Notice> : null}
      {chosen === null ? (
        <>
          <Text>{`Record what comes back from the device while it plays ${pack.title}, and choose the file: raw I/Q words, a SigMF pair, WAV, NumPy or CSV; two files where I and Q stand apart.`}</Text>
          <Text tone="quiet">
            The capture stays on this device: it is read here, and nothing of it is sent or stored.
          </Text>
        </>
      ) : (
        <>
          <View style={styles.file}>
            <Text variant="figureSmall" tone="strong" style={styles.name} numberOfLines={2}>
              {chosen.name}
            </Text>
            <Text variant="small" tone="quiet">
              {bytesText(chosen.bytes)}
            </Text>
            <Text>{`${sayers[chosen.from]}: ${layoutWords(chosen.layout)}.`}</Text>
          </View>
          {chosen.layout.container === 'raw' ? <WordFields layout={chosen.layout} onLayout={onLayout} /> : null}
          <ClockField
            clockHz={choices.clockHz ?? chosen.clockHz ?? pack.sampleClockHz}
            says={chosen.clockHz === null ? "the vector's own" : 'from the file'}
            onClock={(clockHz) => onChoices({ ...choices, clockHz })}
          />
          <Labelled label="Channel from">
            <OneOf
              label="Channel from"
              value={choices.channel}
              choices={[
                { value: 'allKnown', label: 'All known cells' },
                {
                  value: 'pilots',
                  label: 'Pilots',
                  offBecause: hasPilots ? null : 'No pilot is painted in this edition.',
                },
              ]}
              onChange={(channel) => onChoices({ ...choices, channel })}
            />
          </Labelled>
          <LimitField
            limitPercent={choices.limitPercent}
            onLimit={(limitPercent) => onChoices({ ...choices, limitPercent })}
          />
          <Text variant="small" tone="quiet">
            The capture stays on this device: it is read here, and nothing of it is sent or stored.
          </Text>
        </>
      )}
    </View>
  );
}

type Word = 'int8' | 'int16' | 'float32';

/** The words of a raw file, guessed and changeable. */
function WordFields({ layout, onLayout }: { layout: CaptureLayout; onLayout: (layout: CaptureLayout) => void }) {
  const isFloat = layout.word === 'float32';
  const setWord = (word: Word) =>
    onLayout({
      ...layout,
      word,
      bits: word === 'int8' ? 8 : 16,
      align: 'right',
      numberFormat: word === 'float32' ? 'twosComplement' : layout.numberFormat,
    });
  return (
    <>
      <Labelled label="Words">
        <OneOf<Word>
          label="Words"
          value={layout.word}
          choices={[
            { value: 'int8', label: '8 bits' },
            { value: 'int16', label: '16 bits' },
            { value: 'float32', label: '32-bit floats' },
          ]}
          onChange={setWord}
        />
      </Labelled>
      {layout.word === 'int8' ? null : (
        <Labelled label="Byte order">
          <OneOf
            label="Byte order"
            value={layout.byteOrder}
            choices={[
              { value: 'little', label: '1 is 01 00' },
              { value: 'big', label: '1 is 00 01' },
            ]}
            onChange={(byteOrder) => onLayout({ ...layout, byteOrder })}
          />
        </Labelled>
      )}
      {isFloat ? null : (
        <Labelled label="Zero">
          <OneOf
            label="Zero"
            value={layout.numberFormat}
            choices={[
              { value: 'twosComplement', label: "Two's complement" },
              { value: 'offsetBinary', label: 'Offset binary' },
            ]}
            onChange={(numberFormat) => onLayout({ ...layout, numberFormat })}
          />
        </Labelled>
      )}
      {layout.word === 'int16' ? (
        <NumberField
          label="Bits of a word"
          value={String(layout.bits)}
          unit={layout.bits < 16 ? `${layout.align}-aligned` : 'bits'}
          limits="8 to 16"
          {...(layout.bits < 16
            ? {
                units: ['left-aligned', 'right-aligned'],
                onUnit: (unit: string) => onLayout({ ...layout, align: unit === 'left-aligned' ? 'left' : 'right' }),
              }
            : {})}
          onSet={(text) => {
            const bits = Number(text);
            if (Number.isInteger(bits) && bits >= 8 && bits <= 16) onLayout({ ...layout, bits });
          }}
          onStep={(steps) => onLayout({ ...layout, bits: Math.max(8, Math.min(16, layout.bits + steps)) })}
        />
      ) : null}
    </>
  );
}

function ClockField({ clockHz, says, onClock }: { clockHz: number; says: string; onClock: (clockHz: number) => void }) {
  const [error, setError] = useState<string | null>(null);
  const { value, unit } = formatQuantity(clockHz, 'Hz', 12);
  return (
    <NumberField
      label={`Clock of the capture, ${says}`}
      value={value}
      unit={unit}
      limits="a fraction p/q of the vector's clock, both up to 64, within 20 ppm"
      error={error}
      words
      onSet={(text) => {
        const parsed = parseQuantity(/[a-z]/i.test(text) ? text : `${text} ${unit}`, 'Hz');
        if (!parsed.ok || parsed.value <= 0) return setError(parsed.ok ? 'A clock is above 0 Hz.' : parsed.message);
        setError(null);
        onClock(parsed.value);
      }}
    />
  );
}

function LimitField({
  limitPercent,
  onLimit,
}: {
  limitPercent: number | null;
  onLimit: (limit: number | null) => void;
}) {
  const [error, setError] = useState<string | null>(null);
  return (
    <NumberField
      label="EVM limit, if there is one"
      value={limitPercent === null ? '' : formatNumber(limitPercent, 3)}
      unit="%"
      error={error}
      onSet={(text) => {
        if (text.trim() === '') {
          setError(null);
          return onLimit(null);
        }
        const parsed = parseQuantity(text);
        if (!parsed.ok || parsed.value <= 0 || parsed.value > 1000) return setError('A limit lies above 0 %.');
        setError(null);
        onLimit(parsed.value);
      }}
    />
  );
}

function Labelled({ label, children }: { label: string; children: React.ReactNode }) {
  return (
    <View style={styles.labelled}>
      <Text variant="small" weight={500}>
        {label}
      </Text>
      {children}
    </View>
  );
}

const styles = StyleSheet.create({
  form: { gap: 12, maxWidth: 560, width: '100%' },
  file: { gap: 2, paddingVertical: 8, borderTopWidth: 1, borderBottomWidth: 1, borderColor: color.rule.line },
  name: { flexShrink: 1 },
  labelled: { gap: 4 },
});
