import { formatNumber } from '@/lib/drawing/quantities';

/** A sign always, since both ways mean something. */
export function signedText(sign: number, value: string): string {
  return `${sign < 0 ? '−' : '+'}${value}`;
}

/** "meets 3.0", "fails by 0.4 %": null without a limit or a figure. */
export function verdictOf(ratio: number | null, limitPercent: number | null): { isMet: boolean; words: string } | null {
  if (ratio === null || limitPercent === null) return null;
  const percent = 100 * ratio;
  return percent <= limitPercent
    ? { isMet: true, words: `meets ${limitText(limitPercent)}` }
    : { isMet: false, words: `fails by ${formatNumber(percent - limitPercent, 2)} %` };
}

export const percentOf = (ratio: number): string => {
  const percent = 100 * ratio;
  return formatNumber(percent, percent >= 10 ? 1 : percent >= 0.1 ? 2 : 3, true);
};

/** A limit as people say it: "3.0", "0.25". */
export const limitText = (percent: number): string =>
  formatNumber(percent, Number.isInteger(10 * percent) ? 1 : 3, Number.isInteger(10 * percent));
