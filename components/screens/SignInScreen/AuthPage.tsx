import type { ReactNode } from 'react';
import { ScrollView, StyleSheet, View } from 'react-native';
import { DemoBand } from '@/components/ui/DemoBand';
import { Mark } from '@/components/ui/Mark';
import { Text } from '@/components/ui/Text';
import { color } from '@/components/ui/theme';
import { useBreakpoint } from '@/components/ui/useBreakpoint';
import { useDocumentTitle } from '@/components/ui/Frame';
import { useSession } from '@/lib/client/useSession';
import { DemoDrawing } from './DemoDrawing';

/** The page of everything before a session: one column of 360 px, the drawing beside or above it. */
export function AuthPage({
  title,
  children,
  saysDemo = true,
}: {
  title: string;
  children: ReactNode;
  /** False where the page's own words say that it is a demo. */
  saysDemo?: boolean;
}) {
  const isDemo = useSession().data?.installation.isDemo ?? false;
  const wide = useBreakpoint() === 'wide';
  useDocumentTitle(title);
  return (
    <View style={[styles.page, wide ? styles.wide : null]}>
      {wide ? null : <DemoDrawing compact />}
      <ScrollView
        role="main"
        style={wide ? styles.left : styles.column}
        contentContainerStyle={wide ? styles.wideInner : styles.inner}
      >
        <View style={styles.brand}>
          <Mark size={52} />
          <Text variant="display" heading={1} tone="strong">
            Combwright
          </Text>
        </View>
        <Text tone="quiet" style={styles.motto}>
          Draw the signal. Prove the file.
        </Text>
        {isDemo && saysDemo ? <DemoBand /> : null}
        {children}
      </ScrollView>
      {wide ? (
        <View style={styles.right}>
          <DemoDrawing />
        </View>
      ) : null}
    </View>
  );
}

const styles = StyleSheet.create({
  page: { flex: 1, minHeight: 0, backgroundColor: color.surface.sheet },
  wide: { flexDirection: 'row' },
  column: { flex: 1, minHeight: 0 },
  inner: { paddingHorizontal: 24, paddingVertical: 24, maxWidth: 440, width: '100%', alignSelf: 'center' },
  left: { flexGrow: 0, flexShrink: 0, flexBasis: 520, borderRightWidth: 1, borderRightColor: color.rule.line },
  wideInner: { paddingHorizontal: 80, paddingVertical: 56 },
  right: { flex: 1, minWidth: 0, backgroundColor: color.surface.desk, padding: 40, justifyContent: 'center' },
  brand: { flexDirection: 'row', alignItems: 'center', gap: 12 },
  motto: { fontSize: 16, marginTop: 12, marginBottom: 24 },
});
