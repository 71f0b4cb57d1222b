import { useEffect, useState } from 'react';
import { Pressable, StyleSheet, View } from 'react-native';
import { InkSwatch } from '@/components/drawing/InkSwatch';
import { ChoiceBlank } from '@/components/ui/Blank';
import { Button } from '@/components/ui/Button';
import { NumberField } from '@/components/ui/NumberField';
import { Text } from '@/components/ui/Text';
import { TextField } from '@/components/ui/TextField';
import { color } from '@/components/ui/theme';
import { AnyOf, OneOf } from '@/components/ui/WordsToPress';
import { formatInteger, parseQuantity } from '@/lib/drawing/quantities';
import { planAddInk, planChangeInk, planRemoveInk } from '@/lib/editor/commands/tray';
import { countCells } from '@/lib/editor/document';
import { bitsPerCell, isMapKnown, type BitMap, type Ink } from '@/lib/synth';
import { streamText } from '../inkWords';
import { decibels } from '../numberWords';
import type { TableContext } from '../tableContext';
import { useChangeCount, useSettings } from '../useEditorState';
import { FactorForm } from './FactorForm';
import { bodyOf, CONSTELLATIONS, draftOf, withConstellation, withRole, type InkDraft } from './inkDraft';
import { FirstValues, MapPicture } from './InkPictures';
import { TableSheet } from './TableSheet';

const ROLES: readonly { value: InkDraft['role']; label: string }[] = [
  { value: 'data', label: 'Data' },
  { value: 'pilot', label: 'Pilot' },
  { value: 'tone', label: 'Tone' },
  { value: 'reserved', label: 'Reserved' },
];

const FACTOR_ORDINALS = ['a first', 'a second', 'a third'];
const FACTORS_MOST = 3;

/** One ink: role, name, power and value. Nothing changes before the button; a new ink comes to the end of the tray. */
export function InkSheet({ table, place, isPhone }: { table: TableContext; place: number | null; isPhone: boolean }) {
  const { editor, perform, open, rights } = table;
  const settings = useSettings(editor);
  const ink = place === null ? null : (settings.tray[place] ?? null);
  const [draft, setDraft] = useState(() => draftOf(ink, settings.streams));
  const [error, setError] = useState<string | null>(null);
  useChangeCount(editor);
  // The drawing behind shows what the button would do, as the form stands now; what cannot be done shows nothing.
  useEffect(() => {
    if (place === null) return;
    const outcome = planChangeInk(editor.document, place, bodyOf(draft));
    editor.preview(outcome?.kind === 'patch' ? outcome.patch : null);
  }, [editor, place, draft]);
  useEffect(() => () => editor.preview(null), [editor]);
  const cells = place === null ? 0 : (countCells(editor.document)[place] ?? 0);
  const change = (to: Partial<InkDraft>) => {
    setError(null);
    setDraft((before) => ({ ...before, ...to }));
  };
  const body = bodyOf(draft);
  const shown = { inkId: 'k1', ...body } as Ink;

  const set = () => {
    const outcome = place === null ? planAddInk(editor.document, body) : planChangeInk(editor.document, place, body);
    const words = perform(outcome);
    setError(words);
    if (words !== null) return;
    if (place === null) editor.set({ ink: settings.tray.length });
    open(null);
  };
  const remove = () => {
    if (place === null) return;
    const words = perform(planRemoveInk(editor.document, place));
    setError(words);
    if (words === null) open(null);
  };
  const cellsText = `${formatInteger(cells)} ${cells === 1 ? 'cell' : 'cells'}`;
  return (
    <TableSheet
      title={draft.name || 'New ink'}
      lead={<InkSwatch ink={shown} sizePx={36} />}
      note={place === null ? '' : `ink ${place + 1}, ${cellsText}`}
      onClose={() => open(null)}
      foot={
        rights.canDraw ? (
          <>
            {place !== null && !isPhone ? (
              <Button kind="grave" onPress={remove}>
                Remove this ink
              </Button>
            ) : null}
            <View style={styles.spring} />
            <Button kind="filled" size={isPhone ? 'foot' : 'usual'} fill={isPhone} onPress={set}>
              {place === null ? 'Add this ink' : cells > 0 ? `Change ${cellsText}` : 'Keep this ink'}
            </Button>
          </>
        ) : undefined
      }
    >
      <View style={styles.form}>
        <Labelled label="Role">
          <OneOf label="Role" choices={ROLES} value={draft.role} onChange={(role) => setDraft(withRole(draft, role))} />
        </Labelled>
        <View style={styles.pair}>
          <TextField
            label="Name"
            value={draft.name}
            maxLength={60}
            onChangeText={(name) => change({ name })}
            style={styles.name}
          />
          <NumberField
            label="Power"
            unit="dB"
            value={decibels(draft.powerDb)}
            limits="−60 to 20"
            style={styles.power}
            onSet={(text) => {
              const parsed = parseQuantity(text, 'dB');
              if (parsed.ok) change({ powerDb: parsed.value });
              else setError(parsed.message);
            }}
            onStep={(steps) => change({ powerDb: Math.max(-60, Math.min(20, draft.powerDb + steps)) })}
          />
        </View>
        {error ? (
          <Text variant="small" tone="danger" role="alert">
            {error}
          </Text>
        ) : null}
        {draft.role === 'data' ? <DataPart table={table} draft={draft} setDraft={setDraft} /> : null}
        {draft.role === 'pilot' || draft.role === 'tone' ? (
          <FactorsPart table={table} place={place ?? 0} draft={draft} change={change} />
        ) : null}
        {draft.role === 'reserved' ? (
          <Text variant="small" tone="quiet">
            Free cells: empty until something fills them.
          </Text>
        ) : null}
        {place !== null && isPhone && rights.canDraw ? (
          <Button kind="grave" onPress={remove}>
            Remove this ink
          </Button>
        ) : null}
      </View>
    </TableSheet>
  );
}

function Labelled({ label, aside, children }: { label: string; aside?: string; children: React.ReactNode }) {
  return (
    <View>
      <View style={styles.labelRow}>
        <Text variant="small" weight={500} style={styles.spring}>
          {label}
        </Text>
        {aside ? (
          <Text variant="small" tone="quiet">
            {aside}
          </Text>
        ) : null}
      </View>
      {children}
    </View>
  );
}

const BIT_MAPS: readonly { value: BitMap; label: string; ends: string }[] = [
  { value: 'ts38211', label: 'TS 38.211', ends: '' },
  { value: 'ieee80211', label: 'IEEE 802.11', ends: 'IEEE 802.11 has no π/2-BPSK.' },
  { value: 'en300744', label: 'EN 300 744', ends: 'EN 300 744 has QPSK, 16-QAM and 64-QAM.' },
];

function DataPart({
  table,
  draft,
  setDraft,
}: {
  table: TableContext;
  draft: InkDraft;
  setDraft: (draft: InkDraft) => void;
}) {
  const { streams } = useSettings(table.editor);
  const { constellation, bitMap, streamId } = draft.data;
  const bits = bitsPerCell(constellation);
  return (
    <>
      <Labelled label="Constellation" aside={`${bits} ${bits === 1 ? 'bit' : 'bits'} a cell`}>
        <View role="radiogroup" aria-label="Constellation" style={styles.grid}>
          {CONSTELLATIONS.map((one, i) => {
            const isChosen = one.value === constellation;
            const sample = {
              inkId: 'k1',
              name: '',
              role: 'data',
              powerDb: 0,
              value: { ...draft.data, constellation: one.value },
            } as Ink;
            return (
              <Pressable
                key={one.value}
                role="radio"
                aria-checked={isChosen}
                aria-label={one.small ? `${one.label}-QAM` : one.label}
                onPress={() => setDraft(withConstellation(draft, one.value))}
                style={[
                  i < 3 ? styles.third : styles.fifth,
                  {
                    backgroundColor: isChosen ? color.surface.selected : color.surface.raised,
                    boxShadow: isChosen ? `inset 0 -2px 0 ${color.ink.strong}` : 'none',
                  } as object,
                ]}
              >
                <InkSwatch ink={sample} sizePx={26} />
                <View>
                  <Text variant="small" weight={isChosen ? 600 : 500} tone={isChosen ? 'onSelected' : 'body'}>
                    {one.label}
                  </Text>
                  {one.small ? (
                    <Text variant="axis" tone={isChosen ? 'onSelected' : 'quiet'}>
                      {one.small}
                    </Text>
                  ) : null}
                </View>
              </Pressable>
            );
          })}
        </View>
      </Labelled>
      <Labelled label="Bit map">
        <OneOf
          label="Bit map"
          choices={BIT_MAPS.map(({ value, label, ends }) => ({
            value,
            label,
            offBecause: isMapKnown(constellation, value) ? null : ends,
          }))}
          value={bitMap}
          onChange={(value) => setDraft({ ...draft, data: { ...draft.data, bitMap: value } })}
        />
      </Labelled>
      <View style={styles.pair}>
        <MapPicture value={draft.data} />
        <View style={styles.beside}>
          <Labelled label="Payload">
            <ChoiceBlank
              label="Payload"
              fill
              value={streamId}
              options={streams.map((stream) => ({
                value: stream.streamId,
                label: `${stream.name}: ${streamText(stream)}`,
              }))}
              onSet={(value) => setDraft({ ...draft, data: { ...draft.data, streamId: value } })}
            />
          </Labelled>
          <Text variant="small" tone="quiet">
            First bit is the most significant. Mean power of the points is 1.
          </Text>
          {bits > 6 ? (
            <Text variant="small" tone="quiet">
              Shown: the corner of 4 × 4 next to zero.
            </Text>
          ) : null}
        </View>
      </View>
    </>
  );
}

function FactorsPart({
  table,
  place,
  draft,
  change,
}: {
  table: TableContext;
  place: number;
  draft: InkDraft;
  change: (to: Partial<InkDraft>) => void;
}) {
  const { factors, role } = draft;
  const isTone = role === 'tone';
  const least = isTone ? 0 : 1;
  const count = factors.length;
  return (
    <>
      <Text variant="small" weight={500}>
        {count === 0
          ? 'Value: a sine of its own phase'
          : count === 1
            ? 'Value, one factor'
            : `Value, the product of ${count} factors`}
      </Text>
      {factors.map((factor, i) => (
        <FactorForm
          key={i}
          factor={factor}
          isTone={isTone}
          onSet={(next) => change({ factors: factors.map((other, at) => (at === i ? next : other)) })}
          onRemove={count > least ? () => change({ factors: factors.filter((_, at) => at !== i) }) : null}
        />
      ))}
      {count < FACTORS_MOST ? (
        <View style={styles.add}>
          <Button
            kind="plain"
            onPress={() =>
              change({
                factors: [
                  ...factors,
                  { sequence: { kind: 'alternating' }, counter: isTone ? 'subcarrier' : 'symbol', start: 0 },
                ],
              })
            }
          >
            {`Add ${FACTOR_ORDINALS[count]} factor`}
          </Button>
        </View>
      ) : null}
      {isTone ? (
        <>
          <NumberField
            label="Phase"
            unit="°"
            value={decibels(draft.phaseDeg)}
            limits="degrees"
            onSet={(text) => {
              const parsed = parseQuantity(text.replace('°', ''));
              if (parsed.ok) change({ phaseDeg: parsed.value });
            }}
            onStep={(steps) => change({ phaseDeg: draft.phaseDeg + steps })}
          />
          <AnyOf
            label="Tone"
            choices={[{ value: 'runs', label: 'Runs on through prefixes' }]}
            values={draft.continuous ? ['runs'] : []}
            onToggle={(_, on) => change({ continuous: on })}
          />
        </>
      ) : null}
      {count > 0 ? <FirstValues editor={table.editor} place={place} factors={factors} /> : null}
    </>
  );
}

const styles = StyleSheet.create({
  form: { gap: 12 },
  spring: { flex: 1 },
  pair: { flexDirection: 'row', gap: 12 },
  name: { flex: 3, minWidth: 0 },
  power: { flex: 2, minWidth: 130 },
  labelRow: { flexDirection: 'row', marginBottom: 4 },
  grid: {
    flexDirection: 'row',
    flexWrap: 'wrap',
    gap: 1,
    padding: 1,
    backgroundColor: color.rule.control,
    borderRadius: 3,
  },
  third: {
    flexBasis: '30%',
    flexGrow: 1,
    height: 44,
    flexDirection: 'row',
    alignItems: 'center',
    gap: 7,
    paddingHorizontal: 7,
  },
  fifth: {
    flexBasis: '18%',
    flexGrow: 1,
    height: 46,
    flexDirection: 'row',
    alignItems: 'center',
    gap: 5,
    paddingHorizontal: 5,
  },
  beside: { flex: 1, gap: 8, minWidth: 0 },
  add: { alignSelf: 'flex-start' },
});
