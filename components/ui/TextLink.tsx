import { Link, type Href } from 'expo-router';
import { StyleSheet, View } from 'react-native';
import { Text } from './Text';
import { useBreakpoint } from './useBreakpoint';

/** A way to another page, as plain as a plain button: the same target under a thumb. */
export function TextLink({ href, children, label }: { href: Href; children: string; label?: string }) {
  const touch = useBreakpoint() === 'phone';
  return (
    <Link href={href} aria-label={label} style={styles.link}>
      <View style={[styles.target, touch ? styles.touch : null]}>
        <Text weight={600} tone="accent">
          {children}
        </Text>
      </View>
    </Link>
  );
}

const styles = StyleSheet.create({
  link: { display: 'flex', width: 'fit-content' as 'auto', textDecorationLine: 'none' },
  target: { minHeight: 36, justifyContent: 'center' },
  touch: { minHeight: 44, minWidth: 44 },
});
