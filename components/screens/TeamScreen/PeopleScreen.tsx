import { useState } from 'react';
import { Pressable, StyleSheet, View } from 'react-native';
import { Button } from '@/components/ui/Button';
import { Failing, Loading } from '@/components/ui/states';
import { Text } from '@/components/ui/Text';
import { color } from '@/components/ui/theme';
import { showToast } from '@/components/ui/toast';
import { useBreakpoint } from '@/components/ui/useBreakpoint';
import { AnyOf } from '@/components/ui/WordsToPress';
import { Sheet } from '@/components/ui/overlay';
import { useAct, useApi } from '@/lib/client/useApi';
import { useMe } from '@/lib/client/useSession';
import { getSession } from '@/lib/contracts/auth';
import { roleSchema, type Role } from '@/lib/contracts/common';
import { listPeople, setRoles, type Person } from '@/lib/contracts/people';
import { when } from '../when';
import { InviteSheet } from './InviteSheet';
import { PersonPanel } from './PersonPanel';
import { TeamPage } from './TeamPage';
import { WaitingLinks } from './WaitingLinks';

/** Everybody of the team; roles are words to press, saved at once. */
export function PeopleScreen() {
  const wide = useBreakpoint() === 'wide';
  const people = useApi(listPeople, {});
  const [chosenId, setChosenId] = useState<string | null>(null);
  const [inviting, setInviting] = useState(false);
  const chosen = people.data?.people.find((person) => person.personId === chosenId) ?? null;
  const joined = people.data?.people.filter((person) => person.hasJoined || person.isDemo) ?? [];
  const invite = (
    <Button kind="filled" onPress={() => setInviting(true)}>
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
            <View role="list" aria-label="People" style={styles.table}>
              {joined.map((person) => (
                <PersonRow
                  key={person.personId}
                  person={person}
                  admins={joined.filter((one) => one.roles.includes('admin')).length}
                  chosen={person.personId === chosenId}
                  onChoose={() => setChosenId(person.personId)}
                />
              ))}
            </View>
            {joined.length === 1 ? <Text tone="quiet">Only you so far.</Text> : null}
            <WaitingLinks people={people.data.people.filter((person) => !person.hasJoined && !person.isDemo)} />
          </View>
          {chosen && wide ? <PersonPanel key={chosen.personId} person={chosen} /> : null}
        </View>
      ) : null}
      {wide ? null : invite}
      {chosen && !wide ? (
        <Sheet title={chosen.name} onClose={() => setChosenId(null)}>
          <PersonPanel key={chosen.personId} person={chosen} bare />
        </Sheet>
      ) : null}
      {inviting ? <InviteSheet onClose={() => setInviting(false)} /> : null}
    </TeamPage>
  );
}

function PersonRow({
  person,
  admins,
  chosen,
  onChoose,
}: {
  person: Person;
  admins: number;
  chosen: boolean;
  onChoose: () => void;
}) {
  const me = useMe();
  const wide = useBreakpoint() === 'wide';
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
    <View role="listitem" style={[styles.row, wide ? styles.rowWide : null, chosen ? styles.chosen : null]}>
      <Pressable role="button" aria-pressed={chosen} onPress={onChoose} style={styles.person}>
        <Text variant="bodyStrong" tone="strong">
          {person.name}
        </Text>
        <Text variant="small" tone="quiet">
          {person.personId === me.personId ? `${person.email}, you` : person.email}
        </Text>
      </Pressable>
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
      <View style={styles.seen}>
        <Text variant="small">{person.lastSeenAtMs === null ? 'never' : when(person.lastSeenAtMs)}</Text>
        <Text variant="small" tone="quiet">
          {person.sessionCount === 0
            ? 'no session'
            : person.sessionCount === 1
              ? '1 session'
              : `${person.sessionCount} sessions`}
        </Text>
      </View>
    </View>
  );
}

const styles = StyleSheet.create({
  columns: { flexDirection: 'row', alignItems: 'flex-start', gap: 32 },
  stack: { gap: 16 },
  main: { flexGrow: 1, flexShrink: 1, minWidth: 0, gap: 24 },
  table: { borderWidth: 1, borderColor: color.rule.line, backgroundColor: color.surface.sheet },
  row: {
    gap: 10,
    padding: 12,
    borderBottomWidth: 1,
    borderBottomColor: color.rule.hair,
    borderLeftWidth: 3,
    borderLeftColor: 'transparent',
  },
  rowWide: { flexDirection: 'row', alignItems: 'center', gap: 20, minHeight: 60 },
  chosen: { backgroundColor: color.surface.raised, borderLeftColor: color.ink.strong },
  person: { width: 232, maxWidth: '100%' },
  roles: { flexGrow: 1, flexShrink: 1, gap: 4, maxWidth: 400 },
  seen: { minWidth: 120 },
});
