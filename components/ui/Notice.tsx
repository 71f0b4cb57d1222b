import type { ReactNode } from 'react';
import { StyleSheet, View } from 'react-native';
import { Text } from './Text';
import { color } from './theme';

export type NoticeKind = 'plain' | 'warning' | 'danger' | 'success';

const looks: Record<NoticeKind, { ground: string; rule: string }> = {
  plain: { ground: color.surface.sunken, rule: color.rule.control },
  warning: { ground: color.warning.wash, rule: color.warning.rule },
  danger: { ground: color.danger.wash, rule: color.danger.rule },
  success: { ground: color.success.wash, rule: color.success.rule },
};

/** Words first; what can be done about it stands under them. */
export function Notice({
  kind = 'plain',
  title,
  children,
  actions,
}: {
  kind?: NoticeKind;
  title?: string;
  children?: ReactNode;
  actions?: ReactNode;
}) {
  const look = looks[kind];
  return (
    <View
      role={kind === 'danger' ? 'alert' : 'status'}
      style={[styles.notice, { backgroundColor: look.ground, borderLeftColor: look.rule }]}
    >
      {title ? (
        <Text variant="bodyStrong" tone="strong">
          {title}
        </Text>
      ) : null}
      {typeof children === 'string' ? <Text>{children}</Text> : children}
      {actions ? <View style={styles.actions}>{actions}</View> : null}
    </View>
  );
}

const styles = StyleSheet.create({
  notice: { borderLeftWidth: 3, paddingVertical: 10, paddingHorizontal: 14, gap: 4 },
  actions: { flexDirection: 'row', flexWrap: 'wrap', gap: 8, marginTop: 6 },
});
