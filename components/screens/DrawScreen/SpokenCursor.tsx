import { useEffect, useState } from 'react';
import { StyleSheet, View } from 'react-native';
import { Text } from '@/components/ui/Text';
import { spokenCell } from '@/lib/editor/spoken';
import type { Editor } from '@/lib/editor/store';

const QUIET_MS = 120;

/** The cursor cell in words, for readers: after it has been still for a moment, so that a held key is not read cell by cell. */
export function SpokenCursor({ editor }: { editor: Editor }) {
  const [words, setWords] = useState('');
  useEffect(() => {
    let timer: ReturnType<typeof setTimeout> | null = null;
    const say = () => {
      if (timer !== null) clearTimeout(timer);
      timer = setTimeout(() => {
        const { cursor, selection } = editor.session.getState();
        const size = selection
          ? `, ${selection.positionTo - selection.positionFrom + 1} by ${selection.symbolTo - selection.symbolFrom + 1} cells selected`
          : '';
        setWords(spokenCell(editor.document, cursor) + size);
      }, QUIET_MS);
    };
    say();
    const stop = editor.session.subscribe((state, before) => {
      if (
        state.cursor !== before.cursor ||
        state.selection !== before.selection ||
        state.changeCount !== before.changeCount
      )
        say();
    });
    return () => {
      stop();
      if (timer !== null) clearTimeout(timer);
    };
  }, [editor]);
  return (
    <View id="spoken-cell" aria-live="polite" role="status" style={styles.unseen}>
      <Text>{words}</Text>
    </View>
  );
}

const styles = StyleSheet.create({ unseen: { position: 'absolute', width: 1, height: 1, overflow: 'hidden' } });
