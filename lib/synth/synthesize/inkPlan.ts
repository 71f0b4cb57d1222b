import { demand } from '../errors';
import { bitsPerCell, pointsOf } from '../mapping/constellations';
import { createPair, divide } from '../math/doubleDouble';
import { amplitudeOfDecibels } from '../math/exponential';
import { writeUnitOfTurns } from '../math/turns';
import { createSequence, type ValueSequence } from '../sequences/sequence';
import type { Counter, Factor, Ink, WaveformContent } from '../types';

/** A factor made ready: its sequence and where its index comes from. */
export interface FactorPlan {
  sequence: ValueSequence;
  counter: Counter;
  start: number;
}

/** One ink made ready for writing values. */
export type InkPlan =
  | { kind: 'silent' }
  | {
      kind: 'data';
      /** Bits a cell. */
      bits: number;
      /** Number of the payload stream in `content.streams`. */
      stream: number;
      /** Points times amplitude, interleaved by bit word; π/2-BPSK has four: two for an even, two for an odd index. */
      points: Float64Array;
      isHalfTurning: boolean;
    }
  | {
      kind: 'value';
      re: number;
      im: number;
      factors: FactorPlan[];
      /** Cells of this ink before the symbol are counted. */
      needsCellCount: boolean;
      isContinuous: boolean;
    };

function planFactors(factors: Factor[]): FactorPlan[] {
  return factors.map(({ sequence, counter, start }) => ({ sequence: createSequence(sequence), counter, start }));
}

function planInk(ink: Ink, content: WaveformContent, gain: number): InkPlan {
  const amplitude = amplitudeOfDecibels(ink.powerDb) * gain;
  switch (ink.role) {
    case 'null':
    case 'reserved':
      return { kind: 'silent' };
    case 'data': {
      const { constellation, bitMap, streamId } = ink.value;
      const stream = content.streams.findIndex((candidate) => candidate.streamId === streamId);
      demand(stream >= 0, 'bad_content', `Ink ${ink.name} names a stream that is not there.`);
      const isHalfTurning = constellation === 'pi2-bpsk';
      const even = pointsOf(constellation, bitMap);
      for (let i = 0; i < even.length; i++) even[i]! *= amplitude;
      const points = isHalfTurning ? Float64Array.of(...even, -even[1]!, even[0]!, -even[3]!, even[2]!) : even;
      return { kind: 'data', bits: bitsPerCell(constellation), stream, points, isHalfTurning };
    }
    case 'pilot': {
      const factors = planFactors(ink.value.factors);
      const needsCellCount = factors.some((factor) => factor.counter === 'cell');
      return { kind: 'value', re: amplitude, im: 0, factors, needsCellCount, isContinuous: false };
    }
    case 'tone': {
      const turns = createPair();
      divide(ink.value.phaseDeg % 360, 360, turns);
      const unit = new Float64Array(2);
      writeUnitOfTurns(turns[0]!, turns[1]!, unit, 0);
      return {
        kind: 'value',
        re: unit[0]! * amplitude,
        im: unit[1]! * amplitude,
        factors: planFactors(ink.value.factors),
        needsCellCount: false,
        isContinuous: ink.value.continuous,
      };
    }
  }
}

/** The content's inks made ready, every amplitude times `gain`. Throws SynthError `bad_content` for a broken tray. */
export function planInks(content: WaveformContent, gain: number): InkPlan[] {
  return content.tray.map((ink) => planInk(ink, content, gain));
}
