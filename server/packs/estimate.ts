import {
  bitsPerCell,
  createCellCensus,
  deriveFigures,
  vectorBytes,
  type BenchContent,
  type WaveformContent,
} from '@/lib/synth';

/** Texts, figures and heads: never more than this beside the large entries. */
const textBytes = 4 * 1024 * 1024;
const mostPayloadBits = 2 ** 27;

/** Room that making a pack takes for each byte of it: the vector by itself, then the zip with its copy, and something to spare. */
export const roomRatio = 2.2;

/** Upper bound of a pack's bytes, known before anything is rendered. */
export function packBytesOf(content: WaveformContent, bench: BenchContent): number {
  const { fileSamples } = deriveFigures(content);
  const census = createCellCensus(content);
  let usedCells = 0;
  let bits = 0;
  content.tray.forEach((ink, number) => {
    if (ink.role === 'null') return;
    const cells = census.cellsOfInk[number] ?? 0;
    usedCells += cells;
    if (ink.role === 'data') bits += cells * bitsPerCell(ink.value.constellation);
  });
  const restarts = content.streams.every((stream) => stream.acrossRepeats === 'restart');
  const repeats =
    restarts || bits === 0 ? 1 : Math.max(1, Math.min(content.timing.repeats, Math.floor(mostPayloadBits / bits)));
  // as they are meant, and where a peak is lowered as they are sent
  const referenceBytes = content.peakReduction.kind === 'none' ? 8 : 16;
  const markerBytes = content.markers.length > 0 && bench.markers.packing === 'bytes' ? fileSamples : 0;
  return vectorBytes(content, bench) + markerBytes + repeats * (usedCells * referenceBytes + bits / 8) + textBytes;
}
