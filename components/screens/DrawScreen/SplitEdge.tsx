import { StyleSheet, View } from 'react-native';

interface PointerLike {
  clientY: number;
  pointerId: number;
  currentTarget: HTMLElement;
}

/** The edge between grid and spectrum: drags, arrows move it, a double press restores it. */
export function SplitEdge(props: {
  x: number;
  y: number;
  width: number;
  value: number;
  onDrag: (y: number) => void;
  onStep: (steps: number) => void;
  onRestore: () => void;
}) {
  const { x, y, width, value, onDrag, onStep, onRestore } = props;
  const events = {
    onPointerDown: (event: PointerLike) => event.currentTarget.setPointerCapture(event.pointerId),
    onPointerMove: (event: PointerLike) => {
      if (!event.currentTarget.hasPointerCapture(event.pointerId)) return;
      const parent = event.currentTarget.parentElement!.getBoundingClientRect();
      onDrag(event.clientY - parent.top);
    },
    onDoubleClick: onRestore,
    onKeyDown: (event: { key: string; preventDefault(): void }) => {
      const steps = { ArrowDown: 1, ArrowUp: -1 }[event.key];
      if (steps === undefined) return;
      event.preventDefault();
      onStep(steps);
    },
  };
  return (
    <View
      role="separator"
      aria-orientation="horizontal"
      aria-label="Edge between grid and spectrum"
      aria-valuemin={20}
      aria-valuemax={80}
      aria-valuenow={Math.round(value * 100)}
      tabIndex={0}
      style={[styles.edge, { left: x, width, top: y - 3 }, { cursor: 'row-resize', touchAction: 'none' } as object]}
      {...(events as object)}
    />
  );
}

const styles = StyleSheet.create({ edge: { position: 'absolute', height: 7 } });
