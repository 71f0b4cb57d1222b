import { useRouter } from 'expo-router';
import { useState } from 'react';
import { StyleSheet, View } from 'react-native';
import { Button } from '@/components/ui/Button';
import { Loading } from '@/components/ui/states';
import { setPreferences, usePreferences, type Preferences } from '@/components/ui/preferences';
import { Text } from '@/components/ui/Text';
import { TextField } from '@/components/ui/TextField';
import { chooseTheme, color, useTheme, type ThemeChoice } from '@/components/ui/theme';
import { showToast } from '@/components/ui/toast';
import { useBreakpoint } from '@/components/ui/useBreakpoint';
import { AnyOf, OneOf } from '@/components/ui/WordsToPress';
import { fieldErrors } from '@/lib/client/fieldErrors';
import { useAct, useApi } from '@/lib/client/useApi';
import { useMe, useSignIn } from '@/lib/client/useSession';
import {
  changeName,
  changePassword,
  endOtherSessions,
  endSession,
  getSession,
  listSessions,
} from '@/lib/contracts/auth';
import { Page } from '../Page';
import { SessionList } from './SessionList';

/** Name, password, theme, the table's habits, sessions. */
export function AccountScreen() {
  const router = useRouter();
  const me = useMe();
  const phone = useBreakpoint() === 'phone';
  const { out } = useSignIn(() => router.replace('/sign-in'));
  return (
    <Page
      title="Account"
      backTo="/more"
      actions={
        <Button busy={out.isPending} onPress={() => out.mutate({})}>
          Sign out
        </Button>
      }
    >
      <View style={styles.groups}>
        <View style={styles.group}>
          <Text variant="heading" heading={2} tone="strong">
            {me.name}
          </Text>
          <Text tone="quiet">{`${me.email}, ${me.roles.join(', ') || 'no role yet'}`}</Text>
          {me.isDemo ? (
            <Text tone="quiet">An invented person of the demo team: no name or password to change.</Text>
          ) : (
            <Name />
          )}
        </View>
        <Theme />
        <Table />
        {me.isDemo ? null : <Password />}
        <Sessions />
        {phone ? (
          <Button busy={out.isPending} onPress={() => out.mutate({})}>
            Sign out
          </Button>
        ) : null}
      </View>
    </Page>
  );
}

function Name() {
  const me = useMe();
  const [name, setName] = useState(me.name);
  const act = useAct(changeName, [getSession], () => showToast('Name changed'));
  return (
    <View style={styles.form}>
      <TextField
        label="Name"
        value={name}
        onChangeText={setName}
        error={fieldErrors(act.error).name ?? act.error?.message ?? null}
      />
      <Button busy={act.isPending} onPress={() => act.mutate({ body: { name } })}>
        Change name
      </Button>
    </View>
  );
}

function Theme() {
  const { choice } = useTheme();
  return (
    <View style={styles.group}>
      <Text variant="heading" heading={2} tone="strong">
        Theme
      </Text>
      <OneOf<ThemeChoice>
        label="Theme"
        choices={[
          { value: 'paper', label: 'Paper' },
          { value: 'night', label: 'Night' },
          { value: 'system', label: 'As the system' },
        ]}
        value={choice}
        onChange={chooseTheme}
        style={styles.words}
      />
    </View>
  );
}

const LIKES = [
  { value: 'axesTurned', label: 'Axes turned' },
  { value: 'oneFingerMoves', label: 'One finger moves' },
  { value: 'singleKeys', label: 'Single keys act' },
] as const satisfies readonly { value: keyof Preferences; label: string }[];

function Table() {
  const likes = usePreferences();
  return (
    <View style={styles.group}>
      <Text variant="heading" heading={2} tone="strong">
        Drawing table
      </Text>
      <AnyOf
        label="Drawing table"
        choices={LIKES}
        values={LIKES.map(({ value }) => value).filter((value) => likes[value])}
        onToggle={(value, on) => setPreferences({ [value]: on })}
        style={styles.words}
      />
      <Text variant="small" tone="quiet">
        Kept on this device. Without single keys, letters, digits and signs do nothing by themselves, on any page.
      </Text>
    </View>
  );
}

function Password() {
  const [current, setCurrent] = useState('');
  const [next, setNext] = useState('');
  const act = useAct(changePassword, [listSessions], () => {
    setCurrent('');
    setNext('');
    showToast('Password changed; your other sessions ended');
  });
  const errors = fieldErrors(act.error);
  return (
    <View style={styles.group}>
      <Text variant="heading" heading={2} tone="strong">
        Password
      </Text>
      <View style={styles.form}>
        <TextField
          label="Password now"
          secret
          value={current}
          onChangeText={setCurrent}
          autoComplete="current-password"
          error={errors.current ?? (act.error && !errors.next ? act.error.message : null)}
        />
        <TextField
          label="New password"
          hint="12 characters or more"
          secret
          value={next}
          onChangeText={setNext}
          autoComplete="new-password"
          error={errors.next}
        />
        <Button busy={act.isPending} onPress={() => act.mutate({ body: { current, next } })}>
          Change password
        </Button>
      </View>
    </View>
  );
}

function Sessions() {
  const sessions = useApi(listSessions, {});
  const end = useAct(endSession, [listSessions]);
  const endOthers = useAct(endOtherSessions, [listSessions], () => showToast('Your other sessions ended'));
  const count = sessions.data?.sessions.length ?? 0;
  return (
    <View style={styles.group}>
      <Text variant="heading" heading={2} tone="strong">
        {count > 0 ? `Open sessions, ${count}` : 'Open sessions'}
      </Text>
      {sessions.isPending ? <Loading what="sessions" rows={2} rowHeight={52} /> : null}
      <SessionList
        sessions={sessions.data?.sessions ?? []}
        onEnd={(sessionId) => end.mutate({ params: { sessionId } })}
        endingId={end.isPending ? end.variables.params.sessionId : null}
      />
      {count > 1 ? (
        <Button kind="grave" busy={endOthers.isPending} onPress={() => endOthers.mutate({})}>
          End all but this one
        </Button>
      ) : null}
      {(end.error ?? endOthers.error) ? (
        <Text variant="small" tone="danger" role="alert">
          {(end.error ?? endOthers.error)!.message}
        </Text>
      ) : null}
    </View>
  );
}

const styles = StyleSheet.create({
  groups: { gap: 16, maxWidth: 640, width: '100%' },
  group: {
    gap: 10,
    padding: 16,
    alignItems: 'stretch',
    backgroundColor: color.surface.sheet,
    borderWidth: 1,
    borderColor: color.rule.line,
  },
  form: { gap: 4, maxWidth: 400 },
  words: { maxWidth: 400 },
});
