import { useQuery } from '@tanstack/react-query';
import { Link } from 'expo-router';
import { useState } from 'react';
import { StyleSheet, View } from 'react-native';
import { Button } from '@/components/ui/Button';
import { Notice } from '@/components/ui/Notice';
import { Text } from '@/components/ui/Text';
import { TextField } from '@/components/ui/TextField';
import { chooseTheme, color, useTheme } from '@/components/ui/theme';
import { showToast } from '@/components/ui/toast';
import { AnyOf } from '@/components/ui/WordsToPress';
import { ask } from '@/lib/client/useApi';
import { listBenches } from '@/lib/contracts/benches';
import { showFit } from '@/lib/contracts/fit';
import { storedDocument } from '@/lib/editor/document';
import { editorCommands } from '@/lib/editor/commands/all';
import { formatInteger } from '@/lib/drawing/quantities';
import { downloadText } from '../downloadText';
import type { DrawingStore } from '../drawingStore';
import { useStripWords } from '../NumbersStrip';
import { SentenceParts, useSentence, useSentenceAct } from '../SentenceForm';
import { UndoRedo } from '../SheetLine';
import { SavedNote, savedWords } from '../SavedNote';
import type { TableContext } from '../tableContext';
import { useTitle } from '../useEditorState';
import { TableSheet } from './TableSheet';

const close = (table: TableContext) => () => table.open(null);

/** A phone's blanks of the chosen tool. */
export function SentenceSheet({ table }: { table: TableContext }) {
  const parts = useSentence(table.editor);
  const { count, act, perform, reach } = useSentenceAct(table);
  const [wrong, setWrong] = useState<string | null>(null);
  return (
    <TableSheet
      title={parts[0]?.word ?? 'Tool'}
      onClose={close(table)}
      foot={
        act ? (
          <Button kind="filled" size="foot" fill onPress={() => (setWrong(perform()), table.open(null))}>
            {act === 'Paint' ? `Paint ${formatInteger(count)} ${count === 1 ? 'cell' : 'cells'}` : act}
          </Button>
        ) : undefined
      }
    >
      <View style={styles.parts}>
        <SentenceParts parts={parts.slice(1)} onWrong={setWrong} />
      </View>
      {wrong ? (
        <Text variant="small" tone="danger" role="alert">
          {wrong}
        </Text>
      ) : null}
      {reach ? (
        <Text variant="small" tone="quiet" role="status">
          {`${reach}.`}
        </Text>
      ) : null}
    </TableSheet>
  );
}

const KEY_WORDS: Record<string, string> = {
  ArrowLeft: '←',
  ArrowRight: '→',
  ArrowUp: '↑',
  ArrowDown: '↓',
  '-': '−',
};

function keyText(shortcut: string): string {
  if (shortcut === '-' || shortcut === '+') return KEY_WORDS[shortcut] ?? shortcut;
  return shortcut
    .split('+')
    .map((part) => KEY_WORDS[part] ?? part)
    .join(' ');
}

/** All keys of the table, from the registry itself. */
export function KeysSheet({ table }: { table: TableContext }) {
  return (
    <TableSheet title="Keys" onClose={close(table)}>
      <View role="list">
        {editorCommands.commands
          .filter((command) => command.shortcut !== undefined)
          .map((command) => (
            <View key={command.id} role="listitem" style={styles.key}>
              <Text variant="small" style={styles.fill}>
                {command.label}
              </Text>
              <Text variant="figureSmall" tone="strong">
                {[command.shortcut!, ...(command.otherShortcuts ?? [])].map(keyText).join(' or ')}
              </Text>
            </View>
          ))}
      </View>
    </TableSheet>
  );
}

/** Note to the reviewers; open findings of the fit are listed, so that nobody asks without having seen them. */
export function AskSheet({ table, store, onAsked }: { table: TableContext; store: DrawingStore; onAsked: () => void }) {
  const { saver } = table;
  const [note, setNote] = useState('');
  const [isBusy, setBusy] = useState(false);
  const [error, setError] = useState<string | null>(null);
  const findings = useOpenFindings(table.drawing.revision.revisionId);
  const send = async () => {
    if (!saver) return;
    setBusy(true);
    setError(null);
    const isSaved = await saver.flush();
    const answer = isSaved ? await store.askForReview(saver.revision().revisionId, note.trim()) : null;
    setBusy(false);
    if (answer === null) return setError(`Not asked: the drawing is not saved yet (${savedWords(saver.state())}).`);
    if (!answer.ok) return setError(answer.problem?.detail ?? 'No connection.');
    const { words, people } = answer.value.releasableBy;
    showToast(people.length === 0 && words ? words : 'The reviewers were asked.');
    table.open(null);
    onAsked();
  };
  return (
    <TableSheet
      title="Ask for review"
      onClose={close(table)}
      foot={
        <Button kind="filled" busy={isBusy} onPress={() => void send()}>
          Ask
        </Button>
      }
    >
      <TextField
        label="Note"
        hint="What changed, and what to look at."
        multiline
        value={note}
        onChangeText={setNote}
        error={error}
      />
      {findings === null ? null : findings.length === 0 ? (
        <Text variant="small" tone="quiet">
          No open findings.
        </Text>
      ) : (
        <View style={styles.findings}>
          <Text variant="small" weight={500}>
            Open findings
          </Text>
          {findings.map((words) => (
            <Notice key={words} kind="warning">
              {words}
            </Notice>
          ))}
        </View>
      )}
    </TableSheet>
  );
}

/** What the fit misses on each bench profile, in words; null while not known. */
function useOpenFindings(revisionId: string): string[] | null {
  const { data } = useQuery({
    queryKey: ['openFindings', revisionId],
    queryFn: async () => {
      const { items } = await ask(listBenches, {});
      const fits = await Promise.all(
        items.map((bench) =>
          ask(showFit, { params: { revisionId }, query: { benchId: bench.benchId } }).catch(() => null),
        ),
      );
      return fits.flatMap((fit) =>
        fit
          ? fit.findings
              .filter(({ verdict }) => verdict === 'misses')
              .map((finding) => `${fit.bench.name}: ${finding.title}, ${finding.byHowMuch}. ${finding.words}`)
          : [],
      );
    },
  });
  return data ?? null;
}

/** Acts that are not on the table itself; on a phone the numbers too. */
export function MoreSheet({
  table,
  isPhone,
  oneFinger,
}: {
  table: TableContext;
  isPhone: boolean;
  oneFinger: { moves: boolean; set: (moves: boolean) => void };
}) {
  const { editor, rights, open, drawing } = table;
  const title = useTitle(editor);
  const words = useStripWords(table);
  const theme = useTheme();
  const exportJson = () => {
    const name =
      title
        .normalize('NFKD')
        .toLowerCase()
        .replace(/[^a-z0-9]+/g, '-')
        .replace(/^-|-$/g, '') || 'waveform';
    downloadText(`${name}.combwright.json`, JSON.stringify(storedDocument(editor.document), null, 2));
  };
  return (
    <TableSheet title="More" onClose={close(table)}>
      {isPhone ? <SavedNote table={table} /> : null}
      <View style={styles.acts}>
        {isPhone && rights.canDraw ? <UndoRedo table={table} /> : null}
        {rights.canAsk && isPhone ? <Button onPress={() => open({ kind: 'ask' })}>Ask for review</Button> : null}
        {rights.canDraw && isPhone ? <Button onPress={() => table.run('peak.lower')}>Lower the peak</Button> : null}
        {rights.canDraw ? <Button onPress={() => open({ kind: 'title' })}>Rename</Button> : null}
        <Button onPress={exportJson}>Export as JSON</Button>
        <Button onPress={() => table.run('view.band')}>Whole band</Button>
        {isPhone ? (
          <Button onPress={() => chooseTheme(theme.name === 'paper' ? 'night' : 'paper')}>
            {theme.name === 'paper' ? 'Night' : 'Paper'}
          </Button>
        ) : (
          <Button onPress={() => open({ kind: 'keys' })}>Keys</Button>
        )}
      </View>
      {isPhone ? (
        <AnyOf
          label="Fingers"
          choices={[{ value: 'moves', label: 'Move with one finger' }]}
          values={oneFinger.moves ? ['moves'] : []}
          onToggle={(_, on) => oneFinger.set(on)}
          style={styles.toggle}
        />
      ) : null}
      <View style={styles.links}>
        <Link href={table.fitHref}>
          <Text weight={600} tone="accent">
            Fit
          </Text>
        </Link>
        <Link href={`/waveforms/${drawing.waveformId}/history` as never}>
          <Text weight={600} tone="accent">
            History
          </Text>
        </Link>
      </View>
      {isPhone ? (
        <View>
          {words.map((word) => (
            <View key={word.name} style={styles.key}>
              <Text variant="small" style={styles.fill}>
                {word.name}
              </Text>
              <Button
                kind="plain"
                label={`${word.name}, ${word.value.value} ${word.value.unit}`}
                onPress={() => open(word.sheet)}
              >
                {`${word.value.value} ${word.value.unit}`.trim()}
              </Button>
            </View>
          ))}
        </View>
      ) : null}
    </TableSheet>
  );
}

const styles = StyleSheet.create({
  parts: { flexDirection: 'row', flexWrap: 'wrap', alignItems: 'center', gap: 8, paddingVertical: 8 },
  key: {
    minHeight: 32,
    flexDirection: 'row',
    alignItems: 'center',
    gap: 12,
    borderBottomWidth: 1,
    borderBottomColor: color.rule.hair,
  },
  fill: { flex: 1 },
  findings: { gap: 8 },
  acts: { flexDirection: 'row', flexWrap: 'wrap', gap: 8 },
  toggle: { marginTop: 12 },
  links: { flexDirection: 'row', gap: 24, paddingVertical: 16 },
});
