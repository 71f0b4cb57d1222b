import { useRef } from 'react';
import { StyleSheet, View } from 'react-native';
import type { CaptureState } from '@/components/live/useCapture';
import { Button } from '@/components/ui/Button';
import { color } from '@/components/ui/theme';

/** The page's acts: choose a file, read it, cancel, choose the next. One filled button at a time. */
export function CaptureFoot({
  state,
  hasChosen,
  phone,
  onChoose,
  onRead,
  onCancel,
  suggestion,
}: {
  state: CaptureState;
  hasChosen: boolean;
  phone: boolean;
  onChoose: (files: readonly File[]) => void;
  onRead: () => void;
  onCancel: () => void;
  /** The edition that the capture looks like instead. */
  suggestion: { words: string; onPress: () => void } | null;
}) {
  const input = useRef<HTMLInputElement>(null);
  const size = phone ? 'foot' : 'usual';
  const choose = () => input.current?.click();
  const isReady = state.kind === 'chosen' && hasChosen;
  return (
    <View style={phone ? styles.foot : styles.row}>
      {state.kind === 'running' ? (
        <Button size={size} fill={phone} onPress={onCancel}>
          Cancel
        </Button>
      ) : isReady ? (
        <>
          <Button kind={phone ? 'plain' : 'ruled'} size={size} onPress={choose}>
            Another file
          </Button>
          <View style={phone ? styles.grow : null}>
            <Button kind="filled" size={size} fill={phone} onPress={onRead}>
              Read the capture
            </Button>
          </View>
        </>
      ) : suggestion ? (
        <>
          <Button kind={phone ? 'plain' : 'ruled'} size={size} onPress={choose}>
            {phone ? 'Another file' : 'Choose another file'}
          </Button>
          <View style={phone ? styles.grow : null}>
            <Button kind="filled" size={size} fill={phone} onPress={suggestion.onPress}>
              {suggestion.words}
            </Button>
          </View>
        </>
      ) : (
        <Button kind="filled" size={size} fill={phone} busy={state.kind === 'guessing'} onPress={choose}>
          {state.kind === 'done'
            ? state.result.kind === 'measured'
              ? 'Add a capture'
              : 'Choose another file'
            : 'Choose the file'}
        </Button>
      )}
      <input
        ref={input}
        type="file"
        multiple
        aria-label="Capture file"
        style={{ display: 'none' }}
        onChange={(event) => {
          const files = [...(event.target.files ?? [])];
          event.target.value = '';
          if (files.length > 0) onChoose(files);
        }}
      />
    </View>
  );
}

const styles = StyleSheet.create({
  foot: {
    flexDirection: 'row',
    gap: 8,
    padding: 10,
    paddingHorizontal: 12,
    backgroundColor: color.surface.trough,
    borderTopWidth: 1,
    borderTopColor: color.rule.line,
  },
  row: { flexDirection: 'row', gap: 10 },
  grow: { flexGrow: 1, flexShrink: 1 },
});
