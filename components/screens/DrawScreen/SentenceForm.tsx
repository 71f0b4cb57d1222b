import { useMemo, useState, type ReactNode } from 'react';
import { StyleSheet, View } from 'react-native';
import { Blank } from '@/components/ui/Blank';
import { Button } from '@/components/ui/Button';
import { Text } from '@/components/ui/Text';
import { formatInteger, MINUS, parseInteger } from '@/lib/drawing/quantities';
import { inkWord } from '@/lib/drawing/inkStyle';
import { sentenceCells, sentenceSpans } from '@/lib/editor/commands/paint';
import { inkAt, lowestOf } from '@/lib/editor/document';
import { revealCell } from '@/lib/editor/kernels/viewport';
import { planPaint } from '@/lib/editor/paint';
import type { Editor } from '@/lib/editor/store';
import { reachOfComb } from './reach';
import type { TableContext } from './tableContext';
import { useChangeCount, useEditorState, useSettings } from './useEditorState';

export interface SentencePart {
  /** Words, or a blank. */
  word?: string;
  strong?: boolean;
  blank?: {
    label: string;
    value: number;
    least: number;
    most: number;
    set: (value: number) => void;
  };
}

/** The chosen tool's sentence: words and blanks in order. The blanks are the form. */
export function useSentence(editor: Editor): SentencePart[] {
  const state = useEditorState(editor, (session) => session);
  const settings = useSettings(editor);
  const { tool, ink, brush, comb, rectangle, cursor, viewport } = state;
  const { fftSize, symbolCount, tray } = settings;
  const lowest = lowestOf(fftSize);
  const name = tray[ink]?.name ?? '';
  const word = (text: string): SentencePart => ({ word: text });
  const number = (
    label: string,
    value: number,
    least: number,
    most: number,
    set: (value: number) => void,
  ): SentencePart => ({
    blank: { label, value, least, most, set },
  });
  const subcarrier = (label: string, value: number, set: (value: number) => void) =>
    number(label, value, lowest, lowest + fftSize - 1, set);
  const symbol = (label: string, value: number, set: (value: number) => void) =>
    number(label, value, 0, symbolCount - 1, set);
  const moveCursor = (to: Partial<typeof cursor>) => {
    const next = { ...cursor, ...to };
    editor.set({
      cursor: next,
      chosenSymbol: next.symbol,
      viewport: revealCell(viewport, settings, next.position, next.symbol),
    });
  };
  const atCursor = [
    subcarrier('subcarrier', cursor.position + lowest, (k) => moveCursor({ position: k - lowest })),
    word('symbol'),
    symbol('symbol', cursor.symbol, (l) => moveCursor({ symbol: l })),
  ];
  switch (tool) {
    case 'brush':
      return [
        { word: 'Brush', strong: true },
        word(`${name},`),
        number('brush, subcarriers', brush.subcarriers, 1, fftSize, (n) =>
          editor.set({ brush: { ...brush, subcarriers: n } }),
        ),
        word('×'),
        number('brush, symbols', brush.symbols, 1, symbolCount, (n) => editor.set({ brush: { ...brush, symbols: n } })),
        word('at subcarrier'),
        ...atCursor,
      ];
    case 'rectangle': {
      const set = (to: Partial<typeof rectangle>) => editor.set({ rectangle: { ...rectangle, ...to } });
      return [
        { word: 'Rectangle', strong: true },
        word(`${name} from subcarrier`),
        subcarrier('first subcarrier', rectangle.subcarrierFrom, (k) => set({ subcarrierFrom: k })),
        word('to'),
        subcarrier('last subcarrier', rectangle.subcarrierTo, (k) => set({ subcarrierTo: k })),
        word('symbol'),
        symbol('first symbol', rectangle.symbolFrom, (l) => set({ symbolFrom: l })),
        word('to'),
        symbol('last symbol', rectangle.symbolTo, (l) => set({ symbolTo: l })),
      ];
    }
    case 'comb': {
      const set = (to: Partial<typeof comb>) => editor.set({ comb: { ...comb, ...to } });
      return [
        { word: 'Comb', strong: true },
        word(`${name} on every`),
        number('subcarrier step', comb.everySubcarrier, 1, fftSize, (n) => set({ everySubcarrier: n })),
        word(`${ordinal(comb.everySubcarrier)} subcarrier from`),
        subcarrier('first subcarrier', comb.subcarrierFrom, (k) => set({ subcarrierFrom: k })),
        word('to'),
        subcarrier('last subcarrier', comb.subcarrierTo, (k) => set({ subcarrierTo: k })),
        word('every'),
        number('symbol step', comb.everySymbol, 1, symbolCount, (n) => set({ everySymbol: n })),
        word(`${ordinal(comb.everySymbol)} symbol from`),
        symbol('first symbol', comb.symbolFrom, (l) => set({ symbolFrom: l })),
        word('to'),
        symbol('last symbol', comb.symbolTo, (l) => set({ symbolTo: l })),
        word('shift'),
        number('shift per pass', comb.shiftPerPass, -fftSize, fftSize, (n) => set({ shiftPerPass: n })),
        word('per pass'),
      ];
    }
    case 'pick': {
      const held = tray[inkAt(editor.document, cursor.position, cursor.symbol)];
      return [
        { word: 'Pick', strong: true },
        word('the ink of subcarrier'),
        ...atCursor,
        word(held ? `: ${held.name}${held.name === inkWord(held) ? '' : `, ${inkWord(held)}`}` : ''),
      ];
    }
    case 'pan': {
      const along = viewport.turned ? viewport.heightPx : viewport.widthPx;
      const from = Math.round(viewport.firstPosition) + lowest;
      const to = Math.round(viewport.firstPosition + along / viewport.subcarrierPx) - 1 + lowest;
      const show = (first: number, last: number) => {
        if (last <= first || along <= 0) return;
        const subcarrierPx = along / (last - first + 1);
        editor.set({ viewport: { ...viewport, subcarrierPx, firstPosition: first - lowest } });
      };
      return [
        { word: 'Pan', strong: true },
        word('shows subcarriers'),
        subcarrier('first subcarrier shown', from, (k) => show(k, to)),
        word('to'),
        subcarrier('last subcarrier shown', to, (k) => show(from, k)),
      ];
    }
  }
}

/** The sentence as a phone shows it: its blanks open in a sheet. Words and figures in turn, figures as numbers. */
export function useShortSentence(editor: Editor): (string | number)[] {
  const { tool, ink, brush, comb, rectangle, cursor } = useEditorState(editor, (session) => session);
  const { fftSize, tray } = useSettings(editor);
  const name = tray[ink]?.name ?? '';
  switch (tool) {
    case 'brush':
      return ['Brush', `${name},`, brush.subcarriers, '×', brush.symbols];
    case 'rectangle': {
      const { subcarrierFrom, subcarrierTo, symbolFrom, symbolTo } = rectangle;
      return ['Rectangle', `${name},`, subcarrierFrom, 'to', subcarrierTo, ', symbols', symbolFrom, 'to', symbolTo];
    }
    case 'comb':
      return [
        'Comb',
        `${name},`,
        comb.everySubcarrier,
        'subcarriers,',
        comb.everySymbol,
        'symbols, shift',
        comb.shiftPerPass,
      ];
    case 'pick':
      return ['Pick', 'the ink of', cursor.position + lowestOf(fftSize), ', symbol', cursor.symbol];
    case 'pan':
      return ['Pan', 'moves the drawing with one finger'];
  }
}

function ordinal(n: number): string {
  const tens = Math.abs(n) % 100;
  if (tens >= 11 && tens <= 13) return 'th';
  return ['th', 'st', 'nd', 'rd'][Math.abs(n) % 10] ?? 'th';
}

/** One blank: takes whole numbers, keeps what is typed until it is set, says its limits when it is not taken. */
function SentenceBlank({
  blank,
  onWrong,
}: {
  blank: NonNullable<SentencePart['blank']>;
  onWrong: (words: string | null) => void;
}) {
  const [wrong, setWrong] = useState(false);
  const { label, value, least, most, set } = blank;
  const say = (words: string | null) => {
    setWrong(words !== null);
    onWrong(words);
  };
  return (
    <Blank
      label={label}
      value={value < 0 ? `${MINUS}${-value}` : String(value)}
      wrong={wrong}
      onSet={(text) => {
        const parsed = parseInteger(text);
        if (!parsed.ok) say(parsed.message);
        else if (parsed.value < least || parsed.value > most)
          say(`${label}: ${formatInteger(least)} to ${formatInteger(most)}.`);
        else {
          say(null);
          set(parsed.value);
        }
      }}
      onStep={(steps) => {
        say(null);
        set(Math.max(least, Math.min(most, value + steps)));
      }}
    />
  );
}

/** The sentence with its blanks, wrapped where it is long. */
export function SentenceParts({
  parts,
  onWrong,
  after,
}: {
  parts: SentencePart[];
  onWrong: (words: string | null) => void;
  after?: ReactNode;
}) {
  return (
    <>
      {parts.map((part, i) =>
        part.blank ? (
          <SentenceBlank key={i} blank={part.blank} onWrong={onWrong} />
        ) : (
          <Text
            key={i}
            variant="small"
            weight={part.strong ? 600 : 400}
            tone={part.strong ? 'strong' : 'body'}
            style={styles.word}
          >
            {part.word}
          </Text>
        ),
      )}
      {after}
    </>
  );
}

/** How many cells the sentence names, and what painting them does. */
export function useSentenceAct(table: TableContext): {
  count: number;
  act: 'Paint' | 'Take' | null;
  perform: () => string | null;
  reach: string | null;
} {
  const { editor } = table;
  const state = useEditorState(editor, (session) => session);
  const changeCount = useChangeCount(editor);
  const { tool, comb, rectangle, brush, cursor, ink } = state;
  const count = useMemo(
    () => (tool === 'pick' || tool === 'pan' ? 0 : sentenceCells(editor)),
    // eslint-disable-next-line react-hooks/exhaustive-deps -- the count follows the blanks and the grid's size alone
    [editor, tool, comb, rectangle, brush, cursor, editor.document.settings],
  );
  const reach = useMemo(
    () => (tool === 'comb' ? reachOfComb(editor.document, comb, ink) : null),
    // eslint-disable-next-line react-hooks/exhaustive-deps -- the document is one object; changeCount tells that it changed
    [editor, tool, comb, ink, changeCount],
  );
  return {
    count,
    act: tool === 'pan' ? null : tool === 'pick' ? 'Take' : 'Paint',
    perform: () =>
      tool === 'pick'
        ? (table.run('paint.cursor'), null)
        : table.perform(planPaint(editor.document, sentenceSpans(editor), ink)),
    reach,
  };
}

/** The wide table's sentence, one line over the grid. */
export function SentenceForm({ table, width }: { table: TableContext; width: number }) {
  const parts = useSentence(table.editor);
  const { count, act, perform, reach } = useSentenceAct(table);
  const [wrong, setWrong] = useState<string | null>(null);
  const notice = useEditorState(table.editor, (state) => state.notice);
  const said = wrong ?? notice;
  return (
    <View id="sentence" role="form" aria-label="Tool" style={[styles.line, { width }]}>
      <View style={styles.parts}>
        <SentenceParts parts={parts} onWrong={setWrong} />
      </View>
      {act === 'Paint' ? (
        <Text variant="small" tone="quiet" style={styles.count}>
          <Text variant="figureSmall">{formatInteger(count)}</Text>
          {count === 1 ? ' cell' : ' cells'}
        </Text>
      ) : null}
      {act && table.rights.canDraw ? (
        <Button
          size="small"
          onPress={perform}
          disabledBecause={act === 'Paint' && count === 0 ? 'No cell lies in the grid.' : null}
        >
          {act}
        </Button>
      ) : null}
      {said ? (
        <Text variant="label" tone="danger" role="alert" numberOfLines={1} style={styles.under}>
          {said}
        </Text>
      ) : reach ? (
        <Text variant="label" weight={400} tone="quiet" numberOfLines={1} style={styles.under} role="status">
          {reach}
        </Text>
      ) : null}
    </View>
  );
}

const styles = StyleSheet.create({
  line: { position: 'absolute', left: 20, top: 4, height: 34, flexDirection: 'row', alignItems: 'center', gap: 10 },
  parts: { flexDirection: 'row', alignItems: 'center', gap: 5, flexShrink: 0 },
  word: { fontSize: 14, lineHeight: 20 },
  under: { position: 'absolute', left: 48, right: 112, top: 33 },
  count: { flexShrink: 0, marginLeft: 'auto' },
});
