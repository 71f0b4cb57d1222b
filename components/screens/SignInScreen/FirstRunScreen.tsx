import { Redirect, useRouter } from 'expo-router';
import { useRef, useState } from 'react';
import { StyleSheet, View } from 'react-native';
import { Button } from '@/components/ui/Button';
import { Notice } from '@/components/ui/Notice';
import { Text } from '@/components/ui/Text';
import { TextField } from '@/components/ui/TextField';
import { fieldErrors } from '@/lib/client/fieldErrors';
import { useAct } from '@/lib/client/useApi';
import { useSession } from '@/lib/client/useSession';
import { firstRun, getSession } from '@/lib/contracts/auth';
import { AuthPage } from './AuthPage';

/** The first administrator, with the code that the server printed. */
export function FirstRunScreen() {
  const router = useRouter();
  const [values, setValues] = useState({ code: '', name: '', email: '', password: '' });
  const act = useAct(firstRun, [getSession], () => router.replace('/waveforms'));
  const errors = fieldErrors(act.error);
  const set = (key: keyof typeof values) => (text: string) => setValues({ ...values, [key]: text });
  const session = useSession();
  const fields = useRef<HTMLElement>(null);
  const send = () =>
    act.mutate(
      { body: values },
      // after the errors stand at their fields
      {
        onError: () => setTimeout(() => fields.current?.querySelector<HTMLElement>('[aria-invalid=true]')?.focus(), 0),
      },
    );
  if (session.data && !session.data.installation.needsFirstRun && !act.isSuccess) return <Redirect href="/sign-in" />;
  return (
    <AuthPage title="Set up">
      <View style={styles.head}>
        <Text variant="title" heading={2} tone="strong">
          Set up Combwright
        </Text>
        <Text>This installation has no people yet. The first one becomes admin.</Text>
      </View>
      <View ref={fields as never} style={styles.fields}>
        <TextField
          label="Code"
          hint="Printed by the server when it started"
          value={values.code}
          onChangeText={set('code')}
          autoCapitalize="none"
          autoComplete="one-time-code"
          error={errors.code}
        />
        <TextField
          label="Name"
          value={values.name}
          onChangeText={set('name')}
          autoComplete="name"
          error={errors.name}
        />
        <TextField
          label="E-mail"
          value={values.email}
          onChangeText={set('email')}
          autoComplete="username"
          inputMode="email"
          autoCapitalize="none"
          error={errors.email}
        />
        <TextField
          label="Password"
          hint="12 characters or more"
          value={values.password}
          onChangeText={set('password')}
          autoComplete="new-password"
          secret
          onSubmitEditing={send}
          error={errors.password}
        />
      </View>
      {act.error && Object.keys(errors).length === 0 ? (
        <Notice kind="danger">
          {act.error.problem === null ? 'No connection. Signing in needs the server.' : act.error.message}
        </Notice>
      ) : null}
      <View style={styles.row}>
        <Button kind="filled" size="foot" busy={act.isPending} onPress={send}>
          Create the first account
        </Button>
      </View>
    </AuthPage>
  );
}

const styles = StyleSheet.create({ head: { gap: 6, marginBottom: 16 }, fields: { gap: 6 }, row: { marginTop: 12 } });
