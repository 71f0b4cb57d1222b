import { useRef, useState } from 'react';
import { StyleSheet, View } from 'react-native';
import { Button } from '@/components/ui/Button';
import { Notice } from '@/components/ui/Notice';
import { Text } from '@/components/ui/Text';
import { color } from '@/components/ui/theme';
import { parseWaveformDocument } from '@/lib/document/parse';
import type { Start } from './starts';

const bytesMost = 32 * 1024 * 1024;

/** A document from a file, chosen or dropped; what is wrong with it is said here and nothing is taken. */
export function DocumentDrop({ onChoose, chosen }: { onChoose: (start: Start) => void; chosen: string | null }) {
  const input = useRef<HTMLInputElement>(null);
  const [over, setOver] = useState(false);
  const [problem, setProblem] = useState<{ title: string; lines: string[] } | null>(null);
  const read = async (file: File | undefined) => {
    if (!file) return;
    setProblem(null);
    if (file.size > bytesMost) {
      setProblem({ title: `${file.name} is larger than 32 MiB.`, lines: [] });
      return;
    }
    const parsed = parseWaveformDocument(new Uint8Array(await file.arrayBuffer()));
    if (!parsed.ok) {
      const lines = parsed.issues
        .slice(0, 5)
        .map((issue) => (issue.pointer ? `${issue.pointer}: ${issue.message}` : issue.message));
      const rest = parsed.issues.length - lines.length + parsed.more;
      setProblem({ title: `${file.name} was not taken.`, lines: rest > 0 ? [...lines, `and ${rest} more`] : lines });
      return;
    }
    onChoose({
      startId: 'file',
      title: parsed.value.about.title,
      source: file.name,
      leftOut: [],
      document: parsed.value,
    });
  };
  return (
    <View>
      <View
        style={[styles.drop, over || chosen ? styles.over : null]}
        {...({
          onDragOver: (event: DragEvent) => {
            event.preventDefault();
            setOver(true);
          },
          onDragLeave: () => setOver(false),
          onDrop: (event: DragEvent) => {
            event.preventDefault();
            setOver(false);
            void read(event.dataTransfer?.files[0]);
          },
        } as object)}
      >
        <View style={styles.words}>
          <Text variant="bodyStrong" tone="strong">
            A document
          </Text>
          <Text variant="small" tone="quiet">
            {chosen ?? 'Drop a .combwright.json here, up to 32 MiB'}
          </Text>
        </View>
        <Button onPress={() => input.current?.click()}>Choose a file</Button>
        <input
          ref={input}
          type="file"
          accept=".json,application/json"
          aria-label="Choose a document"
          style={{ display: 'none' }}
          onChange={(event) => {
            void read(event.target.files?.[0]);
            event.target.value = '';
          }}
        />
      </View>
      {problem ? (
        <View style={styles.problem}>
          <Notice kind="danger" title={problem.title}>
            <View>
              {problem.lines.map((line, i) => (
                <Text key={i} variant="small">
                  {line}
                </Text>
              ))}
            </View>
          </Notice>
        </View>
      ) : null}
    </View>
  );
}

const styles = StyleSheet.create({
  drop: {
    flexDirection: 'row',
    alignItems: 'center',
    gap: 12,
    padding: 16,
    borderWidth: 1,
    borderStyle: 'dashed',
    borderColor: color.rule.control,
    borderRadius: 3,
  },
  over: { backgroundColor: color.surface.selected },
  words: { flexGrow: 1, flexShrink: 1 },
  problem: { marginTop: 8 },
});
