import { useMemo } from 'react';
import { View } from 'react-native';
import { Straightedge } from '@/components/drawing/Straightedge';
import { useWidth } from '@/components/drawing/useWidth';
import { formatNumber } from '@/lib/drawing/quantities';
import type { ResultProps } from './resultProps';
import { EvmBars } from './EvmBars';
import { PlotHead } from './PlotHead';
import { barsOf } from './SymbolsPage';

const gutterPx = 34;

/** The painted span in positions, with a little air. */
export function spanOf(ratios: readonly unknown[], isThere: (value: never) => boolean): { from: number; to: number } {
  const there = ratios.map((value) => isThere(value as never));
  const first = there.indexOf(true);
  const last = there.lastIndexOf(true);
  if (first < 0) return { from: 0, to: ratios.length };
  const air = Math.max(1, Math.round(0.02 * (last - first)));
  return { from: Math.max(0, first - air), to: Math.min(ratios.length, last + 1 + air) };
}

/** EVM of each subcarrier over the grid's own axis. */
export function SubcarriersPage({ capture, content, limitPercent }: ResultProps) {
  const { widthPx, onLayout } = useWidth();
  const figures = capture.evm.bySubcarrier;
  const ratios = useMemo(() => figures.map(({ ratio }) => ratio), [figures]);
  const band = useMemo(() => spanOf(ratios, (ratio: number | null) => ratio !== null), [ratios]);
  const width = Math.max(0, widthPx - gutterPx);
  const bars = useMemo(() => barsOf(ratios.slice(band.from, band.to), Math.max(1, width)), [ratios, band, width]);
  const half = Math.floor(content.fftSize / 2);
  const copied = () =>
    ratios.flatMap((ratio, p) => (ratio === null ? [] : [`${p - half}\t${(100 * ratio).toFixed(3)} %`])).join('\n');
  return (
    <View onLayout={onLayout}>
      <PlotHead words="EVM of each subcarrier, %" copied={copied} what="Subcarriers" />
      <View role="img" aria-label={spoken(ratios, half)}>
        {width > 0 ? (
          <>
            <EvmBars
              bars={bars}
              widthPx={widthPx}
              heightPx={150}
              gutterPx={gutterPx}
              limitPercent={limitPercent}
              gapPx={0}
            />
            <Straightedge
              band={band}
              widthPx={width}
              fftSize={content.fftSize}
              spacingHz={content.subcarrierSpacingHz[0] / content.subcarrierSpacingHz[1]}
              gutterPx={gutterPx}
            />
          </>
        ) : (
          <View style={{ height: 184 }} />
        )}
      </View>
    </View>
  );
}

function spoken(ratios: readonly (number | null)[], half: number): string {
  let worst = -1;
  ratios.forEach((ratio, p) => {
    if (ratio !== null && (worst < 0 || ratio > ratios[worst]!)) worst = p;
  });
  if (worst < 0) return 'No subcarrier was measured';
  return `EVM of ${ratios.filter((ratio) => ratio !== null).length} subcarriers, worst subcarrier ${worst - half} with ${formatNumber(100 * ratios[worst]!, 2)} %`;
}
