import type { Href } from 'expo-router';
import { useEffect, useState, type ReactNode } from 'react';
import { StyleSheet, View } from 'react-native';
import { Button } from './Button';
import { Notice } from './Notice';
import { Text } from './Text';
import { TextLink } from './TextLink';
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
    <View role="status" style={styles.loading}>
      <Text style={styles.unseen}>{`Loading ${what}`}</Text>
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

function WholePage({
  title,
  words,
  way,
  level,
}: {
  title: string;
  words: string;
  way: { label: string; href: Href };
  level: 1 | 2;
}) {
  return (
    <View style={styles.whole}>
      <Text variant="title" heading={level} tone="strong">
        {title}
      </Text>
      <Text>{words}</Text>
      <TextLink href={way.href}>{way.label}</TextLink>
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
      level={2}
    />
  );
}

/** `alone`: without the frame of a page, so that its title is the page's. */
export function NotThere({ alone = false }: { alone?: boolean }) {
  return (
    <WholePage
      title="Nothing here"
      words="There is nothing at this address. It may have been removed."
      way={back}
      level={alone ? 1 : 2}
    />
  );
}

const styles = StyleSheet.create({
  empty: { padding: 24, gap: 12, alignItems: 'flex-start' },
  loading: { gap: 0, minHeight: 200 },
  unseen: { position: 'absolute', width: 1, height: 1, overflow: 'hidden', opacity: 0 },
  outline: { borderWidth: 1, borderColor: color.rule.hair, backgroundColor: color.surface.sheet, marginTop: -1 },
  whole: { flex: 1, gap: 12, padding: 24, maxWidth: 520, width: '100%', alignSelf: 'center', justifyContent: 'center' },
});
