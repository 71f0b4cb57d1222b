import type { Href } from 'expo-router';
import type { ReactNode } from 'react';
import { StyleSheet, View } from 'react-native';
import { useQueryClient } from '@tanstack/react-query';
import { Frame } from '@/components/ui/Frame';
import { Notice } from '@/components/ui/Notice';
import { Text } from '@/components/ui/Text';
import { useBreakpoint } from '@/components/ui/useBreakpoint';
import { shownSinceMs, useConnectionLost } from '@/lib/client/connection';
import { useMe, useSession } from '@/lib/client/useSession';
import { getSession } from '@/lib/contracts/auth';
import { clockTime } from './when';

export interface PageProps {
  title: string;
  children: ReactNode;
  backTo?: Href;
  headAside?: ReactNode;
  headField?: ReactNode;
  foot?: ReactNode;
  fixed?: boolean;
  /** The wide page's heading row; on a phone the head names the page. */
  actions?: ReactNode;
  /** The page draws its own heading. */
  bare?: boolean;
}

/** A signed-in page: the frame with the person in it, a heading and a margin. */
export function Page({ title, children, backTo, headAside, headField, foot, fixed, actions, bare }: PageProps) {
  const me = useMe();
  const demo = useSession().data?.installation.isDemo ?? false;
  const phone = useBreakpoint() === 'phone';
  return (
    <Frame
      title={title}
      person={me.name}
      showTeam={me.rights.includes('managePeople')}
      demo={demo}
      {...(backTo ? { backTo } : {})}
      headAside={headAside}
      headField={headField}
      notice={fixed ? null : <LostConnection />}
      foot={foot}
      fixed={fixed ?? false}
    >
      {bare ? (
        children
      ) : (
        <View style={phone ? styles.phone : styles.wide}>
          {phone ? null : (
            <View style={styles.head}>
              <Text variant="display" heading={1} tone="strong" style={styles.heading}>
                {title}
              </Text>
              {actions}
            </View>
          )}
          {children}
        </View>
      )}
    </Frame>
  );
}

/** A page that can be read without the server says how old it is; one that draws says it by its own words. */
function LostConnection() {
  const queries = useQueryClient();
  const lost = useConnectionLost();
  if (!lost) return null;
  const sinceMs = shownSinceMs(queries, getSession.name);
  return (
    <Notice kind="warning">
      {sinceMs === null ? 'No connection.' : `No connection. What you see was loaded at ${clockTime(sinceMs)}.`}
    </Notice>
  );
}

const styles = StyleSheet.create({
  phone: { padding: 12, gap: 12, flexGrow: 1 },
  wide: { padding: 24, paddingHorizontal: 40, gap: 16, maxWidth: 1520, width: '100%', alignSelf: 'center' },
  head: { flexDirection: 'row', alignItems: 'center', gap: 12, minHeight: 40 },
  heading: { flexGrow: 1, flexShrink: 1 },
});
