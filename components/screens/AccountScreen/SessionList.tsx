import { StyleSheet, View } from 'react-native';
import { Button } from '@/components/ui/Button';
import { Text } from '@/components/ui/Text';
import { color } from '@/components/ui/theme';
import type { PersonSession } from '@/lib/contracts/auth';
import { when } from '../when';

/** What a browser calls itself, in a few words. */
function browserWords(userAgent: string): string {
  const device = /iPhone|Android.*Mobile/.test(userAgent)
    ? 'Phone'
    : /iPad|Android/.test(userAgent)
      ? 'Tablet'
      : 'Computer';
  const system = /Windows|Mac OS X|Android|Linux/.exec(userAgent)?.[0];
  return system && !(device !== 'Computer' && system === 'Mac OS X') ? `${device}, ${system}` : device;
}

export function SessionList({
  sessions,
  onEnd,
  endingId,
}: {
  sessions: readonly PersonSession[];
  onEnd?: (sessionId: string) => void;
  endingId?: string | null;
}) {
  return (
    <View role="list" aria-label="Sessions">
      {sessions.map((session) => (
        <View key={session.sessionId} role="listitem" style={styles.row}>
          <View style={styles.grow}>
            <Text>
              {session.isThisOne ? `${browserWords(session.userAgent)}, this one` : browserWords(session.userAgent)}
            </Text>
            <Text variant="small" tone="quiet">
              {`last used ${when(session.lastSeenAtMs)}`}
            </Text>
          </View>
          {onEnd && !session.isThisOne ? (
            <Button kind="plain" busy={endingId === session.sessionId} onPress={() => onEnd(session.sessionId)}>
              End
            </Button>
          ) : null}
        </View>
      ))}
    </View>
  );
}

const styles = StyleSheet.create({
  row: {
    minHeight: 52,
    flexDirection: 'row',
    alignItems: 'center',
    borderBottomWidth: 1,
    borderBottomColor: color.rule.hair,
    paddingVertical: 6,
  },
  grow: { flexGrow: 1, flexShrink: 1 },
});
