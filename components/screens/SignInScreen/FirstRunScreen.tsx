import { useRouter } from 'expo-router';
import { useState } from 'react';
import { StyleSheet, View } from 'react-native';
import { Button } from '@/components/ui/Button';
import { Notice } from '@/components/ui/Notice';
import { Text } from '@/components/ui/Text';
import { TextField } from '@/components/ui/TextField';
import { fieldErrors } from '@/lib/client/fieldErrors';
import { useAct } from '@/lib/client/useApi';
import { firstRun, getSession } from '@/lib/contracts/auth';
import { AuthPage } from './AuthPage';

/** The first administrator, with the code that the server printed. */
export function FirstRunScreen() {
  const router = useRouter();
  const [values, setValues] = useState({ code: '', name: '', email: '', password: '' });
  const act = useAct(firstRun, [getSession], () => router.replace('/waveforms'));
  const errors = fieldErrors(act.error);
  const code = act.error?.problem?.code;
  const wrongCode = code === 'action_forbidden' || code === 'sign_in_refused';
  const set = (key: keyof typeof values) => (text: string) => setValues({ ...values, [key]: text });
  const send = () => act.mutate({ body: values });
  return (
    <AuthPage title="Set up">
      <View style={styles.head}>
        <Text variant="title" heading={2} tone="strong">
          Set up Combwright
        </Text>
        <Text>This installation has no people yet. The first one becomes admin.</Text>
      </View>
      <TextField
        label="Code"
        hint="Printed by the server when it started"
        value={values.code}
        onChangeText={set('code')}
        autoCapitalize="none"
        autoComplete="one-time-code"
        error={wrongCode ? 'That is not the code. It stands where the server was started.' : errors.code}
      />
      <TextField label="Name" value={values.name} onChangeText={set('name')} autoComplete="name" error={errors.name} />
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
      {act.error && !wrongCode && Object.keys(errors).length === 0 ? (
        <Notice kind="danger">{act.error.message}</Notice>
      ) : null}
      <View style={styles.row}>
        <Button kind="filled" size="foot" busy={act.isPending} onPress={send}>
          Create the first account
        </Button>
      </View>
    </AuthPage>
  );
}

const styles = StyleSheet.create({ head: { gap: 6, marginBottom: 16 }, row: { marginTop: 12 } });
