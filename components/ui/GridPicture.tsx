import { useMemo } from 'react';
import { pictureBlocks, type GridPicture as Picture } from '@/lib/drawing/gridPicture';
import { color, useThemeColors } from './theme';

/** A grid in small: fills mixed by area, so that a comb neither vanishes nor closes to a false bar. */
export function GridPicture({
  picture,
  width,
  height,
  label,
}: {
  picture: Picture;
  width: number | string;
  height: number;
  label?: string;
}) {
  const colors = useThemeColors();
  const blocks = useMemo(() => {
    const fills = Object.fromEntries(Object.entries(colors.cell).map(([key, cell]) => [key, cell.fill]));
    return pictureBlocks(picture, fills as Parameters<typeof pictureBlocks>[1]);
  }, [picture, colors]);
  return (
    <svg
      viewBox={`0 0 ${picture.columns} ${picture.rowCount}`}
      preserveAspectRatio="none"
      role={label ? 'img' : undefined}
      aria-label={label}
      aria-hidden={label ? undefined : true}
      shapeRendering="crispEdges"
      style={{
        width,
        height,
        display: 'block',
        flexShrink: 0,
        border: `1px solid ${color.rule.line}`,
        boxSizing: 'border-box',
      }}
    >
      {blocks.map((block, i) => (
        <rect key={i} x={block.x} y={block.y} width={block.width} height={block.height} fill={block.fill} />
      ))}
    </svg>
  );
}
