import { useEffect, useId, useRef, type ReactNode } from 'react';
import { StyleSheet, View } from 'react-native';
import { createPortal } from 'react-dom';
import { Button } from './Button';
import { Text } from './Text';
import { color } from './theme';
import { elevation, z } from './tokens';
import { useBreakpoint } from './useBreakpoint';

const focusable =
  'a[href],button:not([disabled]),[tabindex]:not([tabindex="-1"]),input:not([disabled]),textarea,select,[role=button]';

/** Keeps the keyboard inside, closes with Escape, gives the focus back at the end. */
function useModal(onClose: () => void, trap: boolean) {
  const ref = useRef<HTMLElement>(null);
  const close = useRef(onClose);
  useEffect(() => {
    close.current = onClose;
  });
  useEffect(() => {
    const before = document.activeElement as HTMLElement | null;
    const node = ref.current;
    const first = node?.querySelector<HTMLElement>('[data-autofocus]') ?? node?.querySelector<HTMLElement>(focusable);
    first?.focus();
    const onKey = (event: KeyboardEvent) => {
      // A number field with something new in it takes the first Escape itself: it restores its value.
      const isTyped = event.target instanceof HTMLElement && event.target.dataset['typed'] === '1';
      if (event.key === 'Escape' && !isTyped) {
        event.stopPropagation();
        close.current();
      }
      if (event.key !== 'Tab' || !trap || !node) return;
      const all = [...node.querySelectorAll<HTMLElement>(focusable)].filter((one) => one.offsetParent !== null);
      const last = all.at(-1);
      if (event.shiftKey && document.activeElement === all[0]) {
        event.preventDefault();
        last?.focus();
      } else if (!event.shiftKey && document.activeElement === last) {
        event.preventDefault();
        all[0]?.focus();
      }
    };
    node?.addEventListener('keydown', onKey);
    return () => {
      node?.removeEventListener('keydown', onKey);
      before?.focus?.();
    };
  }, [trap]);
  return ref;
}

/**
 * A sheet: from the lower edge on a phone, a column at the right edge on a wide screen. Without a scrim on a wide
 * screen, so that what it changes stays in sight.
 */
export function Sheet({
  title,
  onClose,
  children,
  foot,
  width = 420,
  top = 0,
  bottom = 0,
  lit,
  lead,
  note,
}: {
  title: string;
  onClose: () => void;
  children: ReactNode;
  foot?: ReactNode;
  width?: number;
  /** Where it stands on a wide screen. */
  top?: number;
  bottom?: number;
  /** What stands behind stays in sight on a phone too: no scrim, and room above. */
  lit?: boolean;
  /** Before the title (a swatch), and a quiet note behind it. */
  lead?: ReactNode;
  note?: string;
}) {
  const phone = useBreakpoint() === 'phone';
  const ref = useModal(onClose, phone);
  const headingId = useId();
  return createPortal(
    <View style={[styles.layer, { zIndex: z.sheet, pointerEvents: phone && !lit ? 'auto' : 'none' }]}>
      {phone && !lit ? <View style={styles.scrim} {...({ onClick: onClose } as object)} /> : null}
      <View
        ref={ref as never}
        role="dialog"
        aria-modal={phone}
        aria-labelledby={headingId}
        style={[
          phone ? [styles.phoneSheet, lit ? styles.litSheet : null] : [styles.wideSheet, { width, top, bottom }],
          { boxShadow: elevation.over.shadow.paper, pointerEvents: 'auto' } as object,
        ]}
      >
        {phone ? <View style={styles.grip} /> : null}
        <View style={styles.head}>
          {lead}
          <Text variant="heading" heading={2} tone="strong" nativeID={headingId} numberOfLines={1} style={styles.title}>
            {title}
            {note ? (
              <Text variant="small" tone="quiet">
                {`  ${note}`}
              </Text>
            ) : null}
          </Text>
          <Button kind="plain" onPress={onClose}>
            Close
          </Button>
        </View>
        <View style={styles.body}>{children}</View>
        {foot ? <View style={styles.foot}>{foot}</View> : null}
      </View>
    </View>,
    document.body,
  );
}

/** Only for what cannot be undone: the question, what follows, and buttons that repeat the verb; focus on the safe one. */
export function Dialog({
  question,
  children,
  safe,
  act,
  onClose,
}: {
  question: string;
  children?: ReactNode;
  safe: { label: string; onPress: () => void };
  act?: { label: string; grave?: boolean; busy?: boolean; onPress: () => void; disabledBecause?: string | null };
  onClose: () => void;
}) {
  const ref = useModal(onClose, true);
  const headingId = useId();
  return createPortal(
    <View style={[styles.layer, styles.centre, { zIndex: z.dialog }]}>
      <View style={styles.scrim} />
      <View
        ref={ref as never}
        role="alertdialog"
        aria-modal
        aria-labelledby={headingId}
        style={[styles.dialog, { boxShadow: elevation.over.shadow.paper } as object]}
      >
        <Text variant="title" heading={2} tone="strong" nativeID={headingId}>
          {question}
        </Text>
        {typeof children === 'string' ? <Text>{children}</Text> : children}
        <View style={styles.buttons}>
          <View {...({ dataSet: { safe: '1' } } as object)}>
            <Button onPress={safe.onPress}>{safe.label}</Button>
          </View>
          {act ? (
            <Button
              kind={act.grave ? 'graveFilled' : 'filled'}
              busy={act.busy ?? false}
              disabledBecause={act.disabledBecause ?? null}
              onPress={act.onPress}
            >
              {act.label}
            </Button>
          ) : null}
        </View>
      </View>
    </View>,
    document.body,
  );
}

const styles = StyleSheet.create({
  layer: { position: 'fixed' as 'absolute', left: 0, top: 0, right: 0, bottom: 0 },
  centre: { alignItems: 'center', justifyContent: 'center', padding: 16 },
  scrim: { position: 'absolute', left: 0, top: 0, right: 0, bottom: 0, backgroundColor: color.surface.scrim },
  phoneSheet: {
    position: 'absolute',
    left: 0,
    right: 0,
    bottom: 0,
    maxHeight: '92%',
    backgroundColor: color.surface.sheet,
    borderTopWidth: 1.5,
    borderTopColor: color.rule.strong,
  },
  wideSheet: {
    position: 'absolute',
    right: 0,
    backgroundColor: color.surface.sheet,
    borderLeftWidth: 1.5,
    borderLeftColor: color.rule.strong,
  },
  grip: {
    alignSelf: 'center',
    width: 36,
    height: 4,
    borderRadius: 2,
    marginTop: 7,
    backgroundColor: color.rule.control,
  },
  litSheet: { maxHeight: '74%' },
  head: { flexDirection: 'row', alignItems: 'center', gap: 12, paddingLeft: 16, paddingRight: 4, minHeight: 48 },
  title: { flexGrow: 1, flexShrink: 1 },
  body: {
    flexGrow: 1,
    flexShrink: 1,
    minHeight: 0,
    overflow: 'scroll' as 'visible',
    paddingHorizontal: 16,
    paddingBottom: 16,
  },
  foot: {
    paddingHorizontal: 16,
    paddingVertical: 10,
    borderTopWidth: 1,
    borderTopColor: color.rule.line,
    backgroundColor: color.surface.trough,
    flexDirection: 'row',
    gap: 10,
  },
  dialog: {
    maxWidth: 480,
    width: '100%',
    gap: 12,
    padding: 20,
    backgroundColor: color.surface.raised,
    borderWidth: 1.5,
    borderColor: color.rule.strong,
    borderRadius: 6,
  },
  buttons: { flexDirection: 'row', justifyContent: 'flex-end', flexWrap: 'wrap', gap: 10, marginTop: 8 },
});
