import { useMemo } from 'react';
import { View } from 'react-native';
import { useWidth } from '@/components/drawing/useWidth';
import { Text } from '@/components/ui/Text';
import { color } from '@/components/ui/theme';
import { symbolTicks } from '@/lib/drawing/axis';
import { formatNumber } from '@/lib/drawing/quantities';
import type { ResultProps } from './resultProps';
import { EvmBars, type EvmBar } from './EvmBars';
import { PlotHead } from './PlotHead';

const gutterPx = 34;

/** Bars of the EVM from zero, one a symbol; where a symbol has less than 3 px its neighbours' largest stands for it. */
export function SymbolsPage({ capture, limitPercent }: ResultProps) {
  const { widthPx, onLayout } = useWidth();
  const figures = capture.evm.bySymbol;
  const count = figures.length;
  const bars = useMemo(
    () =>
      barsOf(
        figures.map(({ ratio }) => ratio),
        Math.max(1, Math.floor((widthPx - gutterPx) / 3)),
      ),
    [figures, widthPx],
  );
  const copied = () =>
    figures
      .flatMap(({ ratio, db }, l) =>
        ratio === null || db === null ? [] : [`${l}\t${(100 * ratio).toFixed(3)} %\t${db.toFixed(2)} dB`],
      )
      .join('\n');
  const ticks = widthPx > gutterPx ? symbolTicks({ from: 0, to: count, lengthPx: widthPx - gutterPx }, count, 22) : [];
  return (
    <View onLayout={onLayout}>
      <PlotHead words="EVM of each symbol, %" copied={copied} what="Symbols" />
      <View role="img" aria-label={spoken(figures.map(({ ratio }) => ratio))}>
        {widthPx > gutterPx ? (
          <>
            <EvmBars
              bars={bars}
              widthPx={widthPx}
              heightPx={150}
              gutterPx={gutterPx}
              limitPercent={limitPercent}
              gapPx={count > 60 ? 0.6 : 5}
            />
            <svg width={widthPx} height={18} aria-hidden style={{ display: 'block' }}>
              {ticks.map((tick) =>
                tick.label ? (
                  <text
                    key={tick.value}
                    x={gutterPx + tick.atPx}
                    y={13}
                    textAnchor="middle"
                    fontSize={11}
                    fontFamily="ChivoMono_400Regular"
                    fill={color.plot.axis}
                  >
                    {tick.label}
                  </text>
                ) : null,
              )}
            </svg>
          </>
        ) : (
          <View style={{ height: 168 }} />
        )}
      </View>
      {figures.every(({ ratio }) => ratio === null) ? <Text tone="quiet">No symbol alone was measured.</Text> : null}
    </View>
  );
}

/** Bars of neighbours joined so that there are at most `most`; a place without a figure has no bar. */
export function barsOf(ratios: readonly (number | null)[], most: number): EvmBar[] {
  const step = Math.max(1, Math.ceil(ratios.length / most));
  const bars: EvmBar[] = [];
  for (let first = 0; first < ratios.length; first += step) {
    const end = Math.min(ratios.length, first + step);
    let largest = -1;
    for (let i = first; i < end; i++) largest = Math.max(largest, ratios[i] ?? -1);
    if (largest >= 0) bars.push({ from: first / ratios.length, to: end / ratios.length, percent: 100 * largest });
  }
  return bars;
}

function spoken(ratios: readonly (number | null)[]): string {
  let worst = -1;
  ratios.forEach((ratio, l) => {
    if (ratio !== null && (worst < 0 || ratio > ratios[worst]!)) worst = l;
  });
  if (worst < 0) return 'No symbol was measured';
  return `EVM of ${ratios.filter((ratio) => ratio !== null).length} symbols, worst symbol ${worst} with ${formatNumber(100 * ratios[worst]!, 2)} %`;
}
