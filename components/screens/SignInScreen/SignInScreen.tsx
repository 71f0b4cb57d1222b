import { useRouter } from 'expo-router';
import { useRef, useState } from 'react';
import { Pressable, StyleSheet, View, type TextInput } from 'react-native';
import { Button } from '@/components/ui/Button';
import { Loading } from '@/components/ui/states';
import { Notice } from '@/components/ui/Notice';
import { Text } from '@/components/ui/Text';
import { TextLink } from '@/components/ui/TextLink';
import { TextField } from '@/components/ui/TextField';
import { color } from '@/components/ui/theme';
import { ProblemError, useApi } from '@/lib/client/useApi';
import { useSession, useSignIn } from '@/lib/client/useSession';
import { listDemoPeople } from '@/lib/contracts/auth';
import { AuthPage } from './AuthPage';

/** Words for a refused sign-in; clients branch on the code alone. */
function refusal(error: ProblemError | null): string | null {
  if (!error) return null;
  switch (error.problem?.code) {
    case undefined:
      return 'No connection. Signing in needs the server.';
    case 'sign_in_refused':
    case 'invalid':
      return 'E-mail or password is not right.';
    default:
      return error.problem!.detail;
  }
}

export function SignInScreen() {
  const session = useSession();
  const installation = session.data?.installation;
  return (
    <AuthPage title="Sign in" saysDemo={!installation?.hasDemoSignIn}>
      {session.isPending ? <Loading what="the sign-in page" rows={2} rowHeight={52} /> : null}
      {session.error ? (
        <Notice kind="danger" actions={<Button onPress={() => void session.refetch()}>Try again</Button>}>
          No connection. Signing in needs the server.
        </Notice>
      ) : null}
      {installation?.needsFirstRun ? (
        <Notice
          title="This installation has no people yet."
          actions={<TextLink href="/first-run">Set up Combwright</TextLink>}
        >
          The first one becomes admin.
        </Notice>
      ) : null}
      {installation?.hasDemoSignIn ? <DemoPeople /> : null}
      {installation && !installation.needsFirstRun ? <Fields afterDemo={installation.hasDemoSignIn} /> : null}
    </AuthPage>
  );
}

function DemoPeople() {
  const router = useRouter();
  const people = useApi(listDemoPeople, {});
  const { asDemo } = useSignIn(() => router.replace('/waveforms'));
  return (
    <View style={styles.demo}>
      <Text variant="heading" heading={2} tone="strong">
        Demo team: invented people, no password
      </Text>
      {people.isPending ? <Loading what="the demo team" rows={5} rowHeight={52} /> : null}
      {people.data?.people.map((person) => (
        <Pressable
          key={person.personId}
          role="button"
          aria-busy={asDemo.isPending || undefined}
          onPress={() => asDemo.mutate({ body: { personId: person.personId } })}
          style={(state) => [
            styles.person,
            { backgroundColor: (state as { hovered?: boolean }).hovered ? color.surface.hover : color.surface.raised },
          ]}
        >
          <Text weight={600} tone="strong">
            {person.name}
          </Text>
          <Text variant="small" tone="quiet">
            {person.roles.join(', ')}
          </Text>
        </Pressable>
      ))}
      <Text variant="small" tone="quiet">
        Choose who you are. You can change over at any time.
      </Text>
      {asDemo.error ? <Notice kind="danger">{refusal(asDemo.error)!}</Notice> : null}
    </View>
  );
}

function Fields({ afterDemo }: { afterDemo: boolean }) {
  const router = useRouter();
  const [email, setEmail] = useState('');
  const [password, setPassword] = useState('');
  const [missing, setMissing] = useState<'email' | 'password' | null>(null);
  const emailRef = useRef<TextInput>(null);
  const passwordRef = useRef<TextInput>(null);
  const { byPassword } = useSignIn(() => router.replace('/waveforms'));
  const send = () => {
    const first = email.trim() === '' ? 'email' : password === '' ? 'password' : null;
    setMissing(first);
    if (first) (first === 'email' ? emailRef : passwordRef).current?.focus();
    else byPassword.mutate({ body: { email, password } }, { onError: () => emailRef.current?.focus() });
  };
  return (
    <View>
      {afterDemo ? (
        <Text variant="bodyStrong" heading={2} tone="strong" style={styles.or}>
          Or with an account
        </Text>
      ) : null}
      <TextField
        label="E-mail"
        value={email}
        onChangeText={setEmail}
        inputRef={emailRef}
        autoComplete="username"
        inputMode="email"
        autoCapitalize="none"
        onSubmitEditing={send}
        error={missing === 'email' ? 'Enter your e-mail address.' : null}
      />
      <TextField
        label="Password"
        value={password}
        onChangeText={setPassword}
        inputRef={passwordRef}
        autoComplete="current-password"
        secret
        onSubmitEditing={send}
        error={missing === 'password' ? 'Enter your password.' : refusal(byPassword.error)}
      />
      <View style={styles.row}>
        <Button kind="filled" size="foot" busy={byPassword.isPending} onPress={send}>
          Sign in
        </Button>
      </View>
      <Text variant="small" tone="quiet">
        Password forgotten? Ask a person with the admin role for a new link.
      </Text>
      <Text variant="small" tone="quiet" style={styles.last}>
        No account? A person with the admin role can invite you.
      </Text>
    </View>
  );
}

const styles = StyleSheet.create({
  demo: { gap: 8, paddingTop: 16, marginBottom: 16, borderTopWidth: 1.5, borderTopColor: color.rule.strong },
  person: {
    minHeight: 52,
    flexDirection: 'row',
    alignItems: 'center',
    justifyContent: 'space-between',
    paddingHorizontal: 14,
    borderWidth: 1,
    borderColor: color.rule.control,
    borderRadius: 3,
  },
  or: { paddingTop: 16, marginBottom: 8, borderTopWidth: 1, borderTopColor: color.rule.line },
  row: { marginTop: 8, marginBottom: 16 },
  last: { marginTop: 12 },
});
