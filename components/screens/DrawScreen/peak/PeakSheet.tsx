import { useEffect, useMemo, useRef, useState } from 'react';
import { StyleSheet, View } from 'react-native';
import { Blank } from '@/components/ui/Blank';
import { Button } from '@/components/ui/Button';
import { Notice } from '@/components/ui/Notice';
import { Text } from '@/components/ui/Text';
import { color } from '@/components/ui/theme';
import { formatInteger, formatNumber, parseQuantity } from '@/lib/drawing/quantities';
import { planSettings } from '@/lib/editor/commands/settings';
import { createCellCensus, interpolationOf } from '@/lib/synth';
import { TableSheet } from '../forms/TableSheet';
import type { TableContext } from '../tableContext';
import { useSettings } from '../useEditorState';
import { PeakBlanksRow } from './PeakBlanksRow';
import { PeakCcdf } from './PeakCcdf';
import { PeakWay } from './PeakWay';
import {
  APPLY_WORDS,
  axisOf,
  costRows,
  firstBlanks,
  missingFor,
  seededStreams,
  WAY_NAMES,
  WAYS,
  type PeakBlanks,
  type WayId,
} from './peakWords';
import { useDrawingCount, usePeakWays } from './usePeakWays';

/** Samples of a frame at M′ up to which every way is tried at once. */
const AT_ONCE_MOST = 2 ** 18;

/** The limit that was last set, for as long as the page is open: it is a wish, no part of the document. */
let lastLimitDb = 9.5;

/** Lower the peak: four ways side by side, the chosen one shown on the table before it is applied. */
export function PeakSheet({ table }: { table: TableContext }) {
  const { editor, live, peak, perform, open } = table;
  const settings = useSettings(editor);
  const drawing = useDrawingCount(editor);
  // counted anew with each drawing, not with each render
  const cells = useMemo(() => {
    const content = { ...editor.document.settings, grid: { rows: [], rowOfSymbol: [] } };
    return createCellCensus(content, editor.document.cells).cellsOfInk;
    // eslint-disable-next-line react-hooks/exhaustive-deps -- the cells are changed in place
  }, [editor, drawing, settings]);
  const [limitDb, setLimitDb] = useState(lastLimitDb);
  const [blanks, setBlanks] = useState<PeakBlanks>(() => firstBlanks(settings, cells, limitDb));
  const [chosen, setChosen] = useState<WayId>(
    () => WAYS.findLast((way) => !missingFor(way, settings, cells)) ?? 'phases',
  );
  const [refusal, setRefusal] = useState<string | null>(null);
  const { states, start, cancel, forget } = usePeakWays(peak);
  const refs = useRef(new Map<WayId, { focus(): void }>());

  const { fftSize, symbolCount, oversampling } = settings;
  const isTriedAtOnce = fftSize * symbolCount * interpolationOf(oversampling) <= AT_ONCE_MOST;
  const blanksNow = useRef(blanks);
  useEffect(() => {
    blanksNow.current = blanks;
  });

  // The drawing is another one: everything is measured anew.
  useEffect(() => {
    forget();
    start('now', blanksNow.current);
    const ready = WAYS.filter((way) => !missingFor(way, editor.document.settings, cells));
    if (isTriedAtOnce) for (const way of [...ready].reverse()) start(way, blanksNow.current);
    // eslint-disable-next-line react-hooks/exhaustive-deps -- once a drawing
  }, [drawing]);

  const now = states.now.result?.figures ?? null;
  const missing = missingFor(chosen, settings, cells);
  const { result } = states[chosen];
  const plan = useMemo(
    () => (result?.change && !missing ? planSettings(editor.document, result.change, WAY_NAMES[chosen]) : null),
    // eslint-disable-next-line react-hooks/exhaustive-deps -- settings stand for the document's
    [editor, result, chosen, missing, settings],
  );

  // The chosen way is shown on the table while the sheet is open, and the peaks that are now hollow beside it.
  useEffect(() => {
    editor.preview(plan?.kind === 'patch' ? plan.patch : null);
  }, [editor, plan]);
  useEffect(() => {
    live.showPeaksBefore(now && plan?.kind === 'patch' ? Float32Array.from(now.symbolPaprDb) : null);
  }, [live, now, plan]);
  useEffect(
    () => () => {
      editor.preview(null);
      live.showPeaksBefore(null);
    },
    [editor, live],
  );

  const choose = (way: WayId) => {
    setChosen(way);
    setRefusal(null);
    const state = states[way];
    if (!state.result && !state.isRunning && !missingFor(way, settings, cells)) start(way, blanks);
  };
  const set = (change: Partial<PeakBlanks>) => {
    const next = { ...blanks, ...change };
    setBlanks(next);
    if (!missing) start(chosen, next);
  };
  const apply = () => {
    const message = perform(plan);
    if (message === null) open(null);
    setRefusal(message);
  };

  const nowDb = now?.paprDb ?? null;
  const reached = WAYS.flatMap((way) => states[way].result?.figures.paprDb ?? []);
  const axis = nowDb === null ? null : axisOf([nowDb, limitDb, ...reached]);
  const stands = settings.peakReduction;
  const replaces =
    stands.kind !== 'none' && stands.kind !== chosen && (chosen === 'toneReservation' || chosen === 'clipAndFilter');
  return (
    <TableSheet
      title="Lower the peak"
      onClose={() => open(null)}
      foot={
        <View style={styles.foot}>
          <Text variant="small" tone="quiet" style={styles.fill}>
            Undone like any edit.
          </Text>
          <Button kind="filled" disabledBecause={whyNot(plan, missing, states[chosen])} onPress={apply}>
            {APPLY_WORDS[chosen]}
          </Button>
        </View>
      }
    >
      <View style={styles.now}>
        {nowDb === null ? (
          <Text variant="small" role="status">
            {states.now.failed ?? (now ? 'Nothing is painted.' : 'Measuring the peak')}
          </Text>
        ) : (
          <Text variant="small">
            {'Now '}
            <Text variant="figureSmall" weight={500} tone="strong">
              {formatNumber(nowDb, 2, true)}
            </Text>
            {` dB, worst in symbol ${formatInteger(now!.worstSymbol!)}`}
          </Text>
        )}
        <View style={styles.limit}>
          <Text variant="small">Limit</Text>
          <Blank
            label="Limit, dB"
            value={formatNumber(limitDb, 2)}
            onSet={(text) => {
              const parsed = parseQuantity(text, 'dB');
              if (parsed.ok) setLimitDb((lastLimitDb = Math.max(0, Math.min(40, parsed.value))));
            }}
            onStep={(steps) => setLimitDb((lastLimitDb = Math.max(0, Math.round(10 * limitDb + steps) / 10)))}
          />
          <Text variant="small" tone="quiet">
            dB
          </Text>
        </View>
      </View>
      {stands.kind === 'none' ? null : (
        <View style={styles.now}>
          <Text variant="small" style={styles.fill}>
            {`${WAY_NAMES[stands.kind]} stands at ${formatNumber(stands.targetPaprDb, 2)} dB, ${formatInteger(stands.iterations)} passes at most.`}
          </Text>
          <Button
            kind="plain"
            size="small"
            onPress={() =>
              setRefusal(
                perform(
                  planSettings(
                    editor.document,
                    { peakReduction: { kind: 'none' } },
                    `Take away ${WAY_NAMES[stands.kind].toLowerCase()}`,
                  ),
                ),
              )
            }
          >
            Take it away
          </Button>
        </View>
      )}
      {nowDb === null || axis === null ? null : (
        <View role="radiogroup" aria-label="Ways to a lower peak">
          {WAYS.map((way, i) => (
            <PeakWay
              key={way}
              way={way}
              state={states[way]}
              settings={settings}
              nowDb={nowDb}
              limitDb={limitDb}
              axis={axis}
              isChosen={way === chosen}
              isTabbable={way === chosen}
              missing={missingFor(way, settings, cells)}
              onChoose={() => choose(way)}
              onStep={(by) => {
                const next = WAYS[(i + by + WAYS.length) % WAYS.length]!;
                choose(next);
                refs.current.get(next)?.focus();
              }}
              onCancel={() => cancel(way)}
              register={(node) => {
                if (node) refs.current.set(way, node);
              }}
            />
          ))}
        </View>
      )}
      {nowDb === null || missing ? null : (
        <View style={styles.blanks}>
          <PeakBlanksRow way={chosen} blanks={blanks} streams={seededStreams(settings, cells)} onSet={set} />
          {replaces ? (
            <Text variant="small" tone="quiet">
              {`Takes the place of ${WAY_NAMES[stands.kind].toLowerCase()}.`}
            </Text>
          ) : null}
          {now && result ? (
            <View style={styles.cost}>
              <PeakCcdf now={now.sampleCcdf} after={result.change ? result.figures.sampleCcdf : null} />
              <View style={styles.fill}>
                {costRows(now, result.figures, settings).map(({ name, value, unit }) => (
                  <View key={name} style={styles.costRow}>
                    <Text variant="small" numberOfLines={1} style={styles.fill}>
                      {name}
                    </Text>
                    <Text variant="figureSmall" weight={500} tone="strong">
                      {value}
                      <Text variant="label" weight={400} tone="quiet">
                        {unit === '' ? '' : ` ${unit}`}
                      </Text>
                    </Text>
                  </View>
                ))}
              </View>
            </View>
          ) : null}
        </View>
      )}
      {refusal ? <Notice kind="danger">{refusal}</Notice> : null}
    </TableSheet>
  );
}

function whyNot(
  plan: ReturnType<typeof planSettings>,
  missing: string | null,
  { result, isRunning }: { result: unknown; isRunning: boolean },
): string | null {
  if (missing) return missing;
  if (plan?.kind === 'patch') return null;
  if (plan?.kind === 'refused') return plan.message;
  if (isRunning) return 'It is still being tried.';
  return result ? 'It would change nothing.' : 'Not tried yet.';
}

const styles = StyleSheet.create({
  now: {
    flexDirection: 'row',
    flexWrap: 'wrap',
    alignItems: 'center',
    justifyContent: 'space-between',
    gap: 8,
    minHeight: 36,
  },
  limit: { flexDirection: 'row', alignItems: 'center', gap: 6 },
  blanks: { gap: 8, paddingTop: 10, borderTopWidth: 1, borderTopColor: color.rule.hair },
  cost: { flexDirection: 'row', gap: 14 },
  costRow: {
    flexDirection: 'row',
    gap: 8,
    alignItems: 'baseline',
    borderBottomWidth: 1,
    borderBottomColor: color.rule.hair,
    paddingVertical: 1,
  },
  fill: { flex: 1, minWidth: 0 },
  foot: { flexDirection: 'row', alignItems: 'center', gap: 12, flexGrow: 1 },
});
