import { Link, usePathname, type Href } from 'expo-router';
import { useEffect, type ReactNode } from 'react';
import { Pressable, ScrollView, StyleSheet, View } from 'react-native';
import { DemoBand } from './DemoBand';
import { Mark } from './Mark';
import { Text } from './Text';
import { chooseTheme, color, useTheme } from './theme';
import { z } from './tokens';
import { useBreakpoint } from './useBreakpoint';

export interface Place {
  label: string;
  href: Href;
}

const places: Place[] = [
  { label: 'Waveforms', href: '/waveforms' },
  { label: 'Packs', href: '/packs' },
  { label: 'Benches', href: '/benches' },
];

export interface FrameProps {
  /** The page's own title, also of the document. */
  title: string;
  children: ReactNode;
  /** At the right of the wide top line. */
  person: string;
  showTeam: boolean;
  /** A demo says so on every page. */
  demo: boolean;
  /** Phone head: where back leads; without it the mark stands there. */
  backTo?: Href;
  /** Phone head: a stamp or one plain action. */
  headAside?: ReactNode;
  /** Phone head: a field in the title's place, while something is looked for. */
  headField?: ReactNode;
  /** Stands under the head on every page it is given to: a lost connection. */
  notice?: ReactNode;
  /** Takes the foot bar's place on a phone. */
  foot?: ReactNode;
  /** The content fills the page and scrolls by itself. */
  fixed?: boolean;
}

function isOpen(path: string, place: Place): boolean {
  return path === place.href || path.startsWith(`${String(place.href)}/`);
}

/** The frame of every signed-in page: top line on a wide screen, head and foot bar on a phone. */
export function Frame(props: FrameProps) {
  const { title, children, demo, foot, fixed, notice } = props;
  const phone = useBreakpoint() === 'phone';
  useDocumentTitle(title);
  return (
    <View style={styles.page}>
      <View role="banner" style={styles.banner}>
        {phone ? <PhoneHead {...props} /> : <TopLine {...props} />}
        {demo ? <DemoBand /> : null}
        {notice}
      </View>
      {fixed ? (
        <View role="main" style={styles.content}>
          {children}
        </View>
      ) : (
        <ScrollView role="main" style={styles.content} contentContainerStyle={styles.grow}>
          {children}
        </ScrollView>
      )}
      {foot ? (
        <View role="region" aria-label="What can be done here">
          {foot}
        </View>
      ) : phone ? (
        <FootBar />
      ) : null}
    </View>
  );
}

/** "PA ladder 20 MHz, draft, Combwright". */
export function useDocumentTitle(title: string): void {
  useEffect(() => {
    document.title = title ? `${title}, Combwright` : 'Combwright';
  }, [title]);
}

function TopLine({ person, showTeam }: FrameProps) {
  const path = usePathname();
  const theme = useTheme();
  const next = theme.name === 'paper' ? 'night' : 'paper';
  return (
    <View style={styles.top}>
      <Link href="/waveforms" style={styles.brand}>
        <View style={styles.brandRow}>
          <Mark size={24} />
          <Text variant="heading" tone="strong">
            Combwright
          </Text>
        </View>
      </Link>
      <View role="navigation" aria-label="Places" style={styles.places}>
        {places.map((place) => (
          <PlaceLink key={place.label} place={place} open={isOpen(path, place)} />
        ))}
      </View>
      <View style={styles.spring} />
      {showTeam ? (
        <PlaceLink
          place={{ label: 'Team', href: '/people' }}
          open={path.startsWith('/people') || path.startsWith('/audit')}
        />
      ) : null}
      <View style={styles.theme}>
        <Pressable
          role="button"
          aria-label={`Use the ${next} theme`}
          onPress={() => chooseTheme(next)}
          style={styles.themeWord}
        >
          <Text weight={500} tone="quiet" style={styles.placeText}>
            {next === 'night' ? 'Night' : 'Paper'}
          </Text>
        </Pressable>
      </View>
      <PlaceLink
        place={{ label: person, href: '/account' }}
        open={isOpen(path, { label: '', href: '/account' })}
        last
      />
    </View>
  );
}

function PlaceLink({ place, open, last }: { place: Place; open: boolean; last?: boolean }) {
  return (
    <Link href={place.href} aria-current={open ? 'page' : undefined} style={[styles.place, last ? styles.last : null]}>
      <View
        style={[
          styles.placeInner,
          last ? styles.shrink : null,
          { borderBottomColor: open ? color.ink.strong : 'transparent' },
        ]}
      >
        <Text weight={open ? 600 : 500} tone={open ? 'strong' : 'quiet'} numberOfLines={1} style={styles.placeText}>
          {place.label}
        </Text>
      </View>
    </Link>
  );
}

function PhoneHead({ title, backTo, headAside, headField }: FrameProps) {
  return (
    <View style={styles.phoneHead}>
      {backTo ? (
        <Link href={backTo} aria-label="Back" style={styles.back}>
          <View style={styles.backInner}>
            <svg width={20} height={20} viewBox="0 0 20 20" aria-hidden style={{ color: color.ink.strong }}>
              <path d="M12.5 3.5 6 10l6.5 6.5" fill="none" stroke="currentColor" strokeWidth={2} />
            </svg>
          </View>
        </Link>
      ) : (
        <View style={styles.phoneMark}>
          <Mark size={24} />
        </View>
      )}
      <Text
        variant="heading"
        heading={1}
        tone="strong"
        numberOfLines={1}
        style={headField ? styles.unseen : styles.phoneTitle}
      >
        {title}
      </Text>
      {headField ? <View style={styles.phoneTitle}>{headField}</View> : null}
      {headAside ? <View style={styles.headAside}>{headAside}</View> : null}
    </View>
  );
}

/** Places that a phone reaches through More. */
const underMore = ['/benches', '/people', '/audit', '/account'];

function FootBar() {
  const path = usePathname();
  const all: Place[] = [places[0]!, places[1]!, { label: 'More', href: '/more' }];
  return (
    <View role="navigation" aria-label="Places" style={styles.foot}>
      {all.map((place) => {
        const open = isOpen(path, place) || (place.href === '/more' && underMore.some((one) => path.startsWith(one)));
        return (
          <Link key={place.label} href={place.href} aria-current={open ? 'page' : undefined} style={styles.footPlace}>
            <View style={[styles.footInner, { borderTopColor: open ? color.ink.strong : 'transparent' }]}>
              <Text weight={open ? 600 : 500} tone={open ? 'strong' : 'quiet'} style={styles.placeText}>
                {place.label}
              </Text>
            </View>
          </Link>
        );
      })}
    </View>
  );
}

const styles = StyleSheet.create({
  page: { flex: 1, minHeight: 0, backgroundColor: color.surface.desk },
  content: { flex: 1, minHeight: 0 },
  grow: { flexGrow: 1 },
  banner: { zIndex: z.navigation },
  unseen: { position: 'absolute', width: 1, height: 1, overflow: 'hidden', opacity: 0 },
  top: {
    height: 44,
    flexDirection: 'row',
    alignItems: 'stretch',
    paddingHorizontal: 20,
    borderBottomWidth: 1,
    borderBottomColor: color.rule.line,
    backgroundColor: color.surface.sheet,
  },
  brand: { marginRight: 36, display: 'flex', alignItems: 'center', textDecorationLine: 'none' },
  brandRow: { flexDirection: 'row', alignItems: 'center', gap: 9 },
  places: { flexDirection: 'row' },
  place: { display: 'flex', marginRight: 26, textDecorationLine: 'none' },
  placeInner: {
    height: 43,
    justifyContent: 'center',
    borderBottomWidth: 2,
    borderTopWidth: 2,
    borderTopColor: 'transparent',
  },
  shrink: { flexShrink: 1, minWidth: 0 },
  placeText: { fontSize: 14, lineHeight: 20 },
  spring: { flex: 1 },
  theme: { justifyContent: 'center', marginRight: 26 },
  themeWord: { height: 36, justifyContent: 'center' },
  last: { marginRight: 0, maxWidth: 240, minWidth: 0 },
  phoneHead: {
    height: 52,
    flexDirection: 'row',
    alignItems: 'center',
    paddingRight: 8,
    borderBottomWidth: 1,
    borderBottomColor: color.rule.line,
    backgroundColor: color.surface.sheet,
  },
  back: { display: 'flex' },
  backInner: { width: 48, height: 44, alignItems: 'center', justifyContent: 'center' },
  phoneMark: { paddingLeft: 14, paddingRight: 9 },
  phoneTitle: { flex: 1, minWidth: 0 },
  headAside: { height: 44, justifyContent: 'center', flexShrink: 0, marginLeft: 8 },
  foot: {
    flexDirection: 'row',
    paddingBottom: 'env(safe-area-inset-bottom)' as unknown as number,
    borderTopWidth: 1,
    borderTopColor: color.rule.line,
    backgroundColor: color.surface.sheet,
  },
  footPlace: { flex: 1, display: 'flex', textDecorationLine: 'none' },
  footInner: { flex: 1, height: 56, alignItems: 'center', justifyContent: 'center', borderTopWidth: 2 },
});
