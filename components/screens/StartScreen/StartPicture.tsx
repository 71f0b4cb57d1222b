import { useEffect, useRef, useState } from 'react';
import { StyleSheet, View } from 'react-native';
import { GridPicture } from '@/components/ui/GridPicture';
import { color } from '@/components/ui/theme';
import { gridPicture, type GridPicture as Picture } from '@/lib/drawing/gridPicture';
import type { PresetStart } from './starts';

/** Presets never change, so a picture is made once a visit. */
const known = new Map<string, Picture>();

function pictureOf(start: PresetStart): Picture {
  const picture = known.get(start.startId) ?? gridPicture(start.document.content, 144, 21);
  known.set(start.startId, picture);
  return picture;
}

/** A start's grid in small. Its document is built when the entry comes near the window, so that a long list opens at once. */
export function StartPicture({ start }: { start: PresetStart }) {
  const frame = useRef<View>(null);
  const [picture, setPicture] = useState(() => known.get(start.startId) ?? null);
  useEffect(() => {
    if (picture) return;
    let timer: ReturnType<typeof setTimeout> | undefined;
    const observer = new IntersectionObserver(
      (entries) => {
        if (!entries.some((entry) => entry.isIntersecting)) return;
        observer.disconnect();
        timer = setTimeout(() => setPicture(pictureOf(start)), 0);
      },
      { rootMargin: '120px' },
    );
    observer.observe(frame.current as unknown as Element);
    return () => {
      observer.disconnect();
      clearTimeout(timer);
    };
  }, [picture, start]);
  return picture ? (
    <GridPicture picture={picture} width="100%" height={42} />
  ) : (
    <View ref={frame} style={styles.empty} />
  );
}

const styles = StyleSheet.create({
  empty: { height: 42, borderWidth: 1, borderColor: color.rule.line },
});
