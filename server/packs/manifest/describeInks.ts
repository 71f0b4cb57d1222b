import type { Manifest } from '@/lib/document/manifestSchema';
import { bitsPerCell, pointsOf, type CellValues, type DataValue, type Ink } from '@/lib/synth';
import { listedRepeats, usedStreams, type PayloadCount } from '../entryChunks.ts';
import { describeFactor, describeSource } from './describeSequences.ts';

type InkReport = Manifest['inks'][number];
type StreamReport = Manifest['streams'][number];

const mapSource = {
  ts38211: '3GPP TS 38.211, 5.1',
  ieee80211: 'IEEE Std 802.11, 17.3.5.8',
  en300744: 'ETSI EN 300 744, 4.3.5',
} as const;

function mapWords({ constellation, bitMap }: DataValue): string {
  if (constellation === '4096qam') return `continues the Gray rule of ${mapSource[bitMap]}; no clause defines 4096-QAM`;
  const turned = constellation === 'pi2-bpsk' ? ': points of an even index, an odd one is turned by +90°' : '';
  return `${mapSource[bitMap]}${turned}`;
}

function describeMap(value: DataValue): NonNullable<InkReport['map']> {
  const points = pointsOf(value.constellation, value.bitMap);
  const bitsEach = bitsPerCell(value.constellation);
  return {
    constellation: value.constellation,
    bitMap: value.bitMap,
    bitsPerCell: bitsEach,
    words: mapWords(value),
    points: Array.from({ length: 1 << bitsEach }, (_, word) => ({
      bits: word.toString(2).padStart(bitsEach, '0'),
      i: points[2 * word]!,
      q: points[2 * word + 1]!,
    })),
  };
}

function describeInk(ink: Ink, cells: number): InkReport {
  const hasFactors = ink.role === 'pilot' || ink.role === 'tone';
  return {
    inkId: ink.inkId,
    name: ink.name,
    role: ink.role,
    powerDb: ink.powerDb,
    cells,
    streamId: ink.role === 'data' ? ink.value.streamId : null,
    map: ink.role === 'data' ? describeMap(ink.value) : null,
    factors: hasFactors ? ink.value.factors.map(describeFactor) : [],
    phaseDeg: ink.role === 'tone' ? ink.value.phaseDeg : null,
    continuous: ink.role === 'tone' ? ink.value.continuous : null,
  };
}

/** Every ink of the tray, used or not, with the cells that one repeat has of it. */
export function describeInks(values: CellValues): InkReport[] {
  const cellsOfInk = values.content.tray.map(() => 0);
  for (const ink of values.cells) cellsOfInk[ink]!++;
  return values.content.tray.map((ink, number) => describeInk(ink, cellsOfInk[number]!));
}

export const payloadName = (stream: number): string => `payload-s${stream}.bin`;

export function describeStreams(values: CellValues, counts: Map<number, PayloadCount>): StreamReport[] {
  const used = new Set(usedStreams(values));
  return values.content.streams.map((stream, number) => {
    const count = counts.get(number);
    return {
      streamId: stream.streamId,
      name: stream.name,
      source: describeSource(stream.source),
      fill: stream.fill,
      acrossRepeats: stream.acrossRepeats,
      fileName: used.has(number) ? payloadName(number) : null,
      repeats: used.has(number) ? listedRepeats(values) : 0,
      bits: count?.bits ?? 0,
      ones: count?.ones ?? 0,
    };
  });
}
