import { StyleSheet, View } from 'react-native';
import { Blank, ChoiceBlank } from '@/components/ui/Blank';
import { Text } from '@/components/ui/Text';
import { formatInteger, formatNumber, parseInteger, parseQuantity } from '@/lib/drawing/quantities';
import type { PeakBlanks, WayId } from './peakWords';

interface Stream {
  streamId: string;
  name: string;
  least: number;
  most: number;
}

/** The chosen way's sentence with its blanks; a blank out of its limits is taken to the nearest. */
export function PeakBlanksRow(props: {
  way: WayId;
  blanks: PeakBlanks;
  streams: readonly Stream[];
  onSet: (change: Partial<PeakBlanks>) => void;
}) {
  const { way, blanks, streams, onSet } = props;
  const decibels = (label: string, key: 'toneTargetDb' | 'clipTargetDb') => (
    <>
      <Blank
        label={label}
        value={formatNumber(blanks[key], 2)}
        onSet={(text) => {
          const parsed = parseQuantity(text, 'dB');
          if (parsed.ok) onSet({ [key]: Math.max(3, Math.min(20, parsed.value)) });
        }}
        onStep={(steps) => onSet({ [key]: Math.max(3, Math.min(20, Math.round(10 * blanks[key] + steps) / 10)) })}
      />
      <Text>dB over the mean,</Text>
    </>
  );
  const whole = (
    label: string,
    key: 'tonePasses' | 'clipPasses' | 'firstSeed' | 'tries',
    least: number,
    most: number,
  ) => {
    const take = (value: number) => onSet({ [key]: Math.max(least, Math.min(most, Math.round(value))) });
    return (
      <Blank
        label={label}
        value={formatInteger(blanks[key])}
        onSet={(text) => {
          const parsed = parseInteger(text);
          if (parsed.ok) take(parsed.value);
        }}
        onStep={(steps) => take(blanks[key] + steps)}
      />
    );
  };
  if (way === 'phases')
    return (
      <Text variant="small" tone="quiet">
        Newman’s and Schroeder’s phases on all pilots and tones; tones alone in their symbol at every 15°.
      </Text>
    );
  if (way === 'seed') {
    const stream = streams.find(({ streamId }) => streamId === blanks.streamId) ?? streams[0];
    if (!stream) return null;
    return (
      <View style={styles.sentence}>
        <Text>Seeds from</Text>
        {whole('First seed', 'firstSeed', stream.least, Math.max(stream.least, stream.most - blanks.tries + 1))}
        <Text>on,</Text>
        {whole('Tries', 'tries', 1, Math.min(10000, stream.most - blanks.firstSeed + 1))}
        <Text>tries of</Text>
        {streams.length > 1 ? (
          <ChoiceBlank
            label="Payload"
            value={stream.streamId}
            options={streams.map(({ streamId, name }) => ({ value: streamId, label: name }))}
            onSet={(streamId) => onSet({ streamId })}
          />
        ) : (
          <Text>{stream.name}</Text>
        )}
      </View>
    );
  }
  const isClip = way === 'clipAndFilter';
  return (
    <View style={styles.sentence}>
      <Text>{isClip ? 'Clip at' : 'Fill down to'}</Text>
      {isClip ? decibels('Clip level', 'clipTargetDb') : decibels('Target', 'toneTargetDb')}
      {isClip ? whole('Passes', 'clipPasses', 1, 1000) : whole('Most passes', 'tonePasses', 1, 1000)}
      <Text>{isClip ? 'passes' : 'passes at most'}</Text>
    </View>
  );
}

const styles = StyleSheet.create({
  sentence: { flexDirection: 'row', flexWrap: 'wrap', alignItems: 'center', columnGap: 8, rowGap: 6 },
});
