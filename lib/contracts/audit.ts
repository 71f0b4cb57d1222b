import { z } from '@/lib/document/zod';
import { personRefSchema, timeMsSchema, ulidSchema } from './common';
import { defineEndpoint } from './endpoint';

const auditActSchema = z
  .object({
    seq: z.number().int(),
    atMs: timeMsSchema,
    /** Null: the installation itself, or nobody known. */
    person: personRefSchema.nullable(),
    /** `<objectKind>.<what happened>`, e.g. `edition.released`. */
    act: z.string(),
    objectKind: z.string(),
    objectId: z.string().nullable(),
    /** How the object was called then. */
    objectLabel: z.string(),
    detail: z.record(z.string(), z.unknown()),
  })
  .meta({ id: 'AuditAct' });
export type AuditAct = z.infer<typeof auditActSchema>;

export const listAudit = defineEndpoint({
  name: 'listAudit',
  method: 'GET',
  path: '/audit',
  access: 'readAudit',
  summary: 'Who did what, newest first',
  query: z.strictObject({
    fromMs: z.coerce.number().int().optional(),
    toMs: z.coerce.number().int().optional(),
    personId: ulidSchema.optional(),
    /** One act, or the acts on one kind of object (`edition`). */
    act: z.string().max(60).optional(),
    /** The page after this `seq`. */
    before: z.coerce.number().int().optional(),
    limit: z.coerce.number().int().min(1).max(200).default(50),
  }),
  response: z.object({
    acts: z.array(auditActSchema),
    /** Hand it back as `before`; null at the end. */
    nextBefore: z.number().int().nullable(),
    /** Every act in the trail, for the filter. */
    knownActs: z.array(z.string()),
  }),
});

export const auditEndpoints = [listAudit];
