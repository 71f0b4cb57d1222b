import { useEffect } from 'react';
import { StyleSheet, View } from 'react-native';
import { createPortal } from 'react-dom';
import { Text } from './Text';
import { color } from './theme';
import { elevation, z } from './tokens';

const WIDTH_MOST = 280;
const HEIGHT_LIKELY = 64;
const GAP = 6;
const EDGE = 8;

/** Under the control, or over it where the window ends; never beyond the window's sides. */
function placeBeside(node: HTMLElement): object {
  const { left, right, top, bottom } = node.getBoundingClientRect();
  const { innerWidth, innerHeight } = window;
  const side =
    left + WIDTH_MOST + EDGE > innerWidth
      ? { right: Math.max(EDGE, innerWidth - right) }
      : { left: Math.max(EDGE, left) };
  return bottom + GAP + HEIGHT_LIKELY > innerHeight
    ? { ...side, bottom: innerHeight - top + GAP }
    : { ...side, top: bottom + GAP };
}

/** Why a control cannot be pressed, over the page: nothing moves for it. It goes with the focus, and when the page scrolls. */
export function ReasonTip({ of, onGone, children }: { of: HTMLElement; onGone: () => void; children: string }) {
  useEffect(() => {
    window.addEventListener('scroll', onGone, true);
    window.addEventListener('resize', onGone);
    return () => {
      window.removeEventListener('scroll', onGone, true);
      window.removeEventListener('resize', onGone);
    };
  }, [onGone]);
  // Inside the dialog that holds the control: what stands outside of a modal is not read.
  const home = of.closest('[role=dialog],[role=alertdialog]') ?? document.body;
  return createPortal(
    <View
      role="status"
      style={[styles.tip, placeBeside(of), { boxShadow: elevation.over.shadow.paper } as object] as object}
    >
      <Text variant="small">{children}</Text>
    </View>,
    home,
  );
}

const styles = StyleSheet.create({
  tip: {
    position: 'fixed' as 'absolute',
    zIndex: z.tooltip,
    maxWidth: WIDTH_MOST,
    paddingHorizontal: 10,
    paddingVertical: 7,
    backgroundColor: color.surface.raised,
    borderWidth: 1,
    borderColor: color.rule.control,
    borderRadius: 3,
    pointerEvents: 'none',
  },
});
