import { useRef } from 'react';
import { Pressable, ScrollView, StyleSheet, View } from 'react-native';
import { InkSwatch } from '@/components/drawing/InkSwatch';
import { Button } from '@/components/ui/Button';
import { Text } from '@/components/ui/Text';
import { color } from '@/components/ui/theme';
import type { Ink } from '@/lib/synth';
import type { ToolName } from '@/lib/editor/types';
import { inkSource, inkSpoken } from './inkWords';
import type { TableContext } from './tableContext';
import { useEditorState, useShownSettings } from './useEditorState';

const TOOLS: readonly { tool: ToolName; name: string; key: string }[] = [
  { tool: 'brush', name: 'Brush', key: 'B' },
  { tool: 'rectangle', name: 'Rectangle', key: 'R' },
  { tool: 'comb', name: 'Comb', key: 'C' },
  { tool: 'pick', name: 'Pick', key: 'P' },
  { tool: 'pan', name: 'Pan', key: 'H' },
];

interface KeyLike {
  key: string;
  preventDefault(): void;
}

/** Words with their key; one of them is chosen. A radio group for the keyboard. */
export function ToolRail({ table, phone }: { table: TableContext; phone?: boolean }) {
  const { editor, run } = table;
  const chosen = useEditorState(editor, (state) => state.tool);
  const nodes = useRef(new Map<ToolName, { focus(): void }>());
  const step = (by: number) => {
    const at = TOOLS.findIndex(({ tool }) => tool === chosen);
    const next = TOOLS[(at + by + TOOLS.length) % TOOLS.length]!;
    run(`tool.${next.tool}`);
    nodes.current.get(next.tool)?.focus();
  };
  const words = TOOLS.map(({ tool, name, key }) => {
    const isChosen = tool === chosen;
    return (
      <Pressable
        key={tool}
        ref={(node) => void (node && nodes.current.set(tool, node as unknown as { focus(): void }))}
        role="radio"
        aria-checked={isChosen}
        tabIndex={isChosen ? 0 : -1}
        onPress={() => run(`tool.${tool}`)}
        {...({
          onKeyDown: (event: KeyLike) => {
            const by = { ArrowRight: 1, ArrowDown: 1, ArrowLeft: -1, ArrowUp: -1 }[event.key];
            if (by === undefined) return;
            event.preventDefault();
            (event as unknown as Event).stopPropagation?.();
            step(by);
          },
        } as object)}
        style={(state) => [
          phone ? styles.phoneTool : styles.tool,
          {
            backgroundColor: isChosen
              ? color.surface.selected
              : (state as { hovered?: boolean }).hovered
                ? color.surface.hover
                : phone
                  ? 'transparent'
                  : color.surface.sheet,
            boxShadow: isChosen ? `inset 0 -2px 0 ${color.ink.strong}` : 'none',
          } as object,
        ]}
      >
        <Text
          weight={isChosen ? 600 : 500}
          tone={isChosen ? 'onSelected' : 'body'}
          style={phone ? styles.phoneWord : styles.word}
        >
          {name}
        </Text>
        {phone ? null : (
          <Text variant="axis" tone={isChosen ? 'onSelected' : 'quiet'} aria-hidden>
            {key}
          </Text>
        )}
      </Pressable>
    );
  });
  if (phone)
    return (
      <ScrollView
        horizontal
        showsHorizontalScrollIndicator={false}
        role="radiogroup"
        aria-label="Tools"
        style={styles.phoneRail}
      >
        {words}
      </ScrollView>
    );
  return (
    <View role="radiogroup" aria-label="Tools" style={styles.rail}>
      {words}
    </View>
  );
}

const LONG_PRESS_MS = 450;

function TrayInk({ table, ink, place, phone }: { table: TableContext; ink: Ink; place: number; phone?: boolean }) {
  const { editor, open, run } = table;
  const isChosen = useEditorState(editor, (state) => state.ink === place);
  const digit = place < 10 ? String((place + 1) % 10) : '';
  const choose = () => {
    if (place < 10) run(`ink.${place}`);
    else editor.set({ ink: place });
  };
  // The chosen ink pressed again opens its sheet; ink 0, the bare paper, has none.
  const press = () => (isChosen && place > 0 ? open({ kind: 'ink', place }) : choose());
  return (
    <Pressable
      role="button"
      aria-pressed={isChosen}
      aria-label={`${inkSpoken(ink)}${digit ? `, key ${digit}` : ''}${isChosen && place > 0 ? ', press to change' : ''}`}
      onPress={press}
      delayLongPress={LONG_PRESS_MS}
      onLongPress={() => {
        choose();
        if (place > 0) open({ kind: 'ink', place });
      }}
      style={(state) => [
        phone ? styles.phoneInk : styles.ink,
        {
          backgroundColor: isChosen
            ? color.surface.selected
            : (state as { hovered?: boolean }).hovered
              ? color.surface.hover
              : 'transparent',
          boxShadow: isChosen ? `inset 0 -2px 0 ${color.ink.strong}` : 'none',
        } as object,
      ]}
    >
      <InkSwatch ink={ink} sizePx={phone ? 36 : 28} />
      <View style={phone ? styles.phoneInkWords : null}>
        <Text
          variant={phone ? 'label' : 'small'}
          weight={600}
          tone={isChosen ? 'onSelected' : 'strong'}
          numberOfLines={1}
          style={phone ? styles.phoneName : null}
        >
          {ink.name}
        </Text>
        <Text variant="axis" tone={isChosen ? 'onSelected' : phone ? 'body' : 'quiet'} numberOfLines={1}>
          {inkSource(ink)}
        </Text>
      </View>
    </Pressable>
  );
}

/** The inks of this waveform; digits choose, a second press opens the ink's sheet. */
export function Tray({ table, phone }: { table: TableContext; phone?: boolean }) {
  const { editor, open, rights } = table;
  const { tray } = useShownSettings(editor);
  return (
    <ScrollView
      horizontal
      showsHorizontalScrollIndicator={false}
      role="group"
      aria-label="Tray"
      style={phone ? styles.phoneTray : styles.tray}
      contentContainerStyle={phone ? styles.phoneTrayRow : styles.trayRow}
    >
      {tray.map((ink, place) => (
        <TrayInk key={ink.inkId} table={table} ink={ink} place={place} {...(phone ? { phone } : {})} />
      ))}
      {rights.canDraw ? (
        <View style={styles.add}>
          <Button kind="plain" onPress={() => open({ kind: 'newInk' })}>
            Add an ink
          </Button>
        </View>
      ) : null}
    </ScrollView>
  );
}

/** The lower edge of the wide table: tools and tray. */
export function Trough({ table }: { table: TableContext }) {
  return (
    <View id="trough" role="region" aria-label="Tools and tray" style={styles.trough} {...({ tabIndex: -1 } as object)}>
      <ToolRail table={table} />
      <Tray table={table} />
    </View>
  );
}

const styles = StyleSheet.create({
  trough: {
    height: 76,
    flexDirection: 'row',
    alignItems: 'center',
    paddingHorizontal: 20,
    gap: 14,
    backgroundColor: color.surface.trough,
    borderTopWidth: 1,
    borderTopColor: color.rule.line,
  },
  rail: {
    width: 278,
    flexShrink: 0,
    flexDirection: 'row',
    flexWrap: 'wrap',
    gap: 1,
    padding: 1,
    borderRadius: 3,
    backgroundColor: color.rule.control,
    overflow: 'hidden',
  },
  tool: {
    width: 91,
    flexGrow: 1,
    height: 28,
    paddingHorizontal: 8,
    flexDirection: 'row',
    alignItems: 'center',
    justifyContent: 'space-between',
  },
  word: { fontSize: 13, lineHeight: 18 },
  phoneRail: {
    height: 48,
    flexGrow: 0,
    backgroundColor: color.surface.trough,
    borderTopWidth: 1,
    borderTopColor: color.rule.line,
  },
  phoneTool: { height: 47, paddingHorizontal: 13, justifyContent: 'center' },
  phoneWord: { fontSize: 14, lineHeight: 20 },
  tray: { flex: 1, minWidth: 0 },
  trayRow: { alignItems: 'center', gap: 2 },
  ink: { height: 60, flexDirection: 'row', alignItems: 'center', gap: 7, paddingHorizontal: 6, borderRadius: 3 },
  phoneTray: {
    height: 100,
    flexGrow: 0,
    backgroundColor: color.surface.trough,
    borderTopWidth: 1,
    borderTopColor: color.rule.line,
  },
  phoneTrayRow: { paddingHorizontal: 4 },
  phoneInk: { width: 70, height: 80, alignItems: 'center', paddingTop: 8, gap: 2 },
  phoneInkWords: { alignItems: 'center', maxWidth: 66 },
  phoneName: { maxWidth: 66 },
  add: { justifyContent: 'center', paddingHorizontal: 8 },
});
