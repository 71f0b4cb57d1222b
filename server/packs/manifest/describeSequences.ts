import type { Manifest } from '@/lib/document/manifestSchema';
import {
  createBitSource,
  createSequence,
  sequenceValue,
  type Factor,
  type PayloadSource,
  type Sequence,
} from '@/lib/synth';

type FactorReport = Manifest['inks'][number]['factors'][number];
type SourceReport = Manifest['streams'][number]['source'];

const listedBits = 32;
const listedPoints = 8;

/** b(t) = XOR of b(t − tap), as the polynomial that recommendations print. */
const polynomialOf = (taps: number[]): string =>
  [...taps]
    .reverse()
    .map((tap) => (tap === 1 ? 'x' : `x^${tap}`))
    .concat('1')
    .join(' + ');

const goldPolynomials = 'x^31 + x^3 + 1 and x^31 + x^3 + x^2 + x + 1';

function firstBits(source: PayloadSource): string {
  const bits = createBitSource(source);
  return Array.from({ length: listedBits }, (_, i) => bits.bit(i)).join('');
}

function sourceWords(source: PayloadSource): string {
  switch (source.kind) {
    case 'pn':
      return `register of ${source.stages} stages, b(t) = XOR of b(t − tap) over taps ${source.taps.join(', ')}; the seed's bit i is output bit i${source.inverted ? '; the output is inverted' : ''}`;
    case 'gold':
      return 'length-31 Gold sequence c(n), N_C = 1600, second register set to cInit';
    case 'zeros':
      return 'zeros';
    case 'ones':
      return 'ones';
    case 'pattern':
      return `a pattern of ${source.bits.length} bits, repeated`;
    case 'uploaded':
      return `${source.bitCount} uploaded bits (${source.name}), repeated`;
  }
}

/** Polynomial, seed and inversion where a source has them; what a stranger needs to make the bits again. */
export function describeSource(source: PayloadSource): SourceReport {
  return {
    kind: source.kind,
    words: sourceWords(source),
    polynomial: source.kind === 'pn' ? polynomialOf(source.taps) : source.kind === 'gold' ? goldPolynomials : null,
    seed: source.kind === 'pn' ? source.seed : source.kind === 'gold' ? source.cInit : null,
    inverted: source.kind === 'pn' ? source.inverted : null,
    first32Bits: firstBits(source),
  };
}

function sequenceWords(sequence: Sequence): string {
  switch (sequence.kind) {
    case 'constant':
      return '1';
    case 'alternating':
      return '(−1)^i';
    case 'pn':
      return `1 − 2b(i), ${sourceWords(sequence)}`;
    case 'gold':
      return sequence.points === 'bpsk'
        ? `1 − 2c(i), ${sourceWords({ kind: 'gold', cInit: sequence.cInit })}`
        : `((1 − 2c(2i)) + j(1 − 2c(2i + 1)))/√2, ${sourceWords({ kind: 'gold', cInit: sequence.cInit })}`;
    case 'zadoffChu':
      return `e^(−jπ·${sequence.root}·m(m + ${sequence.length % 2})/${sequence.length}), m = (i + ${sequence.shift}) mod ${sequence.length}`;
    case 'newman':
      return `e^(jπi²/${sequence.count})`;
    case 'schroeder':
      return `e^(−jπi(i + 1)/${sequence.count})`;
    case 'listed':
      return `${sequence.points.length} listed values, repeated (document.combwright.json has them)`;
  }
}

export function describeFactor(factor: Factor): FactorReport {
  const { sequence } = factor;
  const source: PayloadSource | null =
    sequence.kind === 'pn' ? sequence : sequence.kind === 'gold' ? { kind: 'gold', cInit: sequence.cInit } : null;
  const bits = source ? describeSource(source) : null;
  const values = createSequence(sequence);
  return {
    counter: factor.counter,
    start: factor.start,
    sequence: {
      kind: sequence.kind,
      words: sequenceWords(sequence),
      polynomial: bits?.polynomial ?? null,
      seed: bits?.seed ?? null,
      inverted: bits?.inverted ?? null,
      first32Bits: bits?.first32Bits ?? null,
      firstPoints: Array.from({ length: listedPoints }, (_, i) => plainPoint(sequenceValue(values, i))),
    },
  };
}

/** No −0 in a file that people compare. */
const plainPoint = ([re, im]: [number, number]): [number, number] => [re + 0, im + 0];
