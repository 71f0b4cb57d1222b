import { createElement, useRef, useState } from 'react';
import { StyleSheet, View } from 'react-native';
import { Blank, ChoiceBlank } from '@/components/ui/Blank';
import { Button } from '@/components/ui/Button';
import { Text } from '@/components/ui/Text';
import { TextField } from '@/components/ui/TextField';
import { color } from '@/components/ui/theme';
import { OneOf } from '@/components/ui/WordsToPress';
import { encodeBase64 } from '@/lib/document/base64';
import { formatInteger, parseInteger } from '@/lib/drawing/quantities';
import { planAddStream, planChangeStream, planRemoveStream } from '@/lib/editor/commands/tray';
import type { PayloadSource, Stream } from '@/lib/synth';
import { NAMED_REGISTERS, registerName, streamText } from '../inkWords';
import type { TableContext } from '../tableContext';
import { useSettings } from '../useEditorState';
import { TableSheet } from './TableSheet';

type SourceKind = PayloadSource['kind'];

const KINDS: readonly { value: SourceKind; label: string }[] = [
  { value: 'pn', label: 'Noise' },
  { value: 'gold', label: 'Gold' },
  { value: 'zeros', label: 'Zeros' },
  { value: 'ones', label: 'Ones' },
  { value: 'pattern', label: 'Pattern' },
  { value: 'uploaded', label: 'File' },
];

const UPLOAD_BYTES_MOST = 2 ** 20;

function firstSource(kind: SourceKind): PayloadSource | null {
  switch (kind) {
    case 'pn':
      return { kind, stages: 15, taps: [14, 15], seed: 32767, inverted: true };
    case 'gold':
      return { kind, cInit: 0 };
    case 'zeros':
    case 'ones':
      return { kind };
    case 'pattern':
      return { kind, bits: '01' };
    case 'uploaded':
      return null;
  }
}

/** Where the data inks take their bits: one stream at a time, each set at once. */
export function PayloadSheet({ table, place }: { table: TableContext; place: number }) {
  const { editor, perform, open, rights } = table;
  const { streams } = useSettings(editor);
  const stream = streams[place];
  const [error, setError] = useState<string | null>(null);
  const set = (change: Partial<Omit<Stream, 'streamId'>>) => {
    if (!stream) return;
    const { streamId: _own, ...rest } = stream;
    setError(perform(planChangeStream(editor.document, place, { ...rest, ...change })));
  };
  const add = () => {
    const words = perform(
      planAddStream(editor.document, {
        name: `Payload ${streams.length + 1}`,
        source: firstSource('pn')!,
        fill: 'anchored',
        acrossRepeats: 'restart',
      }),
    );
    setError(words);
    if (words === null) open({ kind: 'payload', place: streams.length });
  };
  const remove = () => {
    const words = perform(planRemoveStream(editor.document, place));
    setError(words);
    if (words === null) open({ kind: 'payload', place: 0 });
  };
  return (
    <TableSheet
      key={place}
      title="Payload"
      onClose={() => open(null)}
      foot={
        rights.canDraw ? (
          <>
            <Button onPress={add}>Add a payload</Button>
            <View style={styles.spring} />
            {stream ? (
              <Button kind="grave" onPress={remove}>
                Remove this payload
              </Button>
            ) : null}
          </>
        ) : undefined
      }
    >
      <View style={styles.form}>
        {streams.length > 1 ? (
          <ChoiceBlank
            label="Payload"
            fill
            value={String(place)}
            options={streams.map((one, i) => ({ value: String(i), label: `${one.name}: ${streamText(one)}` }))}
            onSet={(value) => open({ kind: 'payload', place: Number(value) })}
          />
        ) : null}
        {stream ? (
          <StreamForm key={stream.streamId} stream={stream} set={set} setError={setError} />
        ) : (
          <Text tone="quiet">No payload. Data inks need one.</Text>
        )}
        {error ? (
          <Text variant="small" tone="danger" role="alert">
            {error}
          </Text>
        ) : null}
      </View>
    </TableSheet>
  );
}

function StreamForm({
  stream,
  set,
  setError,
}: {
  stream: Stream;
  set: (change: Partial<Stream>) => void;
  setError: (words: string | null) => void;
}) {
  const { source } = stream;
  const [wantsFile, setWantsFile] = useState(source.kind === 'uploaded');
  const choose = (kind: SourceKind) => {
    setError(null);
    setWantsFile(kind === 'uploaded');
    const first = kind === source.kind ? null : firstSource(kind);
    if (first) set({ source: first });
  };
  return (
    <>
      <TextField
        label="Name"
        defaultValue={stream.name}
        maxLength={60}
        onBlur={(event) => set({ name: textOf(event).trim() })}
      />
      <View>
        <Text variant="small" weight={500} style={styles.label}>
          Bits
        </Text>
        <OneOf label="Bits" choices={KINDS} value={wantsFile ? 'uploaded' : source.kind} onChange={choose} />
      </View>
      {wantsFile ? (
        <UploadField
          source={source.kind === 'uploaded' ? source : null}
          onFile={(next) => set({ source: next })}
          setError={setError}
        />
      ) : (
        <SourceBlanks source={source} set={(next) => set({ source: next })} setError={setError} />
      )}
      <View>
        <Text variant="small" weight={500} style={styles.label}>
          Fill
        </Text>
        <OneOf
          label="Fill"
          choices={[
            { value: 'anchored', label: 'Anchored' },
            { value: 'running', label: 'Running' },
          ]}
          value={stream.fill}
          onChange={(fill) => set({ fill })}
        />
        <Text variant="small" tone="quiet">
          {stream.fill === 'anchored'
            ? 'Each cell has its own bits: an edit changes the edited symbols alone.'
            : 'Cells take the next bits in order: an edit moves the bits of all cells behind it.'}
        </Text>
      </View>
      <View>
        <Text variant="small" weight={500} style={styles.label}>
          Across repeats
        </Text>
        <OneOf
          label="Across repeats"
          choices={[
            { value: 'restart', label: 'Restarts' },
            { value: 'continue', label: 'Continues' },
          ]}
          value={stream.acrossRepeats}
          onChange={(acrossRepeats) => set({ acrossRepeats })}
        />
      </View>
    </>
  );
}

const textOf = (event: unknown) => (event as { target: { value: string } }).target.value;

function SourceBlanks({
  source,
  set,
  setError,
}: {
  source: PayloadSource;
  set: (source: PayloadSource) => void;
  setError: (words: string | null) => void;
}) {
  const whole = (text: string, toSource: (value: number) => PayloadSource) => {
    const parsed = parseInteger(text);
    if (parsed.ok) set(toSource(parsed.value));
    else setError(parsed.message);
  };
  switch (source.kind) {
    case 'pn':
      return (
        <View style={styles.line}>
          <ChoiceBlank
            label="register"
            value={registerName(source)}
            options={[
              ...NAMED_REGISTERS.map((one) => ({ value: one.name, label: `${one.name}, ITU-T O.150` })),
              ...(NAMED_REGISTERS.some((one) => one.name === registerName(source))
                ? []
                : [{ value: registerName(source), label: registerName(source) }]),
            ]}
            onSet={(name) => {
              const register = NAMED_REGISTERS.find((one) => one.name === name);
              if (register)
                set({
                  kind: 'pn',
                  stages: register.stages,
                  taps: [...register.taps],
                  inverted: register.inverted,
                  seed: 2 ** register.stages - 1,
                });
            }}
          />
          <Text variant="small">seed</Text>
          <Blank
            label="seed"
            value={String(source.seed)}
            onSet={(text) => whole(text, (seed) => ({ ...source, seed }))}
          />
        </View>
      );
    case 'gold':
      return (
        <View style={styles.line}>
          <Text variant="small">Gold sequence from</Text>
          <Blank
            label="initial value"
            value={String(source.cInit)}
            onSet={(text) => whole(text, (cInit) => ({ kind: 'gold', cInit }))}
          />
        </View>
      );
    case 'pattern':
      return (
        <TextField
          label="Pattern"
          hint="0 and 1, up to 4096, over and over"
          defaultValue={source.bits}
          onBlur={(event) => {
            const bits = textOf(event).replace(/\s/g, '');
            if (/^[01]{1,4096}$/.test(bits)) set({ kind: 'pattern', bits });
            else setError('A pattern holds 1 to 4096 digits, each 0 or 1.');
          }}
        />
      );
    default:
      return null;
  }
}

/** A file of bits, most significant first. An empty one and one too large are refused in words. */
function UploadField(props: {
  source: Extract<PayloadSource, { kind: 'uploaded' }> | null;
  onFile: (source: PayloadSource) => void;
  setError: (words: string | null) => void;
}) {
  const { source, onFile, setError } = props;
  const input = useRef<HTMLInputElement>(null);
  const take = async (file: File | undefined) => {
    if (!file) return;
    if (file.size === 0)
      return setError(`“${file.name}” is empty: it holds no bits. Choose a file with at least one byte.`);
    if (file.size > UPLOAD_BYTES_MOST)
      return setError(
        `“${file.name}” holds ${formatInteger(file.size * 8)} bits. At most ${formatInteger(UPLOAD_BYTES_MOST * 8)} can be taken.`,
      );
    setError(null);
    const bytes = new Uint8Array(await file.arrayBuffer());
    const name =
      file.name
        .normalize('NFC')
        .replace(/\p{Cc}/gu, '')
        .slice(0, 60) || 'bits';
    onFile({ kind: 'uploaded', name, bitCount: bytes.length * 8, base64: encodeBase64(bytes) });
  };
  return (
    <View style={styles.upload}>
      {source ? (
        <Text variant="small">{`${source.name}, ${formatInteger(source.bitCount)} bits`}</Text>
      ) : (
        <Text variant="small">A file of bits, the most significant of each byte first.</Text>
      )}
      <Button onPress={() => input.current?.click()}>{source ? 'Choose another file' : 'Choose a file'}</Button>
      {createElement('input', {
        ref: input,
        type: 'file',
        'aria-label': 'File of bits',
        style: { display: 'none' },
        onChange: (event: { target: HTMLInputElement }) => {
          const file = event.target.files?.[0];
          event.target.value = '';
          void take(file);
        },
      })}
    </View>
  );
}

const styles = StyleSheet.create({
  form: { gap: 12 },
  spring: { flex: 1 },
  label: { marginBottom: 4 },
  line: { flexDirection: 'row', flexWrap: 'wrap', alignItems: 'center', gap: 8 },
  upload: {
    gap: 8,
    alignItems: 'flex-start',
    borderWidth: 1,
    borderColor: color.rule.line,
    backgroundColor: color.surface.raised,
    padding: 12,
  },
});
