import { StyleSheet, View } from 'react-native';
import { Text } from '@/components/ui/Text';
import { color } from '@/components/ui/theme';
import { formatNumber } from '@/lib/drawing/quantities';
import type { BenchContent } from '@/lib/synth';
import type { ShownFile, ShownWord } from './firstWords';

export const hex = (byte: number) => byte.toString(16).toUpperCase().padStart(2, '0');

/** A stored number, short enough to stand under its boxes. */
export const numberOf = (bench: BenchContent, value: number) =>
  bench.word === 'float32' ? formatNumber(value, 4) : formatNumber(value);

const roleWords = { vector: null, vectorI: 'the file that ends in -i', vectorQ: 'the file that ends in -q' } as const;

function spokenOf(bench: BenchContent, file: ShownFile): string {
  let at = 0;
  return file.words
    .flatMap(({ name, sample, bytes, value }) =>
      bytes.map(
        (byte, i) => `byte ${at++}, ${hex(byte)}, ${name} ${sample}${i === 0 ? ` is ${numberOf(bench, value)}` : ''}`,
      ),
    )
    .join('; ');
}

/** Words that belong to one sample, under one bracket. */
function groupsOf(words: readonly ShownWord[]): ShownWord[][] {
  const groups: ShownWord[][] = [];
  for (const word of words) {
    const last = groups.at(-1);
    if (last?.[0]!.sample === word.sample) last.push(word);
    else groups.push([word]);
  }
  return groups;
}

/** A file's first words, byte by byte, I and Q named; of text its first lines. */
export function WordRow({ bench, file }: { bench: BenchContent; file: ShownFile }) {
  const where = roleWords[file.role];
  return (
    <View style={styles.file}>
      {where ? (
        <Text variant="small" tone="quiet">
          {`In ${where}`}
        </Text>
      ) : null}
      {file.lines ? <Lines file={file} /> : <Bytes bench={bench} file={file} />}
    </View>
  );
}

function Lines({ file: { lines, words } }: { file: ShownFile }) {
  const names = [...new Set(words.map(({ name }) => name))].join(', ');
  return (
    <View role="img" aria-label={`Columns ${names}: ${lines!.join('; ')}`} style={styles.lines}>
      {lines!.map((line, i) => (
        <Text key={i} variant="figureSmall" tone={i === 0 ? 'quiet' : 'strong'} style={styles.line}>
          {line}
        </Text>
      ))}
    </View>
  );
}

function Bytes({ bench, file }: { bench: BenchContent; file: ShownFile }) {
  const size = file.words[0]?.bytes.length ?? 1;
  const perSample = file.role === 'vector' ? 2 : 1;
  return (
    <View role="img" aria-label={spokenOf(bench, file)} style={styles.words}>
      {groupsOf(file.words).map((group) => (
        <View key={group[0]!.sample} style={styles.sample}>
          <Text variant="axis" tone="quiet" style={styles.centre} numberOfLines={1}>
            {group.length * size < 4 ? group[0]!.sample : `sample ${group[0]!.sample}`}
          </Text>
          <View style={styles.bracket} />
          <View style={styles.group}>
            {group.map((word, w) => (
              <View key={w} style={{ width: word.bytes.length * 24 }}>
                <View style={styles.boxes}>
                  {word.bytes.map((byte, i) => (
                    <View
                      key={i}
                      style={[
                        styles.box,
                        i > 0 ? styles.inner : null,
                        { backgroundColor: word.name === 'I' ? color.plot.traceFill : color.surface.sunken },
                      ]}
                    >
                      <Text variant="figureSmall" weight={600} tone="strong">
                        {hex(byte)}
                      </Text>
                    </View>
                  ))}
                </View>
                <Text variant="axis" tone={word.name === 'I' ? 'strong' : 'success'} style={styles.centre}>
                  {word.name}
                </Text>
                <Text variant="axis" style={styles.centre} numberOfLines={1}>
                  {numberOf(bench, word.value)}
                </Text>
                <Text variant="axis" tone="quiet" style={styles.centre} numberOfLines={1}>
                  {byteLabel(file.headBytes, (word.sample * perSample + w) * size)}
                </Text>
              </View>
            ))}
          </View>
        </View>
      ))}
    </View>
  );
}

/** Counted from the file's first byte, its head in. */
const byteLabel = (headBytes: number, at: number) => (headBytes + at === 0 ? 'byte 0' : String(headBytes + at));

const styles = StyleSheet.create({
  file: { gap: 4 },
  words: { flexDirection: 'row', flexWrap: 'wrap', rowGap: 10, columnGap: 2 },
  sample: { minWidth: 0 },
  bracket: {
    height: 5,
    marginHorizontal: 1,
    marginBottom: 3,
    borderWidth: 1,
    borderBottomWidth: 0,
    borderColor: color.rule.control,
  },
  group: { flexDirection: 'row', gap: 1 },
  boxes: { flexDirection: 'row', borderWidth: 1, borderColor: color.rule.control },
  box: { flexGrow: 1, flexBasis: 0, height: 30, alignItems: 'center', justifyContent: 'center' },
  inner: { borderLeftWidth: 1, borderLeftColor: color.rule.line },
  centre: { textAlign: 'center' },
  lines: {
    padding: 8,
    borderWidth: 1,
    borderColor: color.rule.control,
    backgroundColor: color.surface.sunken,
    overflow: 'scroll',
  },
  line: { whiteSpace: 'pre' } as object,
});
