import { amplitudeOfDecibels } from '../math/exponential';
import { CLOCK_ERROR_MOST_PPM } from './clockRatio';
import type { Correlation, FoundReading, MeasuredCapture } from './types';

/** "1 frame", "11 frames". */
function counted(count: number, one: string): string {
  return `${count} ${one}${count === 1 ? '' : 's'}`;
}

const percent = (ratio: number): string => `${(100 * ratio).toFixed(ratio >= 0.1 ? 1 : ratio >= 0.001 ? 2 : 3)} %`;

/** How the EVM was taken, in sentences: frames, cells behind the channel, phase, window, and the figure before the fit's bias is taken out. */
export function recipeWords(capture: MeasuredCapture): string {
  const { channel, evm, symbols, frames } = capture;
  const parts = capture.isPartFrame ? 'part of a frame' : counted(frames, 'frame');
  const from =
    channel.source === 'oneGain'
      ? 'One gain and one delay from all known cells of one symbol: a tap for each would explain anything'
      : channel.source === 'pilots'
        ? `One tap a subcarrier from the pilots of ${counted(symbols, 'symbol')}, drawn out between them`
        : `One tap a subcarrier from all known cells of ${counted(symbols, 'symbol')}`;
  const window = `window ${counted(capture.windowAdvanceSamples, 'sample')} early`;
  const words = [
    `${parts[0]!.toUpperCase()}${parts.slice(1)} against the values sent.`,
    `${from}, one phase a symbol, ${window}.`,
  ];
  if (evm.all.uncorrectedDb !== null && evm.all.db !== null && channel.source !== 'pilots') {
    const before = amplitudeOfDecibels(evm.all.uncorrectedDb);
    words.push(`${percent(before)} before the fit’s bias is taken out.`);
  }
  if (channel.source === 'pilots') words.push('The noise of the taps is in the figure.');
  return words.join(' ');
}

/** Which symbols were measured where not all of them were; null where all were. Ranges, counted from 0. */
export function measuredSymbolsWords(capture: MeasuredCapture): string | null {
  const { symbolCounts } = capture;
  const ranges: string[] = [];
  for (let i = 0; i < symbolCounts.length;) {
    if (symbolCounts[i] === 0) {
      i++;
      continue;
    }
    let end = i;
    while (end + 1 < symbolCounts.length && symbolCounts[end + 1]! > 0) end++;
    ranges.push(end === i ? `${i}` : `${i} to ${end}`);
    i = end + 1;
  }
  if (ranges.length === 1 && ranges[0] === (symbolCounts.length === 1 ? '0' : `0 to ${symbolCounts.length - 1}`))
    return null;
  const shown = ranges.length > 6 ? [...ranges.slice(0, 6), 'and others'] : ranges;
  return `The capture holds whole ${ranges.length === 1 && !ranges[0]!.includes(' ') ? 'symbol' : 'symbols'} ${shown.join(', ')} only; of the others there is no figure.`;
}

/** Why a capture was not measured though its ρ is enough, to be said behind that ρ; null where ρ is too small. `option`: how to name the clock. */
export function notFollowedWords({ value, needed }: Correlation, option = ''): string | null {
  return value < needed
    ? null
    : `at one place, but the symbols around it could not be followed: is its clock as said${option}, within ${CLOCK_ERROR_MOST_PPM} ppm?`;
}

/** Where a clock error is beyond what one clock may be off; null within. */
export function clockBeyondWords(clockErrorPpm: number): string | null {
  return Math.abs(clockErrorPpm) > CLOCK_ERROR_MOST_PPM
    ? `beyond the ${CLOCK_ERROR_MOST_PPM} ppm that one clock may be off; name the capture's clock`
    : null;
}

/** What was wrong with the bytes or the axes, in a sentence; null where the plain reading was right. */
export function causeWords(found: FoundReading, readingWords: string): string | null {
  const mirrored =
    'The spectrum is mirrored: I and Q are swapped, or Q is negated, or a mixer stands above the carrier; a receiver cannot tell which.';
  const bytes = `The capture was understood ${readingWords}: its layout is another one than was set.`;
  if (readingWords === '') return found.isMirrored ? mirrored : null;
  return found.isMirrored ? `${bytes} ${mirrored}` : bytes;
}
