import { StyleSheet, View } from 'react-native';
import type { CaptureStep } from '@/components/live/useCapture';
import { Progress } from '@/components/ui/Progress';
import { Text } from '@/components/ui/Text';
import { formatNumber } from '@/lib/drawing/quantities';

const steps: { step: CaptureStep; words: string }[] = [
  { step: 'reading', words: 'Reading' },
  { step: 'synchronizing', words: 'Synchronizing' },
  { step: 'demodulating', words: 'Demodulating' },
];

/** Which step it is at, and how far. A capture that is not its edition's is compared with the others as a fourth step. */
export function CaptureProgress({ step, doneRatio }: { step: CaptureStep; doneRatio: number }) {
  const shown = step === 'comparing' ? [...steps.slice(0, 2), { step, words: 'Comparing with other editions' }] : steps;
  const at = shown.findIndex((one) => one.step === step);
  return (
    <View style={styles.place}>
      <View style={styles.steps}>
        {shown.map((one, i) => (
          <Text
            key={one.step}
            variant="small"
            weight={i === at ? 600 : 400}
            tone={i === at ? 'strong' : i < at ? 'body' : 'faint'}
            aria-current={i === at ? 'step' : undefined}
          >
            {one.words}
          </Text>
        ))}
      </View>
      <Progress label={shown[at]!.words} doneRatio={doneRatio} />
      <Text variant="small" tone="quiet" role="status">
        {`${shown[at]!.words} ${formatNumber(Math.floor(100 * doneRatio))} %`}
      </Text>
    </View>
  );
}

const styles = StyleSheet.create({
  place: { gap: 8, paddingVertical: 12 },
  steps: { flexDirection: 'row', flexWrap: 'wrap', gap: 16 },
});
