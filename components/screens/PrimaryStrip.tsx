import type { ReactNode } from 'react';
import { StyleSheet, View } from 'react-native';
import { color } from '@/components/ui/theme';

/** The page's primary act under the thumb: a strip over the foot bar of a phone. */
export function PrimaryStrip({ children }: { children: ReactNode }) {
  return <View style={styles.strip}>{children}</View>;
}

const styles = StyleSheet.create({
  strip: {
    position: 'sticky' as 'absolute',
    bottom: 0,
    marginTop: 'auto',
    marginHorizontal: -12,
    marginBottom: -12,
    padding: 10,
    paddingHorizontal: 12,
    flexDirection: 'row',
    backgroundColor: color.surface.trough,
    borderTopWidth: 1,
    borderTopColor: color.rule.line,
  },
});
