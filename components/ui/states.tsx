import { Link, type Href } from 'expo-router';
import { useEffect, useState, type ReactNode } from 'react';
import { StyleSheet, View } from 'react-native';
import { Button } from './Button';
import { Notice } from './Notice';
import { Text } from './Text';
import { color } from './theme';

/** One sentence and one act, no picture. */
export function Empty({ children, action }: { children: string; action?: ReactNode }) {
  return (
    <View style={styles.empty}>
      <Text tone="quiet">{children}</Text>
      {action}
    </View>
  );
}

/** Ruled outlines of the rows to come, after 150 ms. */
export function Loading({ what, rows = 5, rowHeight = 68 }: { what: string; rows?: number; rowHeight?: number }) {
  const [late, setLate] = useState(false);
  useEffect(() => {
    const timer = setTimeout(() => setLate(true), 150);
    return () => clearTimeout(timer);
  }, []);
  return (
    <View role="status" aria-label={`Loading ${what}`} style={styles.loading}>
      {late
        ? Array.from({ length: rows }, (_, i) => <View key={i} style={[styles.outline, { height: rowHeight }]} />)
        : null}
    </View>
  );
}

/** Stands in the content's place. */
export function Failing({ what, onRetry }: { what: string; onRetry: () => void }) {
  return (
    <Notice kind="danger" actions={<Button onPress={onRetry}>Try again</Button>}>
      {what}
    </Notice>
  );
}

function WholePage({ title, words, way }: { title: string; words: string; way: { label: string; href: Href } }) {
  return (
    <View style={styles.whole}>
      <Text variant="title" heading={1} tone="strong">
        {title}
      </Text>
      <Text>{words}</Text>
      <Link href={way.href}>
        <Text weight={600} tone="accent">
          {way.label}
        </Text>
      </Link>
    </View>
  );
}

const back = { label: 'Back to waveforms', href: '/waveforms' as Href };

export function Forbidden() {
  return (
    <WholePage
      title="Not for your roles"
      words="Your roles do not include this page. An admin can change that."
      way={back}
    />
  );
}

export function NotThere() {
  return (
    <WholePage title="Nothing here" words="There is nothing at this address. It may have been removed." way={back} />
  );
}

const styles = StyleSheet.create({
  empty: { padding: 24, gap: 12, alignItems: 'flex-start' },
  loading: { gap: 0, minHeight: 200 },
  outline: { borderWidth: 1, borderColor: color.rule.hair, backgroundColor: color.surface.sheet, marginTop: -1 },
  whole: { flex: 1, gap: 12, padding: 24, maxWidth: 520, width: '100%', alignSelf: 'center', justifyContent: 'center' },
});
