import { createContext, useContext, useMemo, type ReactNode } from 'react';
import { Pressable, StyleSheet, View } from 'react-native';
import { copyAndSay } from './copyText';
import { Text } from './Text';
import { color } from './theme';
import { showToast } from './toast';
import { useBreakpoint } from './useBreakpoint';

const bare = (digest: string) => digest.replace(/^sha256:/, '');

const EqualDigests = createContext<ReadonlySet<string>>(new Set());

/** A view of several digests: those that are equal carry "same". */
export function DigestsInView({ digests, children }: { digests: readonly string[]; children: ReactNode }) {
  const key = digests.join();
  const equal = useMemo(() => {
    const all = key.split(',');
    return new Set(all.filter((digest, i) => all.indexOf(digest) !== i));
  }, [key]);
  return <EqualDigests value={equal}>{children}</EqualDigests>;
}

/** First and last four digits of a SHA-256; press copies the whole, a long one shows it in groups of eight. */
export function DigestChip({ digest }: { digest: string }) {
  const same = useContext(EqualDigests).has(digest);
  const hex = bare(digest);
  const touch = useBreakpoint() === 'phone';
  const groups = hex.match(/.{1,8}/g)?.join(' ') ?? hex;
  return (
    <Pressable
      role="button"
      aria-label={`Digest ${hex.slice(0, 4)}…${hex.slice(-4)}${same ? ', same as another here' : ''}, copy`}
      onPress={() => void copyAndSay(hex, 'Digest copied')}
      onLongPress={() => showToast(groups)}
      style={touch ? styles.target : styles.hug}
      {...({ title: groups } as object)}
    >
      <View style={styles.chip}>
        <Text variant="figureSmall">{`${hex.slice(0, 4)}…${hex.slice(-4)}`}</Text>
        {same ? (
          <Text variant="label" tone="quiet">
            same
          </Text>
        ) : null}
      </View>
    </Pressable>
  );
}

const styles = StyleSheet.create({
  hug: { width: 'fit-content' as 'auto', flexShrink: 0 },
  // the chip stays small to the eye; a thumb gets its 44 px
  target: { minHeight: 44, width: 'fit-content' as 'auto', justifyContent: 'center', flexShrink: 0 },
  chip: {
    flexDirection: 'row',
    gap: 6,
    alignItems: 'center',
    height: 24,
    paddingHorizontal: 8,
    borderRadius: 3,
    borderWidth: 1,
    borderColor: color.rule.line,
    backgroundColor: color.surface.sunken,
  },
});
