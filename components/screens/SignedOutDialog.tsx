import { useRouter } from 'expo-router';
import { useState } from 'react';
import { View } from 'react-native';
import { Dialog } from '@/components/ui/overlay';
import { Text } from '@/components/ui/Text';
import { TextField } from '@/components/ui/TextField';
import { useSignIn } from '@/lib/client/useSession';
import type { Me } from '@/lib/contracts/auth';

/** Over the page of a person whose session ended: what they typed stays. */
export function SignedOutDialog({ person }: { person: Me }) {
  const router = useRouter();
  const [password, setPassword] = useState('');
  const { byPassword, asDemo } = useSignIn(() => undefined);
  const act = person.isDemo ? asDemo : byPassword;
  const send = () => {
    if (person.isDemo) asDemo.mutate({ body: { personId: person.personId } });
    else byPassword.mutate({ body: { email: person.email, password } });
  };
  const leave = () => router.replace('/sign-in');
  return (
    <Dialog
      question="You were signed out. Sign in to go on."
      // Escape keeps the page: leaving it would lose what was typed
      onClose={() => undefined}
      startsOnField={!person.isDemo}
      safe={{ label: 'Leave', onPress: leave }}
      act={{ label: `Sign in as ${person.name}`, busy: act.isPending, onPress: send }}
    >
      <View>
        <Text>What you typed is still here.</Text>
        {person.isDemo ? null : (
          <TextField
            label={`Password of ${person.email}`}
            secret
            value={password}
            onChangeText={setPassword}
            autoComplete="current-password"
            onSubmitEditing={send}
            error={act.error ? (act.error.problem?.detail ?? 'No connection. Signing in needs the server.') : null}
          />
        )}
        {person.isDemo && act.error ? (
          <Text variant="small" tone="danger" role="alert">
            {act.error.problem?.detail ?? 'No connection. Signing in needs the server.'}
          </Text>
        ) : null}
      </View>
    </Dialog>
  );
}
