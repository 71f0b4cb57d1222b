import {
  createImpairedCapture,
  createReception,
  noImpairments,
  type CaptureOptions,
  type CaptureResult,
  type Impairments,
  type MeasuredCapture,
  type SampleSource,
  type WaveformContent,
} from '@/lib/synth';
import { dataInk, factor, NULL_INK, pilotInk, pnStream, rowOf, smallContent } from './content';
import { render } from './measures';

/** 64-QAM with a QPSK pilot on every sixth subcarrier, subcarriers ±reach without DC. */
export function ofdmContent(
  fftSize: number,
  reach: number,
  symbolCount: number,
  prefix: number,
  changes: Partial<WaveformContent> = {},
): WaveformContent {
  return smallContent({
    fftSize,
    symbolCount,
    prefixSamples: [prefix],
    tray: [
      NULL_INK,
      dataInk(1, { constellation: '64qam', bitMap: 'ts38211', streamId: 's0' }),
      pilotInk(2, [factor({ kind: 'gold', cInit: 77, points: 'qpsk' }, 'cell')]),
    ],
    streams: [pnStream(0)],
    grid: {
      rows: [rowOf(fftSize, (k) => (k === 0 || Math.abs(k) > reach ? 0 : k % 6 === 0 ? 2 : 1))],
      rowOfSymbol: new Array<number>(symbolCount).fill(0),
    },
    ...changes,
  });
}

export const clockOf = ({ fftSize, oversampling, subcarrierSpacingHz: [hz, per] }: WaveformContent): number =>
  (fftSize * oversampling * hz) / per;

/** Samples held in memory. */
export function sourceOf(data: Float64Array): SampleSource {
  return {
    samples: data.length / 2,
    read: (first, count, out) => out.set(data.subarray(2 * first, 2 * (first + count))),
  };
}

/** `count` samples of a content's vector after what `impairments` says. */
export function captureOf(content: WaveformContent, impairments: Partial<Impairments>, count: number): Float64Array {
  const vector = render(content);
  const capture = createImpairedCapture(
    {
      source: sourceOf(vector),
      clockHz: clockOf(content),
      mode: content.timing.mode,
      meanPower: vector.reduce((sum, value) => sum + value * value, 0) / (vector.length / 2),
      usedTurns: 0.46 / content.oversampling,
    },
    { ...noImpairments, ...impairments },
  );
  const samples = new Float64Array(2 * count);
  capture.read(count, samples);
  return samples;
}

export function receiveOf(
  content: WaveformContent,
  data: Float64Array,
  options: Partial<CaptureOptions> = {},
): CaptureResult {
  return createReception({
    content,
    readings: [sourceOf(data)],
    clockHz: null,
    channel: 'allKnown',
    hasRails: false,
    ...options,
  }).result();
}

/** As receiveOf, for captures that have to be measured. */
export function measuredOf(
  content: WaveformContent,
  data: Float64Array,
  options: Partial<CaptureOptions> = {},
): MeasuredCapture {
  const result = receiveOf(content, data, options);
  if (result.kind !== 'measured') throw new Error(`Not measured: ${JSON.stringify({ ...result, curve: null })}`);
  return result;
}

/** Samples of one repeat of a content without a gap. */
export function frameSamplesOf({ symbolCount, fftSize, prefixSamples, oversampling }: WaveformContent): number {
  let sum = 0;
  for (let l = 0; l < symbolCount; l++) sum += fftSize + prefixSamples[l % prefixSamples.length]!;
  return sum * oversampling;
}
