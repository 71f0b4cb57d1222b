import { Link } from 'expo-router';
import { Pressable, StyleSheet, View } from 'react-native';
import { Button } from '@/components/ui/Button';
import { DigestChip } from '@/components/ui/DigestChip';
import { Stamp } from '@/components/ui/Stamp';
import { Text } from '@/components/ui/Text';
import { color } from '@/components/ui/theme';
import { SavedNote } from './SavedNote';
import { useTitle, useEditorState } from './useEditorState';
import type { TableContext } from './tableContext';

/** Title, stamp, digest and what the drawing is saved as; Undo, Redo, Fit and the page's one filled button. */
export function SheetLine({ table }: { table: TableContext }) {
  const { editor, drawing, rights, open, run, fitHref } = table;
  const title = useTitle(editor);
  return (
    <View id="sheet-line" style={styles.line} {...({ tabIndex: -1 } as object)}>
      <Pressable
        role={rights.canDraw ? 'button' : undefined}
        aria-label={rights.canDraw ? `Rename ${title}` : undefined}
        disabled={!rights.canDraw}
        onPress={() => open({ kind: 'title' })}
        style={styles.title}
      >
        <Text variant="title" tone="strong" numberOfLines={1}>
          {title}
        </Text>
      </Pressable>
      <Text heading={1} style={styles.unseen}>
        {title}
      </Text>
      <View>
        <Stamp state={drawing.stampState} edition={drawing.editionNumber} />
      </View>
      <View>
        <DigestChip digest={drawing.revision.contentDigest} />
      </View>
      <SavedNote table={table} />
      <View style={styles.spring} />
      {rights.canDraw ? <UndoRedo table={table} /> : null}
      {rights.canDraw ? (
        <Button
          expanded={table.sheet?.kind === 'peak'}
          onPress={() => (table.sheet?.kind === 'peak' ? open(null) : run('peak.lower'))}
        >
          Lower the peak
        </Button>
      ) : null}
      <Link href={fitHref} style={styles.link}>
        <View style={styles.fit}>
          <Text variant="bodyStrong" tone="strong" style={styles.fitText}>
            Fit
          </Text>
        </View>
      </Link>
      <Button kind="plain" onPress={() => open({ kind: 'more' })}>
        More
      </Button>
      {rights.canAsk ? (
        <Button kind={table.sheet ? 'ruled' : 'filled'} onPress={() => run('ask')}>
          Ask for review
        </Button>
      ) : null}
    </View>
  );
}

export function UndoRedo({ table }: { table: TableContext }) {
  const { editor, run } = table;
  const undo = useEditorState(editor, (state) => state.undoLabel);
  const redo = useEditorState(editor, (state) => state.redoLabel);
  return (
    <>
      <Button
        kind="plain"
        label={undo ? `Undo: ${undo}` : 'Undo'}
        disabledBecause={undo ? null : 'Nothing to undo.'}
        onPress={() => run('history.undo')}
      >
        Undo
      </Button>
      <Button
        kind="plain"
        label={redo ? `Redo: ${redo}` : 'Redo'}
        disabledBecause={redo ? null : 'Nothing to redo.'}
        onPress={() => run('history.redo')}
      >
        Redo
      </Button>
    </>
  );
}

const styles = StyleSheet.create({
  line: {
    height: 52,
    flexDirection: 'row',
    alignItems: 'center',
    paddingHorizontal: 20,
    gap: 12,
    backgroundColor: color.surface.sheet,
  },
  title: { flexShrink: 1, minWidth: 0 },
  unseen: { position: 'absolute', width: 1, height: 1, overflow: 'hidden' },
  spring: { flex: 1 },
  link: { display: 'flex', textDecorationLine: 'none' },
  fit: {
    height: 36,
    paddingHorizontal: 16,
    borderWidth: 1,
    borderRadius: 3,
    borderColor: color.rule.control,
    backgroundColor: color.surface.raised,
    alignItems: 'center',
    justifyContent: 'center',
  },
  fitText: { fontSize: 14, lineHeight: 20 },
});
