import { useState } from 'react';
import type { LayoutChangeEvent } from 'react-native';

/** The laid-out width of a view, 0 until it is known. */
export function useWidth(): { widthPx: number; onLayout: (event: LayoutChangeEvent) => void } {
  const [widthPx, setWidth] = useState(0);
  return { widthPx, onLayout: (event) => setWidth(Math.round(event.nativeEvent.layout.width)) };
}
