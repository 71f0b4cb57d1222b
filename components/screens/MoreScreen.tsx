import { Link, type Href } from 'expo-router';
import { StyleSheet, View } from 'react-native';
import { Text } from '@/components/ui/Text';
import { chooseTheme, color, useTheme } from '@/components/ui/theme';
import { Button } from '@/components/ui/Button';
import { useMe } from '@/lib/client/useSession';
import { Page } from './Page';

/** The phone's fourth word: what has no word of its own in the foot bar. */
export function MoreScreen() {
  const me = useMe();
  const theme = useTheme();
  const next = theme.name === 'paper' ? 'night' : 'paper';
  const places: { label: string; aside: string; href: Href }[] = [
    { label: 'Benches', aside: 'profiles of the generators', href: '/benches' },
    ...(me.rights.includes('managePeople') ? [{ label: 'Team', aside: 'people, audit', href: '/people' as Href }] : []),
    { label: 'Account', aside: me.name, href: '/account' },
  ];
  return (
    <Page title="More">
      <View role="list" style={styles.list}>
        {places.map((place) => (
          <View key={place.label} role="listitem">
            <Link href={place.href} style={styles.link}>
              <View style={styles.row}>
                <Text variant="bodyStrong" tone="strong">
                  {place.label}
                </Text>
                <Text variant="small" tone="quiet">
                  {place.aside}
                </Text>
              </View>
            </Link>
          </View>
        ))}
      </View>
      <Button onPress={() => chooseTheme(next)}>
        {next === 'night' ? 'Use the night theme' : 'Use the paper theme'}
      </Button>
    </Page>
  );
}

const styles = StyleSheet.create({
  list: { backgroundColor: color.surface.sheet, borderWidth: 1, borderColor: color.rule.line },
  link: { textDecorationLine: 'none', display: 'flex' },
  row: {
    flexGrow: 1,
    minHeight: 52,
    paddingHorizontal: 16,
    flexDirection: 'row',
    alignItems: 'center',
    justifyContent: 'space-between',
    borderBottomWidth: 1,
    borderBottomColor: color.rule.hair,
  },
});
