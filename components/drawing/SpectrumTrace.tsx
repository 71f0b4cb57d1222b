import { useMemo } from 'react';
import { color } from '@/components/ui/theme';
import type { Band } from './Straightedge';

/** A spectrum: densities in dB, lowest frequency first, bin b at fromHz + b · stepHz from the carrier. */
export interface SpectrumLine {
  name: string;
  fromHz: number;
  stepHz: number;
  densityDb: ArrayLike<number>;
  dashed?: boolean;
}

const topDb = 15;
const floorDb = -65;
const figureFace = 'ChivoMono_400Regular';

/** The largest density in each pixel column, so that no line is skipped. */
function columnsOf(line: SpectrumLine, band: Band, fftSize: number, spacingHz: number, widthPx: number): Float64Array {
  const zero = Math.floor(fftSize / 2) + 0.5;
  const fromHz = (band.from - zero) * spacingHz;
  const hzPerPx = ((band.to - band.from) * spacingHz) / widthPx;
  const columns = new Float64Array(widthPx).fill(-Infinity);
  for (let x = 0; x < widthPx; x++) {
    const low = Math.floor((fromHz + x * hzPerPx - line.fromHz) / line.stepHz + 0.5);
    const high = Math.max(low + 1, Math.floor((fromHz + (x + 1) * hzPerPx - line.fromHz) / line.stepHz + 0.5));
    for (let bin = Math.max(0, low); bin < high && bin < line.densityDb.length; bin++)
      columns[x] = Math.max(columns[x]!, line.densityDb[bin]!);
  }
  return columns;
}

function yOf(db: number, heightPx: number): number {
  const shown = Math.max(floorDb, Math.min(topDb, db));
  return Math.round(((topDb - shown) / (topDb - floorDb)) * heightPx * 10) / 10;
}

/** Spectra under a grid, on the grid's own pixels a subcarrier; 0 dB is the mean of the painted cells. */
export function SpectrumTrace({
  lines,
  band,
  fftSize,
  spacingHz,
  widthPx,
  gutterPx = 0,
  heightPx,
}: {
  lines: readonly SpectrumLine[];
  band: Band;
  fftSize: number;
  spacingHz: number;
  widthPx: number;
  /** Room left of the plot for the dB; without it they stand in the plot. */
  gutterPx?: number;
  heightPx: number;
}) {
  const y = (db: number) => yOf(db, heightPx);
  const paths = useMemo(
    () =>
      lines.map((line) => {
        const columns = columnsOf(line, band, fftSize, spacingHz, widthPx);
        let path = '';
        columns.forEach((db, x) => {
          if (db === -Infinity) return;
          path += `${path === '' ? 'M' : 'L'}${x + 0.5} ${yOf(db, heightPx)}`;
        });
        return path;
      }),
    [lines, band, fftSize, spacingHz, widthPx, heightPx],
  );
  return (
    <svg
      width={widthPx}
      height={heightPx}
      aria-hidden
      style={{ display: 'block', marginLeft: gutterPx, overflow: 'visible', backgroundColor: color.plot.background }}
    >
      {[10, 0, -10, -20, -30, -40, -50, -60].map((db) => (
        <g key={db}>
          <line
            x1={0}
            x2={widthPx}
            y1={Math.round(y(db)) + 0.5}
            y2={Math.round(y(db)) + 0.5}
            stroke={color.plot.grid}
          />
        </g>
      ))}
      {lines.map((line, i) =>
        line.dashed ? (
          <path
            key={line.name}
            d={paths[i]}
            fill="none"
            stroke={color.plot.before}
            strokeWidth={1}
            strokeDasharray="4 3"
          />
        ) : (
          <g key={line.name}>
            {paths[i] ? (
              <path d={`${paths[i]}L${widthPx} ${heightPx}L0 ${heightPx}Z`} fill={color.plot.traceFill} />
            ) : null}
            <path d={paths[i]} fill="none" stroke={color.plot.trace} strokeWidth={1.25} />
          </g>
        ),
      )}
      {[0, -20, -40, -60].map((db) => (
        <text
          key={db}
          {...(gutterPx > 0
            ? { x: -5, y: y(db) + 4, textAnchor: 'end' as const }
            : { x: 4, y: y(db) - 3, stroke: color.plot.background, strokeWidth: 3, paintOrder: 'stroke' })}
          fontSize={11}
          fontFamily={figureFace}
          fill={color.plot.axis}
        >
          {db < 0 ? `−${-db}` : db}
        </text>
      ))}
      <rect
        x={0.5}
        y={0.5}
        width={Math.max(0, widthPx - 1)}
        height={heightPx - 1}
        fill="none"
        stroke={color.rule.line}
      />
    </svg>
  );
}
