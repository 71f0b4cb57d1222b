import { Pressable, StyleSheet } from 'react-native';
import { copyText } from './copyText';
import { Text } from './Text';
import { color } from './theme';
import { showToast } from './toast';

const bare = (digest: string) => digest.replace(/^sha256:/, '');

/** First and last four digits of a SHA-256; press copies the whole. */
export function DigestChip({ digest, same }: { digest: string; same?: boolean }) {
  const hex = bare(digest);
  const groups = hex.match(/.{1,8}/g)?.join(' ') ?? hex;
  return (
    <Pressable
      role="button"
      aria-label={`Digest ${hex.slice(0, 4)} … ${hex.slice(-4)}, copy`}
      onPress={() => void copyText(hex).then((done) => showToast(done ? 'Digest copied' : 'Copying was refused'))}
      style={styles.chip}
      {...({ title: groups } as object)}
    >
      <Text variant="figureSmall">{`${hex.slice(0, 4)}…${hex.slice(-4)}`}</Text>
      {same ? (
        <Text variant="label" tone="quiet">
          same
        </Text>
      ) : null}
    </Pressable>
  );
}

const styles = StyleSheet.create({
  chip: {
    flexDirection: 'row',
    gap: 6,
    alignItems: 'center',
    alignSelf: 'flex-start',
    height: 24,
    paddingHorizontal: 8,
    borderRadius: 3,
    borderWidth: 1,
    borderColor: color.rule.line,
    backgroundColor: color.surface.sunken,
    flexShrink: 0,
  },
});
