import { StyleSheet, View } from 'react-native';
import { Text } from '@/components/ui/Text';
import { color } from '@/components/ui/theme';
import { formatNumber } from '@/lib/drawing/quantities';
import { createWordWriter, type BenchContent } from '@/lib/synth';

const shownBytes = 16;

interface Words {
  bytes: Uint8Array;
  values: number[];
  bytesPerWord: number;
}

/** The first bytes of a ramp, by the writer that writes the packs: I counts up 1, 2, 3, Q down −1, −2, −3. */
function rampWords(content: BenchContent): Words | null {
  const isFloat = content.word === 'float32';
  try {
    const fullScale = isFloat ? 1 : 2 ** (content.bits - 1) - 1;
    const writer = createWordWriter(content, { scale: 1, fullScale, referenceLevel: fullScale, isSilent: false });
    const samples = Math.ceil(shownBytes / writer.bytesPerSample);
    const ramp = new Float64Array(2 * samples);
    const step = isFloat ? 0.25 : 1;
    for (let i = 0; i < samples; i++) {
      ramp[2 * i] = step * (i + 1);
      ramp[2 * i + 1] = -step * (i + 1);
    }
    const bytes = new Uint8Array(samples * writer.bytesPerSample);
    writer.write(ramp, samples, bytes);
    return { bytes, values: Array.from(ramp), bytesPerWord: writer.bytesPerSample / 2 };
  } catch {
    return null; // a layout that no pack can be written in yet
  }
}

const hex = (byte: number) => byte.toString(16).toUpperCase().padStart(2, '0');

/** Sixteen boxes in file order, I and Q named, one word in words. */
export function BytePicture({ content }: { content: BenchContent }) {
  const words = rampWords(content);
  if (!words)
    return (
      <View style={styles.sheet}>
        <Text variant="heading" heading={2} tone="strong">
          First 16 bytes
        </Text>
        <Text tone="quiet">
          No pack can be written in this layout yet. The profile is kept whole; fit and pack say so.
        </Text>
      </View>
    );
  const { bytes, values, bytesPerWord } = words;
  const order = content.byteOrder === 'little' ? 'Little-endian' : 'Big-endian';
  const one = Array.from(bytes.subarray(0, bytesPerWord), hex).join('\u00a0');
  const minus = Array.from(bytes.subarray(bytesPerWord, 2 * bytesPerWord), hex).join('\u00a0');
  const spoken = Array.from(
    bytes.subarray(0, shownBytes),
    (byte, i) =>
      `byte ${i}, ${hex(byte)}, ${(Math.floor(i / bytesPerWord) & 1) === 0 ? 'I' : 'Q'} ${Math.floor(i / (2 * bytesPerWord))}`,
  ).join('; ');
  return (
    <View style={styles.sheet}>
      <Text variant="heading" heading={2} tone="strong">
        First 16 bytes
      </Text>
      <Text variant="small" tone="quiet">
        As this profile writes them: each sample I then Q.
      </Text>
      <Text variant="small">
        <Text variant="small" weight={600} tone="strong">
          A ramp
        </Text>{' '}
        I counts up, Q counts down
      </Text>
      <View role="img" aria-label={spoken} style={styles.words}>
        {Array.from({ length: shownBytes / bytesPerWord }, (_, w) => {
          const isI = w % 2 === 0;
          return (
            <View key={w} style={styles.word}>
              <View style={styles.boxes}>
                {Array.from(bytes.subarray(w * bytesPerWord, (w + 1) * bytesPerWord), (byte, i) => (
                  <View
                    key={i}
                    style={[styles.box, { backgroundColor: isI ? color.plot.traceFill : color.surface.sunken }]}
                  >
                    <Text variant="figureSmall" weight={600} tone="strong">
                      {hex(byte)}
                    </Text>
                  </View>
                ))}
              </View>
              <Text variant="axis" tone={isI ? 'strong' : 'success'} style={styles.centre}>
                {isI ? 'I' : 'Q'}
              </Text>
              <Text variant="axis" style={styles.centre}>
                {formatNumber(values[w]!, 2)}
              </Text>
              <Text variant="axis" tone="quiet" style={styles.centre}>
                {w === 0 ? 'byte 0' : w * bytesPerWord}
              </Text>
            </View>
          );
        })}
      </View>
      <Text>
        {`${order}: the value ${formatNumber(values[0]!, 2)} is stored ${one}, and ${formatNumber(values[1]!, 2)} is stored ${minus}.`}
      </Text>
      {content.markers.packing === 'bytes' ? (
        <Text variant="small">Markers beside it, a byte a sample: bit 0 is the first marker.</Text>
      ) : null}
      <Text variant="small" tone="quiet">
        Take every limit from the generator’s manual.
      </Text>
    </View>
  );
}

const styles = StyleSheet.create({
  sheet: {
    gap: 8,
    padding: 16,
    borderWidth: 1.5,
    borderColor: color.rule.strong,
    backgroundColor: color.surface.sheet,
  },
  words: { flexDirection: 'row', flexWrap: 'wrap', rowGap: 10 },
  word: { marginRight: 3 },
  boxes: { flexDirection: 'row', borderWidth: 1, borderColor: color.rule.control },
  box: { width: 24, height: 30, alignItems: 'center', justifyContent: 'center' },
  centre: { textAlign: 'center' },
});
