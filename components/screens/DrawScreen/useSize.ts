import { useState } from 'react';
import type { LayoutChangeEvent } from 'react-native';

/** The size of an element in whole px, and the height of the page it stands in. */
export function useSize(): [{ width: number; height: number; pageHeight: number }, (event: LayoutChangeEvent) => void] {
  const [size, setSize] = useState({ width: 0, height: 0, pageHeight: 0 });
  const onLayout = ({ nativeEvent }: LayoutChangeEvent) => {
    const next = {
      width: Math.round(nativeEvent.layout.width),
      height: Math.round(nativeEvent.layout.height),
      pageHeight: window.innerHeight,
    };
    setSize((now) =>
      now.width === next.width && now.height === next.height && now.pageHeight === next.pageHeight ? now : next,
    );
  };
  return [size, onLayout];
}
