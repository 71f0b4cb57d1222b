import { Link, usePathname, type Href } from 'expo-router';
import type { ReactNode } from 'react';
import { StyleSheet, View } from 'react-native';
import { Forbidden } from '@/components/ui/states';
import { Text } from '@/components/ui/Text';
import { color } from '@/components/ui/theme';
import { useMe } from '@/lib/client/useSession';
import type { Right } from '@/lib/contracts/common';
import { Page } from '../Page';

const places: { label: string; href: Href; right: Right }[] = [
  { label: 'People', href: '/people', right: 'managePeople' },
  { label: 'Audit', href: '/audit', right: 'readAudit' },
];

/** One place, Team, with its pages as words under the heading. */
export function TeamPage({
  right,
  actions,
  headAside,
  children,
}: {
  right: Right;
  actions?: ReactNode;
  headAside?: ReactNode;
  children: ReactNode;
}) {
  const path = usePathname();
  const me = useMe();
  return (
    <Page title="Team" backTo="/more" actions={actions} headAside={headAside}>
      {me.rights.includes(right) ? (
        <>
          <View role="navigation" aria-label="Team" style={styles.words}>
            {places
              .filter((place) => me.rights.includes(place.right))
              .map((place) => {
                const open = path === place.href;
                return (
                  <Link
                    key={place.label}
                    href={place.href}
                    aria-current={open ? 'page' : undefined}
                    style={styles.link}
                  >
                    <View style={[styles.word, open ? styles.open : null]}>
                      <Text weight={open ? 600 : 500} tone={open ? 'onSelected' : 'body'}>
                        {place.label}
                      </Text>
                    </View>
                  </Link>
                );
              })}
          </View>
          {children}
        </>
      ) : (
        <Forbidden />
      )}
    </Page>
  );
}

const styles = StyleSheet.create({
  words: { flexDirection: 'row', gap: 4 },
  link: { textDecorationLine: 'none', display: 'flex' },
  word: {
    height: 44,
    paddingHorizontal: 12,
    justifyContent: 'center',
    borderBottomWidth: 2,
    borderBottomColor: 'transparent',
  },
  open: { backgroundColor: color.surface.selected, borderBottomColor: color.ink.strong },
});
