import type { Href } from 'expo-router';
import type { ReactNode } from 'react';
import { StyleSheet, View } from 'react-native';
import { Button } from '@/components/ui/Button';
import { Text } from '@/components/ui/Text';
import { TextLink } from '@/components/ui/TextLink';
import { color } from '@/components/ui/theme';
import type { Fit } from '@/lib/contracts/fit';
import { LengthRuler } from './LengthRuler';

export type Finding = Fit['findings'][number];
export type FoundRemedy = Finding['remedies'][number];

/** How a remedy is pressed here: applied, made as a new draft, or only read. */
export interface RemedyPress {
  /** Null: the button says the remedy's own label. */
  label: string | null;
  press: (remedy: FoundRemedy) => void;
}

export function verdictWord(finding: Finding): string {
  return finding.verdict === 'meets' ? 'meets' : finding.verdict === 'misses' ? 'misses' : 'cannot be judged';
}

/** Arrows go from finding to finding, by the first remedy of each. */
function moveFinding(event: { key: string; target: HTMLElement; preventDefault: () => void }): void {
  if (event.key !== 'ArrowDown' && event.key !== 'ArrowUp') return;
  const cards = [...document.querySelectorAll<HTMLElement>('[data-finding]')].filter((card) =>
    card.querySelector('[role=button]'),
  );
  const at = cards.findIndex((card) => card.contains(event.target));
  const next = cards[at + (event.key === 'ArrowDown' ? 1 : -1)];
  if (!next) return;
  event.preventDefault();
  next.querySelector<HTMLElement>('[role=button]')?.focus();
}

/** What a miss without a remedy leaves to do. */
function withoutRemedy(finding: Finding): string {
  if (finding.check === 'symbolPeak') return 'It may be meant: a pack can be made, and its card says this.';
  return finding.hard
    ? 'Nothing in the waveform can mend this. Choose another bench.'
    : 'Nothing in the waveform can mend this. A pack can be made; its card says this.';
}

/** What misses, by how much, one sentence, and what mends it. */
export function FindingCard({
  finding,
  press,
  busy,
  ruler,
  tableHref,
}: {
  finding: Finding;
  /** Null where nothing can be changed here. */
  press: RemedyPress | null;
  busy: boolean;
  /** The length is drawn in its own card where nothing else on the page draws it. */
  ruler: boolean;
  /** Where the peak is lowered; absent where this revision is not drawn on. */
  tableHref?: Href | undefined;
}) {
  const misses = finding.verdict === 'misses';
  return (
    <View
      style={[styles.card, misses ? styles.misses : null]}
      {...({ dataSet: { finding: finding.check }, onKeyDown: moveFinding } as object)}
    >
      <View style={styles.head}>
        <Text variant="bodyStrong" heading={3} tone="strong" style={styles.grow}>
          {finding.title}
        </Text>
        <Text variant="small" weight={600} tone={misses ? 'danger' : 'quiet'} style={styles.byHowMuch}>
          {misses ? finding.byHowMuch : 'cannot be judged'}
        </Text>
      </View>
      <Text>{finding.words}</Text>
      {ruler && finding.check === 'granularity' && finding.measured !== null && finding.limit ? (
        <LengthRuler samples={finding.measured} granularity={finding.limit} />
      ) : null}
      {finding.remedies.map((remedy) => (
        <Remedy key={remedy.label} remedy={remedy} press={press} busy={busy} />
      ))}
      {misses && finding.remedies.length === 0 ? (
        <Text variant="small" tone="quiet">
          {withoutRemedy(finding)}
        </Text>
      ) : null}
      {misses && finding.check === 'symbolPeak' && tableHref ? (
        <TextLink href={tableHref}>Lower the peak on the drawing table</TextLink>
      ) : null}
    </View>
  );
}

function Remedy({ remedy, press, busy }: { remedy: FoundRemedy; press: RemedyPress | null; busy: boolean }) {
  let head: ReactNode = <Text weight={600}>{remedy.label}</Text>;
  if (press?.label === null)
    head = (
      <Button busy={busy} onPress={() => press.press(remedy)}>
        {remedy.label}
      </Button>
    );
  return (
    <View style={styles.remedy}>
      {head}
      <Text variant="small" tone="quiet">
        {remedy.cost}
      </Text>
      {press && press.label !== null ? (
        <Button busy={busy} label={`${remedy.label}. ${press.label}`} onPress={() => press.press(remedy)}>
          {press.label}
        </Button>
      ) : null}
    </View>
  );
}

const styles = StyleSheet.create({
  card: {
    gap: 8,
    padding: 12,
    paddingLeft: 14,
    backgroundColor: color.surface.sheet,
    borderWidth: 1,
    borderColor: color.rule.line,
    borderLeftWidth: 3,
    borderLeftColor: color.rule.control,
  },
  misses: { backgroundColor: color.surface.raised, borderLeftColor: color.danger.rule },
  head: { flexDirection: 'row', alignItems: 'baseline', gap: 12 },
  grow: { flexGrow: 1, flexShrink: 1 },
  byHowMuch: { flexShrink: 1, textAlign: 'right' },
  remedy: { gap: 4 },
});
