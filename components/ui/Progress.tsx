import { StyleSheet, View } from 'react-native';
import { color } from './theme';

/** A 4 px bar; its figure and Cancel stand beside it. */
export function Progress({ label, doneRatio }: { label: string; doneRatio: number }) {
  const percent = Math.round(Math.min(1, Math.max(0, doneRatio)) * 100);
  return (
    <View
      role="progressbar"
      aria-label={label}
      aria-valuemin={0}
      aria-valuemax={100}
      aria-valuenow={percent}
      style={styles.bar}
    >
      <View style={[styles.done, { width: `${percent}%` }]} />
    </View>
  );
}

const styles = StyleSheet.create({
  bar: { height: 4, backgroundColor: color.rule.line, alignSelf: 'stretch' },
  done: { height: 4, backgroundColor: color.accent.solid },
});
