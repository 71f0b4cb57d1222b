import { z } from './zod';
import { base64Problem } from './base64';
import { customIssue } from './issues';
import { bigArray, greatestCommonDivisor, isRealIn, list, most32, nameText, whole } from './schemaParts';

const register = z
  .strictObject({
    kind: z.literal('pn'),
    stages: whole(2, 31),
    taps: list(whole(1, 31), 1, 8),
    seed: whole(1, most32),
    inverted: z.boolean(),
  })
  .check((payload) => {
    if (payload.issues.length > 0) return;
    const { stages, taps, seed } = payload.value;
    if (taps.some((tap, at) => at > 0 && tap <= taps[at - 1]!)) {
      payload.issues.push(customIssue(['taps'], 'must ascend, each tap once', undefined));
    } else if (taps.at(-1) !== stages) {
      payload.issues.push(customIssue(['taps'], `must end with the number of stages, ${stages}`, undefined));
    }
    const mostSeed = 2 ** stages - 1;
    if (seed > mostSeed) {
      payload.issues.push(customIssue(['seed'], `must be at most ${mostSeed} with ${stages} stages`, undefined));
    }
  });

const zadoffChu = z
  .strictObject({
    kind: z.literal('zadoffChu'),
    length: whole(2, 65536),
    root: whole(1, 65535),
    shift: whole(0, 65535),
  })
  .check((payload) => {
    if (payload.issues.length > 0) return;
    const { length, root, shift } = payload.value;
    if (root >= length)
      payload.issues.push(customIssue(['root'], `must be less than the length, ${length}`, undefined));
    else if (greatestCommonDivisor(root, length) !== 1) {
      const text = `must have no factor in common with the length, ${length}`;
      payload.issues.push(customIssue(['root'], text, undefined));
    }
    if (shift >= length)
      payload.issues.push(customIssue(['shift'], `must be less than the length, ${length}`, undefined));
  });

const mostPoints = 65536;
const listedPoints = bigArray<[number, number][]>(
  (points, issues) => {
    if (points.length < 1) issues.add([], 'must have at least 1 entry');
    if (points.length > mostPoints) {
      issues.add([], `must have at most ${mostPoints} entries, not ${points.length}`);
      return;
    }
    for (let at = 0; at < points.length; at += 1) {
      const point = points[at];
      if (
        !Array.isArray(point) ||
        point.length !== 2 ||
        !isRealIn(point[0], -100, 100) ||
        !isRealIn(point[1], -100, 100)
      ) {
        issues.add([at], 'must be two numbers [re, im] of −100 to 100 (never −0)');
      }
    }
  },
  {
    type: 'array',
    minItems: 1,
    maxItems: mostPoints,
    items: { type: 'array', minItems: 2, maxItems: 2, items: { type: 'number', minimum: -100, maximum: 100 } },
  },
);

const count = whole(1, 2 ** 20);

export const sequenceSchema = z
  .discriminatedUnion('kind', [
    z.strictObject({ kind: z.literal('constant') }),
    z.strictObject({ kind: z.literal('alternating') }),
    register,
    z.strictObject({ kind: z.literal('gold'), cInit: whole(0, most32), points: z.enum(['bpsk', 'qpsk']) }),
    zadoffChu,
    z.strictObject({ kind: z.literal('newman'), count }),
    z.strictObject({ kind: z.literal('schroeder'), count }),
    z.strictObject({ kind: z.literal('listed'), points: listedPoints }),
  ])
  .meta({ id: 'Sequence' });

const mostUploadedBits = 2 ** 23;
const uploaded = z
  .strictObject({
    kind: z.literal('uploaded'),
    name: nameText(),
    bitCount: whole(1, mostUploadedBits),
    base64: z.string(),
  })
  .check((payload) => {
    if (payload.issues.length > 0) return;
    const problem = base64Problem(payload.value.base64, payload.value.bitCount);
    if (problem !== null) payload.issues.push(customIssue(['base64'], problem, undefined));
  });

export const payloadSourceSchema = z
  .discriminatedUnion('kind', [
    register,
    z.strictObject({ kind: z.literal('gold'), cInit: whole(0, most32) }),
    z.strictObject({ kind: z.literal('zeros') }),
    z.strictObject({ kind: z.literal('ones') }),
    z.strictObject({
      kind: z.literal('pattern'),
      bits: z.string().regex(/^[01]{1,4096}$/, 'must be 1 to 4096 digits 0 and 1'),
    }),
    uploaded,
  ])
  .meta({ id: 'PayloadSource' });

export const streamSchema = z
  .strictObject({
    streamId: z.string(),
    name: nameText(),
    source: payloadSourceSchema,
    fill: z.enum(['running', 'anchored']),
    acrossRepeats: z.enum(['restart', 'continue']),
  })
  .meta({ id: 'Stream' });
