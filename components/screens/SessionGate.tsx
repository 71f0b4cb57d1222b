import { Redirect } from 'expo-router';
import { useState, type ReactNode } from 'react';
import { StyleSheet, View } from 'react-native';
import { Failing, Loading } from '@/components/ui/states';
import { color } from '@/components/ui/theme';
import { MeContext, useSession } from '@/lib/client/useSession';
import type { Me } from '@/lib/contracts/auth';
import { SignedOutDialog } from './SignedOutDialog';

/**
 * Pages for signed-in people. Who arrives without a session is sent to sign in; who loses it while working keeps the page and
 * what they typed, under a dialog.
 */
export function SessionGate({ children }: { children: ReactNode }) {
  const session = useSession();
  const [kept, setKept] = useState<Me | null>(null);
  const now = session.data?.me ?? null;
  if (now && now !== kept) setKept(now);
  const me = now ?? kept;
  if (me) {
    return (
      <MeContext.Provider value={me}>
        {children}
        {session.data && !now ? <SignedOutDialog person={me} /> : null}
      </MeContext.Provider>
    );
  }
  // An answer that is being renewed may be older than the sign-in which led here.
  if (session.data && !session.isFetching)
    return <Redirect href={session.data.installation.needsFirstRun ? '/first-run' : '/sign-in'} />;
  return (
    <View style={styles.page}>
      {session.error ? (
        <Failing what="The server does not answer." onRetry={() => void session.refetch()} />
      ) : (
        <Loading what="the page" rows={3} />
      )}
    </View>
  );
}

const styles = StyleSheet.create({ page: { flex: 1, padding: 24, backgroundColor: color.surface.desk } });
