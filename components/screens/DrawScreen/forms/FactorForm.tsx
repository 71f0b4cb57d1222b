import { useState, type ReactNode } from 'react';
import { StyleSheet, View } from 'react-native';
import { Blank, ChoiceBlank } from '@/components/ui/Blank';
import { Button } from '@/components/ui/Button';
import { Text } from '@/components/ui/Text';
import { color } from '@/components/ui/theme';
import { parseInteger, type Parsed } from '@/lib/drawing/quantities';
import type { Factor, Sequence } from '@/lib/synth';
import { counterWord, NAMED_REGISTERS, registerName, sequenceName } from '../inkWords';
import { firstSequence } from './inkDraft';

const KINDS: readonly Sequence['kind'][] = [
  'constant',
  'alternating',
  'pn',
  'gold',
  'zadoffChu',
  'newman',
  'schroeder',
  'listed',
];
const COUNTERS: readonly Factor['counter'][] = ['cell', 'symbolCell', 'subcarrier', 'symbol'];
const signed = (value: number) => (value < 0 ? `−${-value}` : String(value));

/** A whole number in a blank; what is not one stays and is ruled. */
function WholeBlank({ label, value, onSet }: { label: string; value: number; onSet: (value: number) => void }) {
  const [wrong, setWrong] = useState(false);
  return (
    <Blank
      label={label}
      value={signed(value)}
      wrong={wrong}
      onSet={(text) => {
        const parsed = parseInteger(text);
        setWrong(!parsed.ok);
        if (parsed.ok) onSet(parsed.value);
      }}
      onStep={(steps) => onSet(value + steps)}
    />
  );
}

function TextBlank({
  label,
  value,
  read,
  onSet,
}: {
  label: string;
  value: string;
  read: (text: string) => Parsed<unknown>;
  onSet: (text: string) => void;
}) {
  const [wrong, setWrong] = useState(false);
  return (
    <Blank
      label={label}
      value={value}
      wrong={wrong}
      onSet={(text) => {
        const isWrong = !read(text).ok;
        setWrong(isWrong);
        if (!isWrong) onSet(text);
      }}
    />
  );
}

const Words = ({ children }: { children: ReactNode }) => (
  <Text variant="small" style={styles.words}>
    {children}
  </Text>
);

function parseTaps(text: string): Parsed<number[]> {
  const taps = text
    .split(/[ ,;]+/)
    .filter(Boolean)
    .map(Number);
  return taps.length > 0 && taps.every((tap) => Number.isInteger(tap) && tap >= 1 && tap <= 31)
    ? { ok: true, value: taps.sort((a, b) => a - b) }
    : { ok: false, message: 'taps of 1 to 31' };
}

/** "1 0; −1 0": pairs of real and imaginary part. */
export function parsePoints(text: string): Parsed<[number, number][]> {
  const points = text
    .replace(/\u2212/g, '-')
    .split(';')
    .filter((part) => part.trim() !== '')
    .map((part) =>
      part
        .trim()
        .split(/[\s,]+/)
        .map(Number),
    );
  const isRight = points.length > 0 && points.every((pair) => pair.length === 2 && pair.every(Number.isFinite));
  return isRight
    ? { ok: true, value: points.map(([re, im]) => [re! + 0, im! + 0] as [number, number]) }
    : { ok: false, message: 'pairs of real and imaginary part, as in 1 0; −1 0' };
}

function pointsText(points: readonly (readonly [number, number])[]): string {
  const shown = points.slice(0, 64).map(([re, im]) => `${signed(re)} ${signed(im)}`);
  return shown.join('; ') + (points.length > shown.length ? '; …' : '');
}

function RegisterBlanks({
  sequence,
  onSet,
}: {
  sequence: Extract<Sequence, { kind: 'pn' }>;
  onSet: (sequence: Sequence) => void;
}) {
  const name = registerName(sequence);
  const isNamed = NAMED_REGISTERS.some((one) => one.name === name && one.taps.join() === sequence.taps.join());
  return (
    <>
      <Words>from</Words>
      <ChoiceBlank
        label="register"
        value={isNamed ? name : 'other'}
        options={[
          ...NAMED_REGISTERS.map((one) => ({ value: one.name, label: one.name })),
          { value: 'other', label: 'another register' },
        ]}
        onSet={(chosen) => {
          const register = NAMED_REGISTERS.find((one) => one.name === chosen);
          if (register)
            onSet({
              kind: 'pn',
              stages: register.stages,
              taps: [...register.taps],
              inverted: register.inverted,
              seed: 2 ** register.stages - 1,
            });
          else onSet({ ...sequence, stages: 7, taps: [4, 7], seed: 127, inverted: false });
        }}
      />
      {isNamed ? null : (
        <>
          <Words>taps</Words>
          <TextBlank
            label="taps, the largest is the number of stages"
            value={sequence.taps.join(' ')}
            read={parseTaps}
            onSet={(text) => {
              const taps = parseTaps(text);
              if (taps.ok)
                onSet({
                  ...sequence,
                  taps: taps.value,
                  stages: taps.value.at(-1)!,
                  seed: Math.min(sequence.seed, 2 ** taps.value.at(-1)! - 1),
                });
            }}
          />
          <ChoiceBlank
            label="inverted"
            value={sequence.inverted ? 'yes' : 'no'}
            options={[
              { value: 'no', label: 'as it is' },
              { value: 'yes', label: 'inverted' },
            ]}
            onSet={(value) => onSet({ ...sequence, inverted: value === 'yes' })}
          />
        </>
      )}
      <Words>seed</Words>
      <WholeBlank label="seed" value={sequence.seed} onSet={(seed) => onSet({ ...sequence, seed })} />
    </>
  );
}

function SequenceBlanks({ sequence, onSet }: { sequence: Sequence; onSet: (sequence: Sequence) => void }) {
  switch (sequence.kind) {
    case 'constant':
      return <Words>1</Words>;
    case 'alternating':
      return <Words>+ and −</Words>;
    case 'pn':
      return <RegisterBlanks sequence={sequence} onSet={onSet} />;
    case 'gold':
      return (
        <>
          <Words>sequence from</Words>
          <WholeBlank label="initial value" value={sequence.cInit} onSet={(cInit) => onSet({ ...sequence, cInit })} />
          <Words>as</Words>
          <ChoiceBlank
            label="points"
            value={sequence.points}
            options={[
              { value: 'qpsk', label: 'QPSK' },
              { value: 'bpsk', label: 'BPSK' },
            ]}
            onSet={(points) => onSet({ ...sequence, points })}
          />
        </>
      );
    case 'zadoffChu':
      return (
        <>
          <Words>of length</Words>
          <WholeBlank label="length" value={sequence.length} onSet={(length) => onSet({ ...sequence, length })} />
          <Words>root</Words>
          <WholeBlank label="root" value={sequence.root} onSet={(root) => onSet({ ...sequence, root })} />
          <Words>shift</Words>
          <WholeBlank label="shift" value={sequence.shift} onSet={(shift) => onSet({ ...sequence, shift })} />
        </>
      );
    case 'newman':
    case 'schroeder':
      return (
        <>
          <Words>phases over</Words>
          <WholeBlank label="count" value={sequence.count} onSet={(count) => onSet({ ...sequence, count })} />
        </>
      );
    case 'listed':
      return (
        <>
          <Words>values</Words>
          <TextBlank
            label="values, pairs of real and imaginary part"
            value={pointsText(sequence.points)}
            read={parsePoints}
            onSet={(text) => {
              const points = parsePoints(text);
              if (points.ok) onSet({ ...sequence, points: points.value });
            }}
          />
        </>
      );
  }
}

/** One factor as a framed sentence with blanks. */
export function FactorForm({
  factor,
  isTone,
  onSet,
  onRemove,
}: {
  factor: Factor;
  isTone: boolean;
  onSet: (factor: Factor) => void;
  onRemove: (() => void) | null;
}) {
  const counters = isTone
    ? COUNTERS.filter((counter) => counter === 'symbolCell' || counter === 'subcarrier')
    : COUNTERS;
  return (
    <View role="group" aria-label={`Factor, ${sequenceName(factor.sequence)}`} style={styles.frame}>
      <View style={styles.line}>
        <ChoiceBlank
          label="sequence"
          value={factor.sequence.kind}
          options={KINDS.map((kind) => ({ value: kind, label: sequenceName(firstSequence(kind)) }))}
          onSet={(kind) => onSet({ ...factor, sequence: firstSequence(kind) })}
        />
        <SequenceBlanks sequence={factor.sequence} onSet={(sequence) => onSet({ ...factor, sequence })} />
      </View>
      <View style={styles.line}>
        <Words>one value for each</Words>
        <ChoiceBlank
          label="counter"
          value={counters.includes(factor.counter) ? factor.counter : counters[0]!}
          options={counters.map((counter) => ({ value: counter, label: counterWord(counter) }))}
          onSet={(counter) => onSet({ ...factor, counter })}
        />
        <Words>starting at</Words>
        <WholeBlank label="start" value={factor.start} onSet={(start) => onSet({ ...factor, start })} />
        {onRemove ? (
          <Button kind="plain" size="small" onPress={onRemove}>
            Remove
          </Button>
        ) : null}
      </View>
    </View>
  );
}

const styles = StyleSheet.create({
  frame: { borderWidth: 1, borderColor: color.rule.line, backgroundColor: color.surface.raised, padding: 10, gap: 8 },
  line: { flexDirection: 'row', flexWrap: 'wrap', alignItems: 'center', gap: 6 },
  words: { fontSize: 14, lineHeight: 20 },
});
