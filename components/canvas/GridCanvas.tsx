import { SkiaPictureView, type SkPicture } from '@shopify/react-native-skia';
import { useEffect, useRef, useState } from 'react';
import { StyleSheet, View } from 'react-native';
import { useTheme, useThemeColors } from '@/components/ui/theme';
import type { CellPoint } from '@/lib/editor/types';
import type { FaceFiles } from './loadFaces';
import { createTableEngine, type FrameInputs, type TableEngine } from './tableEngine';
import type { TableCanvasProps } from './types';
import { listenToPointers } from './pointers';

/** The package does not export its handle's type. */
interface PictureViewHandle {
  setPicture(picture: SkPicture): void;
}

/**
 * The drawing table's one canvas: grid, axes, spectrum and the other views. React mounts it and hands values in; frames
 * are drawn by the engine, pointers go straight to the tools.
 */
export function GridCanvas(props: TableCanvasProps & { faces: FaceFiles }) {
  const { editor, layout, live, label, faces, handle } = props;
  const colors = useThemeColors();
  const { name: themeName } = useTheme();
  const picture = useRef<PictureViewHandle>(null);
  const root = useRef<HTMLElement>(null);
  const engine = useRef<TableEngine>(null);
  const hover = useRef<CellPoint | null>(null);
  const [hasFocus, setHasFocus] = useState(false);
  const inputs = useRef<FrameInputs>({ props, theme: colors, themeName, hover: null, hasFocus });

  useEffect(() => {
    inputs.current = { props, theme: colors, themeName, hover: hover.current, hasFocus };
    engine.current?.invalidate();
  });

  useEffect(() => {
    const sink = { setPicture: (made: SkPicture) => picture.current?.setPicture(made) };
    const made = createTableEngine(sink, editor, faces, () => inputs.current);
    engine.current = made;
    const stops = [editor.session.subscribe(() => made.invalidate()), live.subscribe(() => made.invalidate())];
    made.invalidate();
    return () => {
      stops.forEach((stop) => stop());
      made.dispose();
      engine.current = null;
    };
  }, [editor, live, faces]);

  useEffect(() => {
    const node = root.current;
    if (!node) return;
    const pointers = listenToPointers(
      node,
      editor,
      () => inputs.current.props,
      (cell) => {
        hover.current = cell;
        inputs.current = { ...inputs.current, hover: cell };
        engine.current?.invalidate();
        inputs.current.props.onHover?.(cell);
      },
    );
    handle?.({ redraw: () => engine.current?.invalidate(), cancelStroke: pointers.cancelStroke });
    return () => {
      pointers.stop();
      handle?.(null);
    };
  }, [editor, handle]);

  const { grid } = layout;
  return (
    <View
      ref={root as never}
      style={[styles.root, { width: layout.width, height: layout.height }, { touchAction: 'none' } as object]}
    >
      <SkiaPictureView
        ref={picture as never}
        style={{
          position: 'absolute',
          left: 0,
          top: 0,
          width: layout.width,
          height: layout.height,
          pointerEvents: 'none',
        }}
      />
      <View
        id="grid"
        tabIndex={0}
        role={'application' as never}
        aria-label={label}
        onFocus={() => setHasFocus(true)}
        onBlur={() => setHasFocus(false)}
        style={[styles.grid, { left: grid.x, top: grid.y, width: grid.width, height: grid.height }]}
      />
    </View>
  );
}

const styles = StyleSheet.create({
  root: { position: 'absolute', left: 0, top: 0, overflow: 'hidden' },
  grid: { position: 'absolute' },
});
