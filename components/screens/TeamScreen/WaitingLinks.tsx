import { StyleSheet, View } from 'react-native';
import { Button } from '@/components/ui/Button';
import { Text } from '@/components/ui/Text';
import { color } from '@/components/ui/theme';
import { useAct } from '@/lib/client/useApi';
import { listPeople, makeLink, takeBackLinks, type Person } from '@/lib/contracts/people';
import { when } from '../when';
import { ShownLinkBox } from './ShownLinkBox';

/** Invitations that wait: made anew or taken back. */
export function WaitingLinks({ people }: { people: readonly Person[] }) {
  if (people.length === 0) return null;
  return (
    <View>
      <View style={styles.head}>
        <Text variant="bodyStrong" heading={2} tone="strong" style={styles.grow}>
          Invitations that wait
        </Text>
        <Text variant="small" tone="quiet">
          a link works once, for 7 days
        </Text>
      </View>
      {people.map((person) => (
        <Waiting key={person.personId} person={person} />
      ))}
    </View>
  );
}

function Waiting({ person }: { person: Person }) {
  const params = { personId: person.personId };
  const again = useAct(makeLink, [listPeople]);
  const back = useAct(takeBackLinks, [listPeople]);
  const { waitingLink } = person;
  return (
    <View style={styles.item}>
      <View style={styles.row}>
        <View style={styles.grow}>
          <Text variant="bodyStrong" tone="strong">
            {person.email}
          </Text>
          <Text variant="small" tone="quiet">
            {`${person.roles.length > 0 ? `as ${person.roles.join(', ')}` : 'without a role'}, ${
              waitingLink ? `until ${when(waitingLink.expiresAtMs)}` : 'no link that works'
            }`}
          </Text>
        </View>
        <Button kind="plain" busy={again.isPending} onPress={() => again.mutate({ params })}>
          Make a new link
        </Button>
        {waitingLink ? (
          <Button kind="plain" busy={back.isPending} onPress={() => back.mutate({ params })}>
            Take back
          </Button>
        ) : null}
      </View>
      {again.data ? <ShownLinkBox link={again.data} /> : null}
      {(again.error ?? back.error) ? (
        <Text variant="small" tone="danger" role="alert">
          {(again.error ?? back.error)!.message}
        </Text>
      ) : null}
    </View>
  );
}

const styles = StyleSheet.create({
  head: { flexDirection: 'row', paddingBottom: 6, borderBottomWidth: 1.5, borderBottomColor: color.rule.strong },
  grow: { flexGrow: 1, flexShrink: 1 },
  item: { paddingVertical: 8, gap: 8, borderBottomWidth: 1, borderBottomColor: color.rule.hair },
  row: { flexDirection: 'row', flexWrap: 'wrap', alignItems: 'center', gap: 8 },
});
