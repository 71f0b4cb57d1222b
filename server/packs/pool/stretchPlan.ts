import {
  frameLayout,
  repeatCopies,
  stretchEnd,
  type BenchContent,
  type FrameLayout,
  type WaveformContent,
} from '@/lib/synth';

/** Samples from…end−1 of a file. */
export interface Stretch {
  from: number;
  end: number;
}

/** Part of a file: rendered, or as often again as `times` says what stands before it. */
export interface FilePiece extends Stretch {
  /** How often the words of this piece stand in the file. */
  times: number;
}

/** A file in its order: what is rendered, then copies of `cycle`, then what is rendered behind them. */
export interface FilePlan {
  layout: FrameLayout;
  /** Before the copies, in order; a piece is counted as often as its words stand in the file. */
  head: FilePiece[];
  /** Null where no repeat has the words of an earlier one. Copies: the samples copies.from…end−1, each `cycleSamples` after its original. */
  copies: (Stretch & { cycleSamples: number }) | null;
  tail: FilePiece[];
}

/** Samples a task takes: a third of a second's work at the most, a megabyte of words. */
const STRETCH_SAMPLES = 1 << 18;
/** A task's first symbol may be rendered twice (for its suffix): that is little of this many. */
const LEAST_SYMBOLS = 8;

/** The plan of a content's samples, from the document alone: no number of threads is in it. `oversampling` as in frameLayout. */
export function planFile(content: WaveformContent, oversampling = content.oversampling): FilePlan {
  const layout = frameLayout(content, oversampling);
  const { samples, repeats, repeatSamples } = layout;
  const found = repeatCopies(content, oversampling);
  if (found === null) return { layout, head: [{ from: 0, end: samples, times: 1 }], copies: null, tail: [] };
  const { firstAlike, period } = found;
  const copied = repeats - firstAlike - period;
  const times = Math.floor(copied / period);
  const rest = copied - times * period;
  const at = (repeat: number): number => repeat * repeatSamples;
  const pieces: FilePiece[] = [
    { from: 0, end: at(firstAlike), times: 1 },
    { from: at(firstAlike), end: at(firstAlike + rest), times: times + 2 },
    { from: at(firstAlike + rest), end: at(firstAlike + period), times: times + 1 },
  ];
  const isThere = ({ from, end }: Stretch): boolean => end > from;
  return {
    layout,
    head: pieces.filter(isThere),
    copies: { from: at(firstAlike + period), end: at(repeats), cycleSamples: at(period) },
    tail: [{ from: at(repeats), end: samples, times: 1 }].filter(isThere),
  };
}

/** Most samples of a task on a rendering of this layout, a multiple of 128. */
export const stretchMost = ({ usefulSamples }: FrameLayout): number =>
  Math.max(STRETCH_SAMPLES, LEAST_SYMBOLS * Math.ceil(usefulSamples / 128) * 128);

/** A piece in stretches that end behind symbols. */
export function* cutPiece(layout: FrameLayout, piece: Stretch): Generator<Stretch> {
  for (let from = piece.from; from < piece.end;) {
    const end = Math.min(piece.end, stretchEnd(layout, from, stretchMost(layout)));
    yield { from, end };
    from = end;
  }
}

/** A piece in stretches of equal length; the first begins where the piece does. */
export function* cutEvenly(layout: FrameLayout, piece: Stretch): Generator<Stretch> {
  const most = stretchMost(layout);
  for (let from = piece.from; from < piece.end; from += most) yield { from, end: Math.min(piece.end, from + most) };
}

/** A content's vector with the marker bits that its layout may have in the words: marks need not repeat as samples do. */
export function planVector(content: WaveformContent, bench: BenchContent): FilePlan {
  if (bench.markers.packing !== 'lowBits' || content.markers.length === 0) return planFile(content);
  const layout = frameLayout(content);
  return { layout, head: [{ from: 0, end: layout.samples, times: 1 }], copies: null, tail: [] };
}
