import { StyleSheet, View } from 'react-native';
import { Button } from '@/components/ui/Button';
import { Text } from '@/components/ui/Text';
import { color } from '@/components/ui/theme';
import type { Fit } from '@/lib/contracts/fit';

export type Finding = Fit['findings'][number];
export type FoundRemedy = Finding['remedies'][number];

export function verdictWord(finding: Finding): string {
  return finding.verdict === 'meets' ? 'meets' : finding.verdict === 'misses' ? 'misses' : 'cannot be judged';
}

/** How much of the last step of the granularity is filled: whole steps and the part that is left over. */
function LengthRule({ finding }: { finding: Finding }) {
  if (finding.check !== 'granularity' || finding.measured === null || !finding.limit) return null;
  const whole = Math.floor(finding.measured / finding.limit);
  const part = finding.measured / finding.limit - whole;
  if (whole > 40 || (whole === 0 && part === 0)) return null;
  return (
    <View aria-hidden style={styles.rule}>
      {Array.from({ length: whole }, (_, i) => (
        <View key={i} style={styles.step}>
          <View style={styles.full} />
        </View>
      ))}
      {part > 0 ? (
        <View style={[styles.step, styles.open]}>
          <View style={[styles.full, { width: `${part * 100}%` }]} />
        </View>
      ) : null}
    </View>
  );
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

/** What misses, by how much, one sentence, and what mends it. */
export function FindingCard({
  finding,
  onApply,
  busy,
}: {
  finding: Finding;
  /** Null where nothing can be changed here. */
  onApply: ((remedy: FoundRemedy) => void) | null;
  busy: boolean;
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
        <Text variant="small" weight={600} tone={misses ? 'danger' : 'quiet'}>
          {misses ? finding.byHowMuch : 'cannot be judged'}
        </Text>
      </View>
      <Text>{finding.words}</Text>
      <LengthRule finding={finding} />
      {finding.remedies.map((remedy) => (
        <View key={remedy.label} style={styles.remedy}>
          {onApply ? (
            <Button busy={busy} onPress={() => onApply(remedy)}>
              {remedy.label}
            </Button>
          ) : (
            <Text weight={600}>{remedy.label}</Text>
          )}
          <Text variant="small" tone="quiet">
            {remedy.cost}
          </Text>
        </View>
      ))}
      {misses && finding.remedies.length === 0 ? (
        <Text variant="small" tone="quiet">
          {finding.hard ? 'A pack is refused until this is mended.' : 'A pack can be made; its card says this.'}
        </Text>
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
  rule: { flexDirection: 'row', gap: 2, height: 20 },
  step: { flex: 1, borderWidth: 1, borderColor: color.rule.strong, padding: 1 },
  open: { borderStyle: 'dashed' },
  full: { height: '100%', backgroundColor: color.plot.point },
  remedy: { gap: 4 },
});
