import { StyleSheet, View } from 'react-native';
import { Button } from '@/components/ui/Button';
import { copyAndSay } from '@/components/ui/copyText';
import { Text } from '@/components/ui/Text';

/** What a plot shows, and Copy: its figures as text. */
export function PlotHead({ words, what, copied }: { words: string; what: string; copied: () => string }) {
  return (
    <View style={styles.head}>
      <Text variant="small" tone="quiet" style={styles.words}>
        {words}
      </Text>
      <Button
        kind="plain"
        size="small"
        label={`Copy ${what.toLowerCase()}`}
        onPress={() => void copyAndSay(copied(), `${what} copied`)}
      >
        Copy
      </Button>
    </View>
  );
}

const styles = StyleSheet.create({
  head: { flexDirection: 'row', alignItems: 'center', justifyContent: 'space-between', gap: 8, minHeight: 36 },
  words: { flexShrink: 1 },
});
