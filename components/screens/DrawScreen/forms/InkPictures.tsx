import { useMemo } from 'react';
import { View } from 'react-native';
import { Text } from '@/components/ui/Text';
import { color } from '@/components/ui/theme';
import { formatInteger, formatNumber } from '@/lib/drawing/quantities';
import type { Editor } from '@/lib/editor/store';
import { lowestOf } from '@/lib/editor/document';
import {
  bitsPerCell,
  createSequence,
  isMapKnown,
  pointsOf,
  sequenceValue,
  type DataValue,
  type Factor,
} from '@/lib/synth';

const SIDE = 184;

/** The map drawn with its bits: up to 64-QAM whole, above one quadrant's corner of 4 × 4. */
export function MapPicture({ value }: { value: DataValue }) {
  const { constellation, bitMap } = value;
  const marks = useMemo(() => {
    if (!isMapKnown(constellation, bitMap)) return [];
    const bits = bitsPerCell(constellation);
    const points = pointsOf(constellation, bitMap);
    const all = Array.from({ length: 1 << bits }, (_, word) => ({
      i: points[2 * word]!,
      q: points[2 * word + 1]!,
      bits: word.toString(2).padStart(bits, '0'),
    }));
    if (bits <= 6) return all;
    const levels = [...new Set(all.map((point) => Math.round(Math.abs(point.i) * 1e6)))].sort((a, b) => a - b);
    const most = (levels[3]! + 1) / 1e6;
    return all.filter((point) => point.i > 0 && point.q > 0 && point.i <= most && point.q <= most);
  }, [constellation, bitMap]);
  const isCorner = marks.length > 0 && marks.every(({ i, q }) => i > 0 && q > 0);
  const most = Math.max(...marks.map(({ i, q }) => Math.max(Math.abs(i), Math.abs(q))), 1e-9);
  const from = isCorner ? 0 : -most;
  const place = (value: number) => 16 + ((value - from) / (most - from)) * (SIDE - 32);
  const fontSize = marks.length > 16 ? 6.5 : marks.some(({ bits }) => bits.length > 8) ? 6.5 : 10;
  return (
    <svg
      width={SIDE}
      height={SIDE}
      role="img"
      aria-label={`Map of ${marks.length} points with their bits`}
      style={{ border: `1px solid ${color.rule.line}`, background: color.plot.background }}
    >
      {isCorner ? null : (
        <>
          <line x1={SIDE / 2} x2={SIDE / 2} y1={0} y2={SIDE} stroke={color.plot.grid} />
          <line y1={SIDE / 2} y2={SIDE / 2} x1={0} x2={SIDE} stroke={color.plot.grid} />
        </>
      )}
      {marks.map(({ i, q, bits }) => (
        <g key={bits}>
          <circle cx={place(i)} cy={SIDE - place(q) - 4} r={marks.length > 16 ? 2 : 3} fill={color.plot.point} />
          <text
            x={place(i)}
            y={SIDE - place(q) + 8}
            textAnchor="middle"
            fontSize={fontSize}
            fontFamily="ChivoMono_400Regular"
            fill={color.plot.axis}
          >
            {bits}
          </text>
        </g>
      ))}
    </svg>
  );
}

const ARROWS = 14;
const CELL_PX = 25;

/** The first values from the first painted cell as arrows, so that a wrong counter shows at once. */
export function FirstValues({ editor, place, factors }: { editor: Editor; place: number; factors: readonly Factor[] }) {
  const { settings, cells } = editor.document;
  const { fftSize } = settings;
  const values = useMemo(() => {
    const first = cells.indexOf(place);
    const start = first < 0 ? 0 : first;
    const symbol = Math.floor(start / fftSize);
    const row = cells.subarray(symbol * fftSize, (symbol + 1) * fftSize);
    const positions: number[] = [];
    for (let p = 0; p < fftSize && positions.length < ARROWS; p++) if (first < 0 || row[p] === place) positions.push(p);
    try {
      const sequences = factors.map((factor) => createSequence(factor.sequence));
      const list = positions.map((position, i) => {
        let re = 1;
        let im = 0;
        factors.forEach((factor, f) => {
          const counter = { cell: i, symbolCell: i, subcarrier: position, symbol }[factor.counter];
          if (counter + factor.start < 0) throw new Error('below zero');
          const [a, b] = sequenceValue(sequences[f]!, counter + factor.start);
          [re, im] = [re * a - im * b, re * b + im * a];
        });
        return { re, im };
      });
      return { symbol, from: positions[0] ?? 0, list };
    } catch {
      return null;
    }
  }, [cells, place, factors, fftSize]);
  if (!values)
    return (
      <Text variant="small" tone="quiet">
        No values yet: a blank is not right, or an index would be below zero.
      </Text>
    );
  const size = values.list.length > 0 ? Math.max(...values.list.map(({ re, im }) => Math.hypot(re, im)), 1e-9) : 1;
  const middle = CELL_PX / 2;
  const radius = CELL_PX / 2 - 4;
  return (
    <View>
      <View style={{ flexDirection: 'row', justifyContent: 'space-between' }}>
        <Text variant="small" tone="quiet">
          {`Symbol ${values.symbol}, from subcarrier ${formatInteger(values.from + lowestOf(fftSize))} upwards`}
        </Text>
        <Text variant="figureSmall">{`|a| ${formatNumber(size, 2, true)}`}</Text>
      </View>
      <svg
        width="100%"
        viewBox={`0 0 ${ARROWS * CELL_PX} ${CELL_PX + 14}`}
        role="img"
        aria-label={`First values: ${values.list.map(({ re, im }) => `${formatNumber(re, 2)}, ${formatNumber(im, 2)}`).join('; ')}`}
        style={{ border: `1px solid ${color.rule.line}`, background: color.plot.background }}
      >
        {values.list.map(({ re, im }, i) => {
          const x = i * CELL_PX + middle;
          const y = (CELL_PX + 14) / 2;
          const dx = (re / size) * radius;
          const dy = (-im / size) * radius;
          return (
            <g key={i}>
              <line
                x1={x - dx * 0.7}
                y1={y - dy * 0.7}
                x2={x + dx * 0.7}
                y2={y + dy * 0.7}
                stroke={color.cell.pilot.fill}
                strokeWidth={1.5}
              />
              <circle cx={x + dx * 0.7} cy={y + dy * 0.7} r={2.6} fill={color.cell.pilot.fill} />
            </g>
          );
        })}
      </svg>
    </View>
  );
}
