import { color } from '@/components/ui/theme';
import type { CcdfCurve } from '@/lib/synth';

const WIDTH = 190;
const HEIGHT = 146;
const LEFT = 28;
const BOTTOM = 18;
const MOST_DB = 12;
const DECADES = 5;

const x = (db: number) => LEFT + (db / MOST_DB) * (WIDTH - LEFT - 2);
const y = (probability: number) =>
  2 + (-Math.log10(Math.max(probability, 10 ** -DECADES)) / DECADES) * (HEIGHT - BOTTOM - 2);

function pathOf({ thresholdsDb, probability }: CcdfCurve): string {
  let path = '';
  for (let i = 0; i < thresholdsDb.length; i++) {
    const db = thresholdsDb[i]!;
    if (db < 0 || db > MOST_DB) continue;
    path += `${path === '' ? 'M' : 'L'}${x(db).toFixed(1)} ${y(probability[i]!).toFixed(1)}`;
    if (probability[i]! < 10 ** -DECADES) break;
  }
  return path;
}

const AXIS = { fontFamily: 'ChivoMono_400Regular', fontSize: 10, fill: color.plot.axis } as const;
const NAME = { fontFamily: 'HankenGrotesk_500Medium', fontSize: 12 } as const;

/** Samples above a power over the mean, now and after; the Gaussian's dashed beside them. */
export function PeakCcdf({ now, after }: { now: CcdfCurve; after: CcdfCurve | null }) {
  const gaussian: CcdfCurve = {
    thresholdsDb: now.thresholdsDb,
    probability: now.thresholdsDb.map((db) => Math.exp(-(10 ** (db / 10)))),
  };
  return (
    <svg width={WIDTH} height={HEIGHT} aria-hidden style={{ display: 'block', flexShrink: 0 }}>
      <rect
        x={LEFT}
        y={2}
        width={WIDTH - LEFT - 2}
        height={HEIGHT - BOTTOM - 2}
        fill={color.plot.background}
        stroke={color.rule.line}
      />
      {[2, 4, 6, 8, 10].map((db) => (
        <line key={db} x1={x(db)} x2={x(db)} y1={2} y2={HEIGHT - BOTTOM} stroke={color.plot.grid} />
      ))}
      {[0, 4, 8, 12].map((db) => (
        <text key={db} {...AXIS} x={x(db)} y={HEIGHT - 5} textAnchor={db === MOST_DB ? 'end' : 'middle'}>
          {db}
        </text>
      ))}
      {[1, 2, 3, 4].map((decade) => (
        <g key={decade}>
          <line x1={LEFT} x2={WIDTH - 2} y1={y(10 ** -decade)} y2={y(10 ** -decade)} stroke={color.plot.grid} />
          <text {...AXIS} x={LEFT - 4} y={y(10 ** -decade) + 4} textAnchor="end">
            10
            <tspan dy={-4} fontSize={8}>{`−${decade}`}</tspan>
          </text>
        </g>
      ))}
      <path d={pathOf(gaussian)} fill="none" stroke={color.plot.reference} strokeDasharray="4 3" />
      <path d={pathOf(now)} fill="none" stroke={color.plot.before} />
      <text {...NAME} x={WIDTH - 8} y={y(0.02)} textAnchor="end" fill={color.plot.before}>
        now
      </text>
      {after ? (
        <>
          <path d={pathOf(after)} fill="none" stroke={color.plot.trace} strokeWidth={1.5} />
          <text {...NAME} x={LEFT + 8} y={HEIGHT - BOTTOM - 8} fill={color.plot.trace}>
            after
          </text>
        </>
      ) : null}
    </svg>
  );
}
