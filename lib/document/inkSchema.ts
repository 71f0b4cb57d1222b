import { z } from './zod';
import type { BitMap, Constellation } from '@/lib/synth/index';
import { customIssue } from './issues';
import { sequenceSchema } from './sourceSchema';
import { list, nameText, real, whole } from './schemaParts';

export const constellations = ['bpsk', 'pi2-bpsk', 'qpsk', '16qam', '64qam', '256qam', '1024qam', '4096qam'] as const;
export const bitMaps = ['ts38211', 'ieee80211', 'en300744'] as const;

/** The bit maps that are defined for a constellation. */
export function bitMapsOf(constellation: Constellation): readonly BitMap[] {
  if (constellation === 'pi2-bpsk') return ['ts38211'];
  const also = constellation === 'qpsk' || constellation === '16qam' || constellation === '64qam';
  return also ? bitMaps : ['ts38211', 'ieee80211'];
}

const factor = z
  .strictObject({
    sequence: sequenceSchema,
    counter: z.enum(['cell', 'symbolCell', 'subcarrier', 'symbol']),
    start: whole(-(2 ** 31), 2 ** 31 - 1),
  })
  .meta({ id: 'Factor' });

const dataValue = z
  .strictObject({ constellation: z.enum(constellations), bitMap: z.enum(bitMaps), streamId: z.string() })
  .check((payload) => {
    if (payload.issues.length > 0) return;
    const { constellation, bitMap } = payload.value;
    const allowed = bitMapsOf(constellation);
    if (!allowed.includes(bitMap)) {
      const text = `has no map for ${constellation}: use ${allowed.join(' or ')}`;
      payload.issues.push(customIssue(['bitMap'], text, undefined));
    }
  });

const toneValue = z
  .strictObject({ factors: list(factor, 0, 3), phaseDeg: real(), continuous: z.boolean() })
  .check((payload) => {
    if (payload.issues.length > 0) return;
    payload.value.factors.forEach(({ counter }, at) => {
      if (counter === 'symbolCell' || counter === 'subcarrier') return;
      const text = 'must be symbolCell or subcarrier in a tone: its value is the same in every symbol';
      payload.issues.push(customIssue(['factors', at, 'counter'], text, undefined));
    });
  });

const common = { inkId: z.string(), name: nameText() };
const powerDb = real(-60, 20);

export const inkSchema = z
  .discriminatedUnion('role', [
    z.strictObject({ ...common, role: z.literal('null'), powerDb: real(0, 0), value: z.null() }),
    z.strictObject({ ...common, role: z.literal('reserved'), powerDb, value: z.null() }),
    z.strictObject({ ...common, role: z.literal('data'), powerDb, value: dataValue }),
    z.strictObject({
      ...common,
      role: z.literal('pilot'),
      powerDb,
      value: z.strictObject({ factors: list(factor, 1, 3) }),
    }),
    z.strictObject({ ...common, role: z.literal('tone'), powerDb, value: toneValue }),
  ])
  .meta({ id: 'Ink' });
