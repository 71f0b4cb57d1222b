import { useState } from 'react';
import { Pressable, StyleSheet, View } from 'react-native';
import { Button } from '@/components/ui/Button';
import { Failing, Loading } from '@/components/ui/states';
import { Table } from '@/components/ui/Table';
import { Text } from '@/components/ui/Text';
import { color } from '@/components/ui/theme';
import { showToast } from '@/components/ui/toast';
import { useBreakpoint } from '@/components/ui/useBreakpoint';
import { AnyOf } from '@/components/ui/WordsToPress';
import { Sheet } from '@/components/ui/overlay';
import { useAct, useApi } from '@/lib/client/useApi';
import { useMay, useMe } from '@/lib/client/useSession';
import { getSession } from '@/lib/contracts/auth';
import { roleSchema, type Role } from '@/lib/contracts/common';
import { listPeople, setRoles, type Person } from '@/lib/contracts/people';
import { PrimaryStrip } from '../PrimaryStrip';
import { when } from '../when';
import { InviteSheet } from './InviteSheet';
import { PersonPanel } from './PersonPanel';
import { TeamPage } from './TeamPage';
import { WaitingLinks } from './WaitingLinks';

/** Everybody of the team; roles are words to press, saved at once. */
export function PeopleScreen() {
  const size = useBreakpoint();
  const wide = size === 'wide';
  const phone = size === 'phone';
  const may = useMay('managePeople');
  const people = useApi(listPeople, {}, { enabled: may });
  const [chosenId, setChosenId] = useState<string | null>(null);
  const [inviting, setInviting] = useState(false);
  const chosen = people.data?.people.find((person) => person.personId === chosenId) ?? null;
  const joined = people.data?.people.filter((person) => person.hasJoined || person.isDemo) ?? [];
  const admins = joined.filter((one) => one.roles.includes('admin')).length;
  const choose = (person: Person) => setChosenId(person.personId);
  const invite = (
    <Button kind="filled" size={phone ? 'foot' : 'usual'} fill={phone} onPress={() => setInviting(true)}>
      Invite a person
    </Button>
  );
  return (
    <TeamPage right="managePeople" actions={invite}>
      {people.isPending ? <Loading what="people" /> : null}
      {people.error && !people.data ? (
        <Failing what={`The list did not load. ${people.error.message}`} onRetry={() => void people.refetch()} />
      ) : null}
      {people.data ? (
        <View style={wide ? styles.columns : styles.stack}>
          <View style={styles.main}>
            {phone ? (
              <View role="list" aria-label="People" style={styles.table}>
                {joined.map((person) => (
                  <View key={person.personId} role="listitem" style={styles.card}>
                    <Who person={person} chosen={person.personId === chosenId} onChoose={choose} />
                    <Roles person={person} admins={admins} />
                    <Text variant="small" tone="quiet">
                      {`last seen ${seenWords(person)}, ${sessionWords(person)}`}
                    </Text>
                  </View>
                ))}
              </View>
            ) : (
              <Table
                label="People"
                rows={joined}
                keyOf={(person) => person.personId}
                isChosen={(person) => person.personId === chosenId}
                onOpen={(person) => setChosenId(person.personId)}
                columns={[
                  {
                    key: 'person',
                    label: 'Person',
                    sortBy: (person) => person.name.toLowerCase(),
                    cell: (person) => <Who person={person} chosen={person.personId === chosenId} onChoose={choose} />,
                  },
                  {
                    key: 'roles',
                    label: 'Roles, press to give or take',
                    width: 372,
                    cell: (person) => <Roles person={person} admins={admins} />,
                  },
                  {
                    key: 'seen',
                    label: 'Last seen',
                    width: 120,
                    sortBy: (person) => -(person.lastSeenAtMs ?? 0),
                    cell: (person) => <Text variant="small">{seenWords(person)}</Text>,
                  },
                  {
                    key: 'sessions',
                    label: 'Sessions',
                    width: 90,
                    sortBy: (person) => -person.sessionCount,
                    cell: (person) => (
                      <Text variant="small" tone={person.sessionCount === 0 ? 'quiet' : 'body'}>
                        {sessionWords(person)}
                      </Text>
                    ),
                  },
                ]}
              />
            )}
            {joined.length === 1 ? <Text tone="quiet">Only you so far.</Text> : null}
            <WaitingLinks people={people.data.people.filter((person) => !person.hasJoined && !person.isDemo)} />
          </View>
          {chosen && wide ? <PersonPanel key={chosen.personId} person={chosen} /> : null}
        </View>
      ) : null}
      {chosen && !wide ? (
        <Sheet title={chosen.name} onClose={() => setChosenId(null)}>
          <PersonPanel key={chosen.personId} person={chosen} bare />
        </Sheet>
      ) : null}
      {phone ? <PrimaryStrip>{invite}</PrimaryStrip> : null}
      {inviting ? <InviteSheet onClose={() => setInviting(false)} /> : null}
    </TeamPage>
  );
}

const seenWords = (person: Person) => (person.lastSeenAtMs === null ? 'never' : when(person.lastSeenAtMs));

const sessionWords = (person: Person) =>
  person.sessionCount === 0
    ? 'no session'
    : person.sessionCount === 1
      ? '1 session'
      : `${person.sessionCount} sessions`;

/** Name and address; pressing shows sessions and acts. */
function Who({ person, chosen, onChoose }: { person: Person; chosen: boolean; onChoose: (person: Person) => void }) {
  const me = useMe();
  return (
    <Pressable role="button" aria-pressed={chosen} onPress={() => onChoose(person)} style={styles.person}>
      <Text variant="bodyStrong" tone="strong" numberOfLines={1}>
        {person.name}
      </Text>
      <Text variant="small" tone="quiet" numberOfLines={1}>
        {person.personId === me.personId ? `${person.email}, you` : person.email}
      </Text>
    </Pressable>
  );
}

/** Four words to press, saved at once. */
function Roles({ person, admins }: { person: Person; admins: number }) {
  const me = useMe();
  const act = useAct(setRoles, [listPeople, getSession]);
  const isLastAdmin = person.roles.includes('admin') && admins === 1;
  const save = (roles: Role[]) =>
    act.mutate(
      { params: { personId: person.personId }, body: { roles } },
      { onSuccess: () => showToast(`${person.name}: ${roles.join(', ') || 'no role'}`, () => save(person.roles)) },
    );
  const note = isLastAdmin
    ? person.personId === me.personId
      ? 'There must be one admin: yours stays.'
      : 'There must be one admin: this one stays.'
    : person.roles.includes('author') && person.roles.includes('reviewer')
      ? 'Never releases own work, whatever the roles.'
      : null;
  return (
    <View style={styles.roles}>
      <AnyOf<Role>
        label={`Roles of ${person.name}`}
        choices={roleSchema.options.map((role) => ({
          value: role,
          label: role,
          offBecause: role === 'admin' && isLastAdmin ? 'There must be one admin.' : null,
        }))}
        values={person.roles}
        onToggle={(role, on) =>
          save(roleSchema.options.filter((one) => (one === role ? on : person.roles.includes(one))))
        }
      />
      {act.error ? (
        <Text variant="small" tone="danger" role="alert">
          {act.error.message}
        </Text>
      ) : note ? (
        <Text variant="small" tone="quiet">
          {note}
        </Text>
      ) : null}
    </View>
  );
}

const styles = StyleSheet.create({
  columns: { flexDirection: 'row', alignItems: 'flex-start', gap: 32 },
  stack: { gap: 16 },
  main: { flexGrow: 1, flexShrink: 1, minWidth: 0, gap: 24 },
  table: { borderWidth: 1, borderColor: color.rule.line, backgroundColor: color.surface.sheet },
  card: { gap: 10, padding: 12, borderBottomWidth: 1, borderBottomColor: color.rule.hair },
  person: { minHeight: 44, minWidth: 0, justifyContent: 'center' },
  roles: { gap: 4, maxWidth: 400, alignSelf: 'stretch' },
});
