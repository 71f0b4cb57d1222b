import { useRouter } from 'expo-router';
import { useEffect, useState } from 'react';
import { StyleSheet, View } from 'react-native';
import { Button } from '@/components/ui/Button';
import { Loading } from '@/components/ui/states';
import { Notice } from '@/components/ui/Notice';
import { Text } from '@/components/ui/Text';
import { TextLink } from '@/components/ui/TextLink';
import { TextField } from '@/components/ui/TextField';
import { fieldErrors } from '@/lib/client/fieldErrors';
import { useAct } from '@/lib/client/useApi';
import { getSession, lookAtLink, useLink as takeLink } from '@/lib/contracts/auth';
import { AuthPage } from './AuthPage';

/** Takes up an invitation or a reset. The token stands in the address's fragment, which no browser sends. */
export function LinkScreen({ kind }: { kind: 'invite' | 'reset' }) {
  const router = useRouter();
  const [token] = useState(() => (typeof location === 'undefined' ? '' : location.hash.slice(1)));
  const look = useAct(lookAtLink);
  const take = useAct(takeLink, [getSession], () => router.replace('/waveforms'));
  const [name, setName] = useState<string | null>(null);
  const [password, setPassword] = useState('');
  const lookNow = look.mutate;
  useEffect(() => {
    lookNow({ body: { token } });
  }, [lookNow, token]);
  const link = look.data;
  const errors = fieldErrors(take.error);
  const send = () =>
    take.mutate({ body: { token, password, ...(kind === 'invite' ? { name: name ?? link?.name ?? '' } : {}) } });
  return (
    <AuthPage title={kind === 'invite' ? 'Join' : 'New password'}>
      {look.isPending ? <Loading what="the link" rows={2} rowHeight={52} /> : null}
      {look.error ? (
        <Notice
          kind="danger"
          actions={
            look.error.problem === null ? (
              <Button onPress={() => lookNow({ body: { token } })}>Try again</Button>
            ) : (
              <TextLink href="/sign-in">Back to sign in</TextLink>
            )
          }
        >
          {look.error.problem === null
            ? 'No connection. Signing in needs the server.'
            : 'This link was used or is too old. Ask for a new one.'}
        </Notice>
      ) : null}
      {link ? (
        <View>
          <View style={styles.head}>
            <Text variant="title" heading={2} tone="strong">
              {kind === 'invite' ? 'Join the team' : 'Set a new password'}
            </Text>
            <Text>
              {kind === 'invite'
                ? `${link.madeBy} invited you${link.roles.length > 0 ? ` as ${link.roles.join(', ')}` : ''}.`
                : `For ${link.email}. Your sessions end when the password changes.`}
            </Text>
          </View>
          {kind === 'invite' ? (
            <TextField
              label="Name"
              value={name ?? link.name}
              onChangeText={setName}
              autoComplete="name"
              error={errors.name}
            />
          ) : null}
          <TextField
            label="Password"
            hint="12 characters or more"
            value={password}
            onChangeText={setPassword}
            autoComplete="new-password"
            secret
            onSubmitEditing={send}
            error={
              errors.password ??
              (take.error && !take.error.problem?.issues
                ? take.error.problem === null
                  ? 'No connection. Signing in needs the server.'
                  : take.error.message
                : null)
            }
          />
          <View style={styles.row}>
            <Button kind="filled" size="foot" busy={take.isPending} onPress={send}>
              {kind === 'invite' ? 'Join' : 'Set password'}
            </Button>
          </View>
        </View>
      ) : null}
    </AuthPage>
  );
}

const styles = StyleSheet.create({ head: { gap: 6, marginBottom: 16 }, row: { marginTop: 12 } });
