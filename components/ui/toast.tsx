import { useEffect, useState } from 'react';
import { StyleSheet, View } from 'react-native';
import { createStore } from 'zustand/vanilla';
import { useStore } from 'zustand';
import { Button } from './Button';
import { Text } from './Text';
import { color } from './theme';
import { useBreakpoint } from './useBreakpoint';
import { elevation, z } from './tokens';

interface ToastState {
  message: { id: number; text: string; undo?: () => void } | null;
}
const store = createStore<ToastState>(() => ({ message: null }));
let nextId = 1;
const lastsMs = 6000;

/** One message at a time, for 6 s; never for an error that needs an act. */
export function showToast(text: string, undo?: () => void): void {
  store.setState({ message: { id: nextId++, text, ...(undo ? { undo } : {}) } });
}

/** Where messages appear: once, at the root. */
export function ToastPlace() {
  const message = useStore(store, (state) => state.message);
  const phone = useBreakpoint() === 'phone';
  const [held, setHeld] = useState(false);
  useEffect(() => {
    if (!message || held) return;
    const timer = setTimeout(() => store.setState({ message: null }), lastsMs);
    return () => clearTimeout(timer);
  }, [message, held]);
  return (
    <View
      aria-live="polite"
      role="status"
      style={[styles.place, phone ? styles.phone : styles.wide, { pointerEvents: message ? 'auto' : 'none' }]}
      {...({
        onMouseEnter: () => setHeld(true),
        onMouseLeave: () => setHeld(false),
        onFocus: () => setHeld(true),
        onBlur: () => setHeld(false),
      } as object)}
    >
      {message ? (
        <View style={[styles.toast, { boxShadow: elevation.over.shadow.paper } as object]}>
          <Text tone="strong" style={styles.words}>
            {message.text}
          </Text>
          {message.undo ? (
            <Button
              kind="plain"
              size="small"
              onPress={() => {
                message.undo?.();
                store.setState({ message: null });
              }}
            >
              Undo
            </Button>
          ) : null}
        </View>
      ) : null}
    </View>
  );
}

const styles = StyleSheet.create({
  place: { position: 'fixed' as 'absolute', zIndex: z.toast },
  phone: { left: 12, right: 12, bottom: 140 },
  wide: { left: 20, bottom: 20, maxWidth: 480 },
  toast: {
    flexDirection: 'row',
    alignItems: 'center',
    gap: 12,
    minHeight: 44,
    paddingHorizontal: 16,
    paddingVertical: 8,
    backgroundColor: color.surface.raised,
    borderWidth: 1.5,
    borderColor: color.rule.strong,
    borderRadius: 4,
  },
  words: { flexShrink: 1 },
});
