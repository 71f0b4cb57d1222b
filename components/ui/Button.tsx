import { useCallback, useState, type ReactNode } from 'react';
import { Pressable, StyleSheet, View, type GestureResponderEvent, type ViewStyle } from 'react-native';
import { useIsBehindOverlay } from './overlayState';
import { ReasonTip } from './ReasonTip';
import { Text } from './Text';
import { color } from './theme';
import { useAriaDisabled } from './useAriaDisabled';
import { useBreakpoint } from './useBreakpoint';

export type ButtonKind = 'filled' | 'ruled' | 'plain' | 'grave' | 'graveFilled';
export type ButtonSize = 'usual' | 'small' | 'foot';

export interface ButtonProps {
  children: ReactNode;
  kind?: ButtonKind;
  size?: ButtonSize;
  onPress?: (event: GestureResponderEvent) => void;
  /** A button that cannot be pressed stays focusable and says why. */
  disabledBecause?: string | null;
  busy?: boolean;
  label?: string;
  fill?: boolean;
  style?: ViewStyle;
  id?: string;
  expanded?: boolean;
}

interface Look {
  ground: string;
  hover: string;
  pressed: string;
  rule: string;
  tone: 'onSolid' | 'strong' | 'accent' | 'danger';
}

const looks: Record<ButtonKind, Look> = {
  filled: {
    ground: color.accent.solid,
    hover: color.accent.solidHover,
    pressed: color.accent.solidPressed,
    rule: color.accent.solid,
    tone: 'onSolid',
  },
  ruled: {
    ground: color.surface.raised,
    hover: color.surface.hover,
    pressed: color.surface.pressed,
    rule: color.rule.control,
    tone: 'strong',
  },
  plain: {
    ground: 'transparent',
    hover: color.surface.hover,
    pressed: color.surface.pressed,
    rule: 'transparent',
    tone: 'accent',
  },
  grave: {
    ground: color.surface.raised,
    hover: color.danger.wash,
    pressed: color.danger.wash,
    rule: color.danger.rule,
    tone: 'danger',
  },
  graveFilled: {
    ground: color.danger.solid,
    hover: color.danger.solid,
    pressed: color.danger.solid,
    rule: color.danger.solid,
    tone: 'onSolid',
  },
};

/** A verb and a noun. One filled button a screen. */
export function Button(props: ButtonProps) {
  const {
    children,
    kind: asked = 'ruled',
    size = 'usual',
    onPress,
    disabledBecause,
    busy,
    label,
    fill,
    style,
    id,
    expanded,
  } = props;
  const touch = useBreakpoint() === 'phone';
  const [saysWhyAt, setSaysWhyAt] = useState<HTMLElement | null>(null);
  const sayNoMore = useCallback(() => setSaysWhyAt(null), []);
  const behind = useIsBehindOverlay();
  const kind = asked === 'filled' && behind ? 'ruled' : asked;
  const look = looks[kind];
  const height = size === 'foot' ? 48 : touch ? 44 : size === 'small' ? 28 : 36;
  const off = Boolean(disabledBecause);
  const ref = useAriaDisabled(off || Boolean(busy), disabledBecause);
  return (
    <View style={[fill ? styles.fill : styles.hug, style]}>
      <Pressable
        ref={ref as never}
        id={id}
        role="button"
        aria-label={label}
        aria-expanded={expanded}
        aria-busy={busy || undefined}
        onPress={(event) => {
          if (busy) return;
          if (off) setSaysWhyAt(ref.current);
          else onPress?.(event);
        }}
        onBlur={sayNoMore}
        style={(state) => [
          styles.button,
          {
            height,
            minWidth: touch ? 44 : undefined,
            paddingHorizontal: kind === 'plain' ? 8 : size === 'small' && !touch ? 10 : 16,
            backgroundColor: off
              ? kind === 'plain'
                ? 'transparent'
                : color.surface.sunken
              : state.pressed
                ? look.pressed
                : (state as { hovered?: boolean }).hovered
                  ? look.hover
                  : look.ground,
            borderColor: off && kind !== 'plain' ? color.rule.line : look.rule,
          },
        ]}
      >
        <Text
          variant={size === 'foot' ? 'heading' : 'bodyStrong'}
          tone={off ? 'quiet' : look.tone}
          style={size === 'foot' ? null : styles.label}
          numberOfLines={1}
        >
          {children}
        </Text>
        {busy ? <View style={[styles.busy, { backgroundColor: off ? color.rule.line : color.focus.ring }]} /> : null}
      </Pressable>
      {disabledBecause && saysWhyAt ? (
        <ReasonTip of={saysWhyAt} onGone={sayNoMore}>
          {disabledBecause}
        </ReasonTip>
      ) : null}
    </View>
  );
}

const styles = StyleSheet.create({
  hug: { flexShrink: 0, alignSelf: 'auto' },
  fill: { flexGrow: 1, flexShrink: 1, flexBasis: 'auto' },
  button: {
    flexDirection: 'row',
    alignItems: 'center',
    justifyContent: 'center',
    borderWidth: 1,
    borderRadius: 3,
    position: 'relative',
    overflow: 'hidden',
  },
  label: { fontSize: 14, lineHeight: 20 },
  busy: { position: 'absolute', left: 0, right: 0, bottom: 0, height: 2 },
});
