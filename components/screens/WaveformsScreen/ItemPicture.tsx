import { View } from 'react-native';
import { GridPicture } from '@/components/ui/GridPicture';
import { color } from '@/components/ui/theme';
import type { WaveformItem } from '@/lib/contracts/waveforms';

/** The small grid of a row; its place is kept while a large one is drawn. */
export function ItemPicture({ item, width, height }: { item: WaveformItem; width: number; height: number }) {
  const { picture } = item.figures;
  if (picture) return <GridPicture picture={picture} width={width} height={height} />;
  return <View style={{ width, height, borderWidth: 1, borderColor: color.rule.hair }} />;
}
