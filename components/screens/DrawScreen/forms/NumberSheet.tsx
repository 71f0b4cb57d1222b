import { useState } from 'react';
import { StyleSheet, View } from 'react-native';
import { Button } from '@/components/ui/Button';
import { NumberField } from '@/components/ui/NumberField';
import { Text } from '@/components/ui/Text';
import { color } from '@/components/ui/theme';
import { OneOf } from '@/components/ui/WordsToPress';
import type { QuantityText } from '@/lib/drawing/quantities';
import { planSettings, type SettingsChange } from '@/lib/editor/commands/settings';
import { whatFollows } from '@/lib/editor/commands/whatFollows';
import type { Outcome } from '@/lib/editor/commands/outcome';
import { numberWord, numberWords } from '../numberWords';
import type { NumberId } from '../sheets';
import type { TableContext } from '../tableContext';
import { useSettings } from '../useEditorState';
import { TableSheet } from './TableSheet';

const UNIT_FACTORS: Record<string, string> = { Hz: '', kHz: 'k', MHz: 'M' };

/** One number of the strip: field, limits, what follows. Nothing changes before Set; wide, leaving the field sets it. */
export function NumberSheet({ table, id, isPhone }: { table: TableContext; id: NumberId; isPhone: boolean }) {
  const { editor, perform, open } = table;
  const settings = useSettings(editor);
  const word = numberWord(id);
  const [typed, setTyped] = useState<string | null>(null);
  const [unit, setUnit] = useState(word.unit);
  const [refused, setRefused] = useState<string | null>(null);
  const text = typed ?? word.text(settings);
  const plan = planOf(table, id, text, unit);
  const next = numberWords[(numberWords.findIndex((one) => one.id === id) + 1) % numberWords.length]!;
  const close = () => open(null);

  const set = (value: string): void => {
    const { outcome, error } = planOf(table, id, value, unit);
    if (error !== null) return setRefused(error);
    setRefused(perform(outcome));
    setTyped(null);
  };
  const error = typed === null ? refused : (plan.error ?? refused);
  const follows = plan.change ? whatFollows(editor.document, plan.change) : [];

  return (
    <TableSheet
      key={id}
      title="Numbers"
      onClose={close}
      foot={
        <>
          <Button kind="plain" onPress={() => open({ kind: 'number', id: next.id })}>
            {`Next: ${next.name}`}
          </Button>
          <View style={styles.spring} />
          {table.rights.canDraw ? (
            <Button
              kind="filled"
              size={isPhone ? 'foot' : 'usual'}
              disabledBecause={plan.error}
              onPress={() => {
                set(text);
                if (isPhone && plan.error === null) close();
              }}
            >
              {`Set ${word.name === 'FFT size' ? word.name : word.name.toLowerCase()}`}
            </Button>
          ) : null}
        </>
      }
    >
      {id === 'mode' ? (
        <View style={styles.mode}>
          <Text variant="small" weight={500}>
            Mode
          </Text>
          <OneOf
            label="Mode"
            choices={[
              { value: 'loop', label: 'Loop' },
              { value: 'burst', label: 'Burst' },
            ]}
            value={text as 'loop' | 'burst'}
            onChange={(value) => (isPhone ? setTyped(value) : set(value))}
          />
          <Text variant="small" tone="quiet">
            {word.limits(settings)}
          </Text>
        </View>
      ) : (
        <NumberField
          key={`${id} ${settings === editor.document.settings ? word.text(settings) : ''}`}
          label={word.name}
          value={word.text(settings)}
          unit={unit}
          {...(word.units ? { units: word.units, onUnit: setUnit } : {})}
          limits={word.limits(settings)}
          error={error}
          words={word.takesWords ?? false}
          autoFocus
          onText={(value) => {
            setTyped(value);
            setRefused(null);
          }}
          onSet={(value) => (isPhone ? setTyped(value) : set(value))}
          {...(word.step
            ? {
                onStep: (steps: number) =>
                  setRefused(perform(planSettings(editor.document, word.step!(settings, steps), labelOf(word.name)))),
              }
            : {})}
        />
      )}
      {word.nearest ? (
        <View style={styles.nearest}>
          {word.nearest(text).map((value) => (
            <View key={value} style={styles.fill}>
              <OneOf
                label={`${word.name} ${value}`}
                choices={[{ value, label: value }]}
                value={text}
                onChange={(chosen) => (isPhone ? setTyped(chosen) : set(chosen))}
              />
            </View>
          ))}
        </View>
      ) : null}
      <View>
        {follows.map((row) => (
          <View key={row.name} style={styles.row}>
            <Text variant="small" style={styles.name}>
              {row.name}
            </Text>
            <Quantity text={row.now} quiet />
            <Text variant="small" tone="quiet" aria-label="becomes">
              →
            </Text>
            <Quantity text={row.then} />
          </View>
        ))}
        <Text variant="small" tone="quiet" role="status" style={styles.after}>
          {plan.words}
        </Text>
      </View>
    </TableSheet>
  );
}

const labelOf = (name: string) => `Set ${name}`;

interface Plan {
  outcome: Outcome;
  /** Why it cannot be set. */
  error: string | null;
  /** The legal change, for what follows. */
  change: SettingsChange | null;
  words: string;
}

/** What setting this text would do, without doing it. */
function planOf({ editor }: TableContext, id: NumberId, text: string, unit: string): Plan {
  const word = numberWord(id);
  const factor = UNIT_FACTORS[unit];
  const scaled = factor && /\d\s*$/.test(text) && !text.includes('/') ? `${text}${factor}` : text;
  const parsed = word.parse(scaled, editor.document.settings);
  if (!parsed.ok) return { outcome: null, error: parsed.message, change: null, words: '' };
  const outcome = planSettings(editor.document, parsed.value, labelOf(word.name));
  if (outcome?.kind === 'refused') return { outcome, error: outcome.message, change: null, words: '' };
  const isCut = outcome?.kind === 'question';
  const isGridSize = id === 'fftSize' || id === 'symbols';
  const words = isCut ? outcome.question.text : outcome && isGridSize ? 'No painted cell is cut.' : '';
  return { outcome, error: null, change: parsed.value, words };
}

function Quantity({ text, quiet }: { text: QuantityText; quiet?: boolean }) {
  return (
    <Text variant="figureSmall" weight={quiet ? 400 : 500} tone={quiet ? 'quiet' : 'strong'} style={styles.value}>
      {text.value}
      <Text variant="label" weight={400} tone="quiet">
        {text.unit ? ` ${text.unit}` : ''}
      </Text>
    </Text>
  );
}

const styles = StyleSheet.create({
  spring: { flex: 1 },
  mode: { gap: 6 },
  nearest: { flexDirection: 'row', gap: 8, marginVertical: 8 },
  fill: { flex: 1 },
  row: {
    minHeight: 28,
    flexDirection: 'row',
    alignItems: 'center',
    gap: 10,
    borderTopWidth: 1,
    borderTopColor: color.rule.hair,
    paddingVertical: 3,
  },
  name: { flex: 1 },
  value: { minWidth: 96, textAlign: 'right' },
  after: { minHeight: 20, marginTop: 4 },
});
