import type { Href } from 'expo-router';
import { formatNumber } from '@/lib/drawing/quantities';
import type { WaveformItem } from '@/lib/contracts/waveforms';

/** Figures of a row as the list shows them; a figure still being measured says so. */
export function itemFigures(item: WaveformItem): { clockMhz: string; spanMhz: string; paprDb: string } {
  const { numbers, measured, measureFailed } = item.figures;
  return {
    clockMhz: formatNumber(numbers.sampleClockHz / 1e6, 2, true),
    spanMhz: numbers.paintedSpanHz === null ? 'none' : formatNumber(numbers.paintedSpanHz / 1e6, 2, true),
    paprDb:
      measured === null
        ? measureFailed === null
          ? 'measuring'
          : 'none'
        : measured.paprDb === null
          ? 'none'
          : formatNumber(measured.paprDb, 2, true),
  };
}

/** What stands under a title: what waits for the reader, an edition that stands while the head moved on, a reason. */
export function itemAside(item: WaveformItem): { words: string; isCall: boolean } | null {
  if (item.waitsForYourReview) return { words: 'Waits for your review', isCall: true };
  if (item.stamp.state === 'withdrawn' && item.withdrawnReason)
    return { words: `Reason: ${item.withdrawnReason}`, isCall: false };
  if (item.newestEdition && item.stamp.state !== 'released')
    return { words: `Edition ${item.newestEdition.number} stands`, isCall: false };
  if (item.stamp.cameBack === 'returned' && item.stamp.reason)
    return { words: `Returned: ${item.stamp.reason}`, isCall: false };
  return null;
}

/** Where a row leads: what waits for a review to the review, a drawing to its table, an edition to its page. */
export function waveformHref(item: WaveformItem, readsDrafts: boolean): Href {
  const params = { waveformId: item.waveformId };
  if (item.waitsForYourReview) return { pathname: '/waveforms/[waveformId]/review', params };
  return readsDrafts
    ? { pathname: '/waveforms/[waveformId]', params }
    : { pathname: '/waveforms/[waveformId]/history', params };
}
