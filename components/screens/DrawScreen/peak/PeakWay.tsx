import { Pressable, StyleSheet, View } from 'react-native';
import { Button } from '@/components/ui/Button';
import { Progress } from '@/components/ui/Progress';
import { Text } from '@/components/ui/Text';
import { color } from '@/components/ui/theme';
import { useBreakpoint } from '@/components/ui/useBreakpoint';
import { formatInteger, formatNumber } from '@/lib/drawing/quantities';
import type { PeakProgress } from '@/lib/editor/live/peakJob';
import type { Settings } from '@/lib/editor/types';
import { PeakAxis } from './PeakAxis';
import { costLine, verdictOf, WAY_NAMES, type WayId } from './peakWords';
import type { WayState } from './usePeakWays';

const AXIS_PX = 250;
const PHONE_AXIS_PX = 212;

/** "120 of 200 tried, the best 9.70 dB". */
export function progressWords({ done, total, bestPaprDb, unit }: PeakProgress): string {
  if (unit === 'symbols') return `${Math.round((100 * done) / Math.max(1, total))} % measured`;
  const best = bestPaprDb === null ? 'none better yet' : `the best ${formatNumber(bestPaprDb, 2, true)} dB`;
  return `${formatInteger(done)} of ${formatInteger(total)} tried, ${best}`;
}

/** One way to a lower peak: name, before and after, what it reaches with its verdict, and its cost in a line. */
export function PeakWay(props: {
  way: WayId;
  state: WayState;
  settings: Settings;
  nowDb: number;
  limitDb: number;
  axis: { from: number; to: number };
  isChosen: boolean;
  isTabbable: boolean;
  missing: string | null;
  onChoose: () => void;
  onStep: (by: 1 | -1) => void;
  onCancel: () => void;
  register: (node: { focus(): void } | null) => void;
}) {
  const { way, state, settings, nowDb, limitDb, axis, isChosen, isTabbable, missing } = props;
  const { onChoose, onStep, onCancel, register } = props;
  const { result, progress, isRunning } = state;
  const axisPx = useBreakpoint() === 'wide' ? AXIS_PX : PHONE_AXIS_PX;
  const reachedDb = result?.figures.paprDb ?? null;
  const verdict = reachedDb === null || missing ? null : verdictOf(reachedDb, limitDb);
  const line = missing ?? lineOf(state, settings);
  const reads = verdict && reachedDb !== null ? `${formatNumber(reachedDb, 2, true)} dB, ${verdict.words}. ` : '';
  return (
    <View style={styles.way}>
      <Pressable
        ref={register as never}
        role="radio"
        aria-checked={isChosen}
        aria-label={`${WAY_NAMES[way]}. ${reads}${line}`}
        tabIndex={isTabbable ? 0 : -1}
        onPress={onChoose}
        {...({
          onKeyDown(event: { key: string; preventDefault(): void }) {
            const by = event.key === 'ArrowDown' ? 1 : event.key === 'ArrowUp' ? -1 : 0;
            if (by === 0) return;
            event.preventDefault();
            onStep(by);
          },
        } as object)}
        style={[styles.row, isChosen ? styles.chosen : null]}
      >
        <View style={styles.left}>
          <Text variant="bodyStrong" tone={isChosen ? 'onSelected' : 'strong'}>
            {WAY_NAMES[way]}
          </Text>
          <PeakAxis widthPx={axisPx} axis={axis} nowDb={nowDb} afterDb={missing ? null : reachedDb} limitDb={limitDb} />
        </View>
        <View style={styles.right}>
          {verdict && reachedDb !== null ? (
            <>
              <Text variant="figure" weight={500} tone="strong" style={styles.figure}>
                {formatNumber(reachedDb, 2, true)}
                <Text variant="small" tone="quiet">
                  {' dB'}
                </Text>
              </Text>
              <Text variant="small" weight={600} tone={verdict.isMet ? 'success' : 'danger'}>
                {verdict.words}
              </Text>
            </>
          ) : null}
        </View>
        <Text variant="small" tone={isChosen ? 'onSelected' : 'quiet'} style={styles.cost}>
          {line}
        </Text>
      </Pressable>
      {isRunning && progress ? (
        <View style={styles.running}>
          <View style={styles.bar}>
            <Progress label={WAY_NAMES[way]} doneRatio={progress.done / Math.max(1, progress.total)} />
          </View>
          <Button size="small" onPress={onCancel} label={`Cancel ${WAY_NAMES[way]}`}>
            Cancel
          </Button>
        </View>
      ) : null}
    </View>
  );
}

function lineOf({ result, progress, isRunning, isCancelled, failed }: WayState, settings: Settings): string {
  if (failed) return failed;
  if (isRunning) return progress ? progressWords(progress) : 'Being tried';
  if (isCancelled) return 'Cancelled. Nothing was kept.';
  return result ? costLine(result, settings) : 'Not tried yet. Press to try.';
}

const styles = StyleSheet.create({
  way: { borderTopWidth: 1, borderTopColor: color.rule.hair },
  row: {
    minHeight: 84,
    flexDirection: 'row',
    flexWrap: 'wrap',
    columnGap: 12,
    paddingVertical: 6,
    paddingHorizontal: 10,
    borderLeftWidth: 3,
    borderLeftColor: 'transparent',
  },
  chosen: { backgroundColor: color.surface.selected, borderLeftColor: color.ink.strong },
  left: { flexGrow: 1, flexShrink: 1 },
  right: { alignItems: 'flex-end', minWidth: 76 },
  figure: { fontSize: 20, lineHeight: 26 },
  cost: { flexBasis: '100%', marginTop: 2 },
  running: { flexDirection: 'row', alignItems: 'center', gap: 12, paddingHorizontal: 10, paddingBottom: 8 },
  bar: { flex: 1 },
});
