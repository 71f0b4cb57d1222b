import { Component, lazy, Suspense, useState, type ReactNode } from 'react';
import { StyleSheet, View } from 'react-native';
import { Text } from '@/components/ui/Text';
import { color } from '@/components/ui/theme';
import type { TableCanvasProps } from './types';

export type { FrameProbe, TableCanvasHandle, TableCanvasProps, TableLayout, TableLive } from './types';

/** The drawing engine and the canvas come in their own files, fetched by the first screen that draws. */
const LoadedCanvas = lazy(async () => {
  const [{ loadSkia }, { loadFaces }] = await Promise.all([import('./loadSkia'), import('./loadFaces')]);
  const [faces] = await Promise.all([loadFaces(), loadSkia()]);
  const { GridCanvas } = await import('./GridCanvas');
  const WithFaces = (props: TableCanvasProps) => <GridCanvas {...props} faces={faces} />;
  return { default: WithFaces };
});

/** The canvas of the drawing table, or in its place: an outline while it loads, and what the page shows where none can be. */
export function CanvasGate({
  fallback,
  onMissing,
  ...props
}: TableCanvasProps & { fallback: ReactNode; onMissing: () => void }) {
  const [canDraw] = useState(hasWebGl);
  if (!canDraw) return <Missing onMissing={onMissing}>{fallback}</Missing>;
  return (
    <Boundary fallback={<Missing onMissing={onMissing}>{fallback}</Missing>}>
      <Suspense fallback={<Preparing {...props} />}>
        <LoadedCanvas {...props} />
      </Suspense>
    </Boundary>
  );
}

function hasWebGl(): boolean {
  try {
    const canvas = document.createElement('canvas');
    const context = canvas.getContext('webgl2') ?? canvas.getContext('webgl');
    context?.getExtension('WEBGL_lose_context')?.loseContext();
    return context !== null;
  } catch {
    return false;
  }
}

function Missing({ children, onMissing }: { children: ReactNode; onMissing: () => void }) {
  useState(() => queueMicrotask(onMissing));
  return children;
}

function Preparing({ layout }: TableCanvasProps) {
  const { grid } = layout;
  return (
    <View role="status" style={[styles.outline, { left: grid.x, top: grid.y, width: grid.width, height: grid.height }]}>
      <Text tone="quiet">Preparing the table</Text>
    </View>
  );
}

class Boundary extends Component<{ fallback: ReactNode; children: ReactNode }, { failed: boolean }> {
  override state = { failed: false };
  static getDerivedStateFromError() {
    return { failed: true };
  }
  override render() {
    return this.state.failed ? this.props.fallback : this.props.children;
  }
}

const styles = StyleSheet.create({
  outline: {
    position: 'absolute',
    borderWidth: 1,
    borderColor: color.rule.line,
    alignItems: 'center',
    justifyContent: 'center',
  },
});
