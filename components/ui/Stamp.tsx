import { StyleSheet, View } from 'react-native';
import { Text } from './Text';
import { color } from './theme';

export type StampState = 'draft' | 'inReview' | 'released' | 'withdrawn';

const words: Record<StampState, string> = {
  draft: 'Draft',
  inReview: 'In review',
  released: 'Released',
  withdrawn: 'Withdrawn',
};

/** A state as a word in a frame: dashed, single, double or with a heavy lower edge, never a colour alone. */
export function Stamp({ state, edition }: { state: StampState; edition?: number | null }) {
  const text =
    edition && (state === 'released' || state === 'withdrawn') ? `${words[state]}, edition ${edition}` : words[state];
  return (
    <View style={[styles.frame, frames[state], { borderColor: color.stamp[state] }]}>
      <Text variant="stamp" tone="inherit" numberOfLines={1} style={{ color: color.stamp[state] }}>
        {text}
      </Text>
    </View>
  );
}

const styles = StyleSheet.create({
  frame: {
    height: 24,
    paddingHorizontal: 8,
    borderRadius: 2,
    borderWidth: 1.5,
    width: 'fit-content' as 'auto',
    justifyContent: 'center',
    flexShrink: 0,
  },
});

const frames = StyleSheet.create({
  draft: { borderStyle: 'dashed' },
  inReview: { borderStyle: 'solid' },
  released: { borderStyle: 'double' as 'solid', borderWidth: 3, paddingHorizontal: 7, height: 25 },
  withdrawn: { borderStyle: 'solid', borderBottomWidth: 4, height: 26 },
});
