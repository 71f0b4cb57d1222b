import { color } from '@/components/ui/theme';
import { formatNumber } from '@/lib/drawing/quantities';
import type { LevelCard } from '@/lib/synth';

interface Mark {
  dbm: number;
  isLimit: boolean;
  kind: 'peakLimit' | 'peak' | 'meanLimit' | 'mean';
}

const words: Record<Mark['kind'], string> = {
  peakLimit: 'Peak limit',
  peak: 'Peak now',
  meanLimit: 'Mean limit',
  mean: 'Mean',
};
const labelPx: Record<Mark['kind'], number> = { peakLimit: 22, peak: 50, meanLimit: 22, mean: 30 };
const textFace = 'HankenGrotesk_600SemiBold';
const figureFace = 'ChivoMono_500Medium';

/** Places for the labels under their lines, pushed down where two lines stand closer than a label is high. */
function placesOf(marks: readonly Mark[], y: (dbm: number) => number): number[] {
  const places: number[] = [];
  let free = 0;
  for (const mark of marks) {
    const at = Math.max(y(mark.dbm) + 2, free);
    places.push(at);
    free = at + labelPx[mark.kind];
  }
  return places;
}

/** Limits and levels at the device on one dB scale, at their true places; what is left stands as brackets. */
export function LevelScale({ card, widthPx, heightPx }: { card: LevelCard; widthPx: number; heightPx: number }) {
  const given: [Mark['kind'], number | null, boolean][] = [
    ['peakLimit', card.peakLimitDbm, true],
    ['peak', card.peakNowDbm, false],
    ['meanLimit', card.meanLimitDbm, true],
    ['mean', card.meanNowDbm, false],
  ];
  const marks = given
    .flatMap(([kind, dbm, isLimit]): Mark[] => (dbm === null ? [] : [{ kind, dbm, isLimit }]))
    .sort((a, b) => b.dbm - a.dbm);
  if (marks.length === 0) return null;
  const highest = marks[0]!.dbm;
  const lowest = marks.at(-1)!.dbm;
  const span = Math.max(6, highest - lowest);
  const top = highest + 0.06 * span;
  const bottom = lowest - 0.1 * span;
  const scaleHeight = heightPx;
  const y = (dbm: number) => 8 + ((top - dbm) / (top - bottom)) * (scaleHeight - 12);
  const places = placesOf(marks, y);
  const height = Math.max(scaleHeight, places.at(-1)! + labelPx[marks.at(-1)!.kind] + 4);
  const step = span > 24 ? 10 : span > 12 ? 4 : 2;
  const ticks = Array.from({ length: Math.floor(top - bottom) + 1 }, (_, i) => Math.ceil(bottom) + i).filter(
    (v) => v <= top,
  );
  const right = widthPx - 10;
  return (
    <svg width={widthPx} height={height} aria-hidden style={{ display: 'block' }}>
      <Bar card={card} y={y} bottom={scaleHeight - 4} />
      {ticks.map((dbm) => {
        const named = dbm % step === 0;
        return (
          <g key={dbm}>
            <line
              x1={named ? 40 : 46}
              x2={52}
              y1={Math.round(y(dbm)) + 0.5}
              y2={Math.round(y(dbm)) + 0.5}
              stroke={color.plot.axis}
            />
            {named ? (
              <text x={36} y={y(dbm) + 4} textAnchor="end" fontSize={11} fontFamily={figureFace} fill={color.plot.axis}>
                {formatNumber(dbm)}
              </text>
            ) : null}
          </g>
        );
      })}
      {marks.map((mark) => (
        <Line key={mark.kind} mark={mark} lineY={Math.round(y(mark.dbm)) + 0.5} right={right} />
      ))}
      {marks.map((mark, i) => (
        <Level key={mark.kind} mark={mark} labelY={places[i]!} />
      ))}
      {card.peakLeftDb !== null && card.peakLeftDb > 0 ? (
        <Left leftDb={card.peakLeftDb} from={y(card.peakLimitDbm!)} to={y(card.peakNowDbm!)} right={right} />
      ) : null}
      {card.meanLeftDb !== null && card.meanLeftDb > 0 ? (
        <Left leftDb={card.meanLeftDb} from={y(card.meanLimitDbm!)} to={y(card.meanNowDbm!)} right={right} />
      ) : null}
    </svg>
  );
}

function Bar({ card, y, bottom }: { card: LevelCard; y: (dbm: number) => number; bottom: number }) {
  const { peakLimitDbm: limit, peakNowDbm: peak, meanNowDbm: mean } = card;
  const part = (from: number, to: number, fill: string) =>
    to > from ? <rect x={52} y={from} width={14} height={to - from} fill={fill} /> : null;
  return (
    <g>
      {limit !== null && peak !== null ? part(y(limit), y(peak), color.plot.traceFill) : null}
      {peak !== null
        ? part(
            y(peak),
            mean === null ? bottom : y(mean),
            card.verdict === 'over' ? color.danger.solid : color.plot.point,
          )
        : null}
      {mean !== null ? part(y(mean), bottom, color.plot.trace) : null}
      <rect x={52.5} y={4.5} width={14} height={bottom - 4} fill="none" stroke={color.ink.strong} />
    </g>
  );
}

function Line({ mark, lineY, right }: { mark: Mark; lineY: number; right: number }) {
  return (
    <line
      x1={52}
      x2={right}
      y1={lineY}
      y2={lineY}
      stroke={mark.isLimit ? color.plot.limit : color.plot.trace}
      strokeWidth={mark.kind === 'peakLimit' ? 2 : 1.25}
      strokeDasharray={mark.kind === 'meanLimit' ? '4 3' : undefined}
    />
  );
}

/** A name and its level under its line; paper round the letters keeps them legible where another line passes. */
function Level({ mark, labelY }: { mark: Mark; labelY: number }) {
  const tone = mark.isLimit ? color.danger.text : color.ink.body;
  const large = mark.kind === 'peak' ? 34 : mark.kind === 'mean' ? 22 : 14;
  const value = formatNumber(mark.dbm, 2, true);
  const firstLine = labelY + 13;
  return (
    <g style={{ paintOrder: 'stroke', stroke: color.surface.raised, strokeWidth: 4 }}>
      <text x={88} y={mark.kind === 'mean' ? labelY + 21 : firstLine} fontSize={13} fontFamily={textFace} fill={tone}>
        {words[mark.kind]}
        {mark.kind === 'peak' ? null : (
          <tspan dx={8} fontFamily={figureFace} fontSize={large} fill={mark.isLimit ? tone : color.ink.strong}>
            {value}
          </tspan>
        )}
        {mark.kind === 'peak' ? null : (
          <tspan dx={6} fontFamily={textFace} fontSize={13} fill={mark.isLimit ? tone : color.ink.quiet}>
            dBm
          </tspan>
        )}
      </text>
      {mark.kind === 'peak' ? (
        <text x={88} y={labelY + 43} fontSize={34} fontFamily={figureFace} letterSpacing={-0.8} fill={color.ink.strong}>
          {value}
          <tspan dx={6} fontSize={14} letterSpacing={0} fontFamily={textFace} fill={color.ink.quiet}>
            dBm
          </tspan>
        </text>
      ) : null}
    </g>
  );
}

function Left({ leftDb, from, to, right }: { leftDb: number; from: number; to: number; right: number }) {
  const [a, b] = [from + 2, to - 1];
  return b - a < 6 ? null : (
    <g>
      <path d={`M${right - 16} ${a}H${right - 10}V${b}H${right - 16}`} fill="none" stroke={color.plot.axis} />
      <text
        x={right - 22}
        y={Math.max((a + b) / 2 + 4, a + 12)}
        textAnchor="end"
        fontSize={11}
        fontFamily={figureFace}
        fill={color.ink.strong}
      >
        {`left ${formatNumber(leftDb, 2, true)} dB`}
      </text>
    </g>
  );
}
