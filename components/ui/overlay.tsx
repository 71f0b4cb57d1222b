import { useEffect, useId, useRef, useState, type ReactNode } from 'react';
import { StyleSheet, View } from 'react-native';
import { createPortal } from 'react-dom';
import { Button } from './Button';
import { InOverlay, overlayOpened } from './overlayState';
import { Text } from './Text';
import { color } from './theme';
import { elevation, z } from './tokens';
import { useBreakpoint } from './useBreakpoint';

const focusable =
  'a[href],button:not([disabled]),[tabindex]:not([tabindex="-1"]),input:not([disabled]),textarea,select,[role=button]';

const isShown = (node: HTMLElement) => node.offsetParent !== null || node === document.activeElement;

/**
 * Keeps the keyboard inside, closes with Escape, gives the focus back at the end. The focus starts where `first` points to,
 * else on the first control.
 */
function useModal(onClose: () => void, trap: boolean, firstSelector?: string) {
  const ref = useRef<HTMLElement>(null);
  const close = useRef(onClose);
  useEffect(() => {
    close.current = onClose;
  });
  useEffect(() => {
    const before = document.activeElement as HTMLElement | null;
    const node = ref.current;
    const first =
      (firstSelector && node?.querySelector<HTMLElement>(firstSelector)) || node?.querySelector<HTMLElement>(focusable);
    first?.focus();
    const closed = overlayOpened();
    const onKey = (event: KeyboardEvent) => {
      // Where the focused control went away with its act, the keyboard is at the page: a modal still answers it.
      const isHere = node?.contains(event.target as Node) || (trap && event.target === document.body);
      if (!isHere) return;
      // A number field with something new in it takes the first Escape itself: it restores its value.
      const isTyped = event.target instanceof HTMLElement && event.target.dataset['typed'] === '1';
      if (event.key === 'Escape' && !isTyped) {
        event.stopPropagation();
        close.current();
      }
      if (event.key !== 'Tab' || !trap || !node) return;
      const all = [...node.querySelectorAll<HTMLElement>(focusable)].filter(isShown);
      const last = all.at(-1);
      if (event.target === document.body) {
        event.preventDefault();
        all[0]?.focus();
      } else if (event.shiftKey && document.activeElement === all[0]) {
        event.preventDefault();
        last?.focus();
      } else if (!event.shiftKey && document.activeElement === last) {
        event.preventDefault();
        all[0]?.focus();
      }
    };
    // in the capture phase: text fields keep their keys from going up
    document.addEventListener('keydown', onKey, true);
    return () => {
      document.removeEventListener('keydown', onKey, true);
      closed();
      before?.focus?.();
    };
  }, [trap, firstSelector]);
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
  unsaved = false,
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
  /** Something was typed that leaving would lose: asked once. */
  unsaved?: boolean;
}) {
  const phone = useBreakpoint() === 'phone';
  const [leaving, setLeaving] = useState(false);
  const leave = () => (unsaved && !leaving ? setLeaving(true) : onClose());
  const ref = useModal(leave, phone);
  const headingId = useId();
  return createPortal(
    <InOverlay value>
      <View style={[styles.layer, { zIndex: z.sheet, pointerEvents: phone && !lit ? 'auto' : 'none' }]}>
        {phone && !lit ? <View style={styles.scrim} {...({ onClick: leave } as object)} /> : null}
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
            <Text
              variant="heading"
              heading={2}
              tone="strong"
              nativeID={headingId}
              numberOfLines={1}
              style={styles.title}
            >
              {title}
              {note ? (
                <Text variant="small" tone="quiet">
                  {`  ${note}`}
                </Text>
              ) : null}
            </Text>
            <Button kind="plain" onPress={leave}>
              Close
            </Button>
          </View>
          <View style={styles.body}>{children}</View>
          {leaving && unsaved ? (
            <View role="alert" style={styles.foot}>
              <Text weight={600} style={styles.title}>
                Leave without saving?
              </Text>
              <Button onPress={() => setLeaving(false)}>Stay</Button>
              <Button kind="grave" onPress={onClose}>
                Leave
              </Button>
            </View>
          ) : foot ? (
            <View style={styles.foot}>{foot}</View>
          ) : null}
        </View>
      </View>
    </InOverlay>,
    document.body,
  );
}

const safeButton = '[data-safe] [role=button]';

/** Only for what cannot be undone: the question, what follows, and buttons that repeat the verb; focus on the safe one. */
export function Dialog({
  question,
  children,
  safe,
  act,
  onClose,
  startsOnField = false,
}: {
  question: string;
  children?: ReactNode;
  safe: { label: string; onPress: () => void };
  act?: { label: string; grave?: boolean; busy?: boolean; onPress: () => void; disabledBecause?: string | null };
  onClose: () => void;
  /** The way out is the field, not the safe button: to sign in again. */
  startsOnField?: boolean;
}) {
  const ref = useModal(onClose, true, startsOnField ? 'input' : safeButton);
  const bodyId = useId();
  const headingId = useId();
  return createPortal(
    <InOverlay value>
      <View style={[styles.layer, styles.centre, { zIndex: z.dialog }]}>
        <View style={styles.scrim} />
        <View
          ref={ref as never}
          role="alertdialog"
          aria-modal
          aria-labelledby={headingId}
          aria-describedby={bodyId}
          style={[styles.dialog, { boxShadow: elevation.over.shadow.paper } as object]}
        >
          <Text variant="title" heading={2} tone="strong" nativeID={headingId}>
            {question}
          </Text>
          <View nativeID={bodyId}>{typeof children === 'string' ? <Text>{children}</Text> : children}</View>
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
      </View>
    </InOverlay>,
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
  head: { flexDirection: 'row', alignItems: 'center', gap: 12, paddingLeft: 16, paddingRight: 8, minHeight: 48 },
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
    alignItems: 'center',
    gap: 10,
  },
  dialog: {
    maxWidth: 480,
    maxHeight: '100%',
    overflow: 'scroll' as 'visible',
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
