import type { Constellation, DataValue, Factor, Ink, Sequence, Stream } from '@/lib/synth';
import { isMapKnown } from '@/lib/synth';

/** An ink as its form holds it: what other roles would have is kept while the role is changed to and fro. */
export interface InkDraft {
  role: Exclude<Ink['role'], 'null'>;
  name: string;
  powerDb: number;
  data: DataValue;
  factors: Factor[];
  phaseDeg: number;
  continuous: boolean;
}

const FIRST_FACTOR: Factor = {
  sequence: { kind: 'gold', cInit: 0, points: 'qpsk' },
  counter: 'subcarrier',
  start: 0,
};

export const CONSTELLATIONS: readonly { value: Constellation; label: string; small: string }[] = [
  { value: 'bpsk', label: 'BPSK', small: '' },
  { value: 'pi2-bpsk', label: 'π/2-BPSK', small: '' },
  { value: 'qpsk', label: 'QPSK', small: '' },
  { value: '16qam', label: '16', small: 'QAM' },
  { value: '64qam', label: '64', small: 'QAM' },
  { value: '256qam', label: '256', small: 'QAM' },
  { value: '1024qam', label: '1024', small: 'QAM' },
  { value: '4096qam', label: '4096', small: 'QAM' },
];

export function draftOf(ink: Ink | null, streams: readonly Stream[]): InkDraft {
  const draft: InkDraft = {
    role: ink === null || ink.role === 'null' ? 'data' : ink.role,
    name: ink?.name ?? '',
    powerDb: ink?.powerDb ?? 0,
    data: { constellation: 'qpsk', bitMap: 'ts38211', streamId: streams[0]?.streamId ?? 's0' },
    factors: [FIRST_FACTOR],
    phaseDeg: 0,
    continuous: true,
  };
  if (ink?.role === 'data') draft.data = ink.value;
  if (ink?.role === 'pilot' || ink?.role === 'tone') draft.factors = ink.value.factors;
  if (ink?.role === 'tone') {
    draft.phaseDeg = ink.value.phaseDeg;
    draft.continuous = ink.value.continuous;
  }
  return draft;
}

export type InkBody = Ink extends infer T ? (T extends Ink ? Omit<T, 'inkId'> : never) : never;

/** The draft as an ink; a tone's counters must not depend on other cells, so others are read as the subcarrier. */
export function bodyOf(draft: InkDraft): InkBody {
  const { role, powerDb } = draft;
  const name = draft.name.trim().normalize('NFC');
  switch (role) {
    case 'data':
      return { role, name, powerDb, value: draft.data };
    case 'pilot':
      return { role, name, powerDb, value: { factors: draft.factors.length > 0 ? draft.factors : [FIRST_FACTOR] } };
    case 'tone':
      return {
        role,
        name,
        powerDb,
        value: { factors: draft.factors.map(toneFactor), phaseDeg: draft.phaseDeg, continuous: draft.continuous },
      };
    case 'reserved':
      return { role, name, powerDb, value: null };
  }
}

function toneFactor(factor: Factor): Factor {
  const isAllowed = factor.counter === 'symbolCell' || factor.counter === 'subcarrier';
  return isAllowed ? factor : { ...factor, counter: 'subcarrier' };
}

/** A new role begins with the value that it usually has. */
export function withRole(draft: InkDraft, role: InkDraft['role']): InkDraft {
  if (role === draft.role) return draft;
  if (role === 'tone') return { ...draft, role, factors: [] };
  if (role === 'pilot' && draft.factors.length === 0) return { ...draft, role, factors: [FIRST_FACTOR] };
  return { ...draft, role };
}

/** A constellation takes the bit map along where both are known together, else the map that knows every one. */
export function withConstellation(draft: InkDraft, constellation: Constellation): InkDraft {
  const bitMap = isMapKnown(constellation, draft.data.bitMap) ? draft.data.bitMap : 'ts38211';
  return { ...draft, data: { ...draft.data, constellation, bitMap } };
}

/** The sequence a kind begins with. */
export function firstSequence(kind: Sequence['kind']): Sequence {
  switch (kind) {
    case 'constant':
    case 'alternating':
      return { kind };
    case 'pn':
      return { kind, stages: 9, taps: [5, 9], seed: 511, inverted: false };
    case 'gold':
      return { kind, cInit: 0, points: 'qpsk' };
    case 'zadoffChu':
      return { kind, length: 63, root: 25, shift: 0 };
    case 'newman':
    case 'schroeder':
      return { kind, count: 64 };
    case 'listed':
      return { kind, points: [[1, 0]] };
  }
}
