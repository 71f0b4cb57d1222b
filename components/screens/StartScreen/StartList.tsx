import { useRef } from 'react';
import { Pressable, StyleSheet, View } from 'react-native';
import { Text } from '@/components/ui/Text';
import { color } from '@/components/ui/theme';
import { useBreakpoint } from '@/components/ui/useBreakpoint';
import { formatFraction, formatInteger } from '@/lib/drawing/quantities';
import { StartPicture } from './StartPicture';
import type { PresetStart } from './starts';

/** A group of starts: picture, name and citation, size and spacing. */
export function StartList({
  title,
  starts,
  chosenId,
  onChoose,
  onUse,
}: {
  title: string;
  starts: readonly PresetStart[];
  chosenId: string;
  onChoose: (start: PresetStart) => void;
  /** Enter on the chosen one. */
  onUse: () => void;
}) {
  const refs = useRef(new Map<string, { focus: () => void }>());
  if (starts.length === 0) return null;
  const hasChosen = starts.some((start) => start.startId === chosenId);
  const go = (to: number) => {
    const next = starts[(to + starts.length) % starts.length]!;
    onChoose(next);
    refs.current.get(next.startId)?.focus();
  };
  return (
    <View style={styles.group}>
      <Text variant="label" heading={2} tone="quiet" style={styles.title}>
        {title}
      </Text>
      <View role="radiogroup" aria-label={title} style={styles.list}>
        {starts.map((start, i) => (
          <Entry
            key={start.startId}
            start={start}
            chosen={start.startId === chosenId}
            tabbable={start.startId === chosenId || (!hasChosen && i === 0)}
            onPress={() => onChoose(start)}
            onKey={(key) => {
              if (key === 'ArrowDown') go(i + 1);
              else if (key === 'ArrowUp') go(i - 1);
              else if (key === 'Enter' && start.startId === chosenId) onUse();
              else return false;
              return true;
            }}
            register={(node) => {
              if (node) refs.current.set(start.startId, node);
            }}
          />
        ))}
      </View>
    </View>
  );
}

function Entry({
  start,
  chosen,
  tabbable,
  onPress,
  onKey,
  register,
}: {
  start: PresetStart;
  chosen: boolean;
  tabbable: boolean;
  onPress: () => void;
  onKey: (key: string) => boolean;
  register: (node: { focus: () => void } | null) => void;
}) {
  const { fftSize, subcarrierSpacingHz, symbolCount } = start.numbers;
  const phone = useBreakpoint() === 'phone';
  const spacing = formatFraction(subcarrierSpacingHz);
  const size = `${formatInteger(fftSize)} · ${spacing.value} ${spacing.unit}`;
  const symbols = symbolCount === 1 ? '1 symbol' : `${formatInteger(symbolCount)} symbols`;
  return (
    <Pressable
      ref={register as never}
      role="radio"
      aria-checked={chosen}
      tabIndex={tabbable ? 0 : -1}
      onPress={onPress}
      {...({
        onKeyDown: (event: { key: string; preventDefault: () => void }) => {
          if (onKey(event.key)) event.preventDefault();
        },
      } as object)}
      style={(state) => [
        styles.entry,
        chosen ? styles.chosen : null,
        !chosen && (state as { hovered?: boolean }).hovered ? styles.hovered : null,
      ]}
    >
      <View style={phone ? styles.smallPicture : styles.picture}>
        <StartPicture start={start} />
      </View>
      <View style={styles.words}>
        <Text variant="bodyStrong" tone={chosen ? 'onSelected' : 'strong'} numberOfLines={phone ? 2 : 1}>
          {start.title}
        </Text>
        <Text variant="small" tone={chosen ? 'onSelected' : 'quiet'} numberOfLines={1}>
          {start.source}
        </Text>
        {phone ? (
          <Text variant="small" tone={chosen ? 'onSelected' : 'quiet'}>
            <Text variant="figureSmall" weight={600} tone={chosen ? 'onSelected' : 'strong'}>
              {size}
            </Text>
            {`, ${symbols}`}
          </Text>
        ) : null}
      </View>
      {phone ? null : (
        <View style={styles.numbers}>
          <Text variant="figureSmall" weight={600} tone={chosen ? 'onSelected' : 'strong'}>
            {size}
          </Text>
          <Text variant="small" tone={chosen ? 'onSelected' : 'quiet'}>
            {symbols}
          </Text>
        </View>
      )}
    </Pressable>
  );
}

const styles = StyleSheet.create({
  group: { marginBottom: 20 },
  title: { paddingBottom: 6, borderBottomWidth: 1.5, borderBottomColor: color.rule.strong },
  list: {},
  entry: {
    minHeight: 60,
    flexDirection: 'row',
    alignItems: 'center',
    gap: 14,
    paddingHorizontal: 8,
    paddingVertical: 8,
    backgroundColor: color.surface.sheet,
    borderBottomWidth: 1,
    borderBottomColor: color.rule.hair,
    borderLeftWidth: 3,
    borderLeftColor: 'transparent',
  },
  chosen: { backgroundColor: color.surface.selected, borderLeftColor: color.ink.strong },
  hovered: { backgroundColor: color.surface.hover },
  picture: { width: 144, flexShrink: 0 },
  smallPicture: { width: 80, flexShrink: 0 },
  words: { flexGrow: 1, flexShrink: 1, minWidth: 0 },
  numbers: { alignItems: 'flex-end', flexShrink: 0 },
});
