import { useState } from 'react';
import { StyleSheet, View } from 'react-native';
import { Button } from '@/components/ui/Button';
import { Loading } from '@/components/ui/states';
import { Dialog } from '@/components/ui/overlay';
import { Text } from '@/components/ui/Text';
import { color } from '@/components/ui/theme';
import { useAct, useApi } from '@/lib/client/useApi';
import type { Role } from '@/lib/contracts/common';
import { endPersonSessions, listPeople, listPersonSessions, makeLink, type Person } from '@/lib/contracts/people';
import { SessionList } from '../AccountScreen/SessionList';
import { ShownLinkBox } from './ShownLinkBox';

const opens: Record<Role, string> = {
  author: 'Draws, saves and asks for a review, on any waveform; makes packs of own drafts.',
  reviewer: 'Reads drafts and reviews, releases or returns what others drew, withdraws editions.',
  operator: 'Reads editions and their packs, with the level card.',
  admin: 'People, roles, sessions, bench profiles and the audit; reads editions, withdraws them.',
};

/** A person's open sessions and what can be done about them. */
export function PersonPanel({ person, bare }: { person: Person; bare?: boolean }) {
  const [asking, setAsking] = useState(false);
  const params = { personId: person.personId };
  const sessions = useApi(listPersonSessions, { params });
  const end = useAct(endPersonSessions, [listPeople, listPersonSessions], () => setAsking(false));
  const link = useAct(makeLink, [listPeople]);
  const count = sessions.data?.sessions.length ?? 0;
  return (
    <View style={bare ? styles.bare : styles.panel}>
      {bare ? null : (
        <Text variant="title" heading={2} tone="strong">
          {person.name}
        </Text>
      )}
      <Text variant="small" tone="quiet">
        {person.email}
      </Text>
      <Text variant="bodyStrong" heading={3} tone="strong">
        {`Open sessions, ${count}`}
      </Text>
      {sessions.isPending ? <Loading what="sessions" rows={2} rowHeight={52} /> : null}
      <SessionList sessions={sessions.data?.sessions ?? []} />
      {count > 0 ? (
        <Button kind="grave" onPress={() => setAsking(true)}>
          {count === 1 ? 'End 1 session' : `End ${count} sessions`}
        </Button>
      ) : null}
      <View style={styles.rule} />
      <Text variant="bodyStrong" heading={3} tone="strong">
        What the roles open
      </Text>
      {person.roles.length === 0 ? <Text variant="small">Nothing: no role is given.</Text> : null}
      {person.roles.map((role) => (
        <Text key={role} variant="small">
          {opens[role]}
        </Text>
      ))}
      {person.isDemo ? null : (
        <>
          <View style={styles.rule} />
          <Button kind="ruled" busy={link.isPending} onPress={() => link.mutate({ params })}>
            Make a reset link
          </Button>
        </>
      )}
      {link.data ? <ShownLinkBox link={link.data} /> : null}
      {link.error ? (
        <Text variant="small" tone="danger" role="alert">
          {link.error.message}
        </Text>
      ) : null}
      {asking ? (
        <Dialog
          question={count === 1 ? `End 1 session of ${person.name}?` : `End ${count} sessions of ${person.name}?`}
          onClose={() => setAsking(false)}
          safe={{ label: 'Keep', onPress: () => setAsking(false) }}
          act={{ label: 'End', grave: true, busy: end.isPending, onPress: () => end.mutate({ params }) }}
        >
          What they did not save stays on their device.
        </Dialog>
      ) : null}
    </View>
  );
}

const styles = StyleSheet.create({
  panel: {
    width: 344,
    flexShrink: 0,
    gap: 10,
    padding: 20,
    borderWidth: 1.5,
    borderColor: color.rule.strong,
    backgroundColor: color.surface.raised,
  },
  bare: { gap: 10, paddingBottom: 16 },
  rule: { height: 1, backgroundColor: color.rule.line },
});
