import { z } from '@/lib/document/zod';
import type { benchProfileSchema } from '@/lib/document/benchSchema';
import { parseBenchProfile } from '@/lib/document/parse';
import { benchWarningSchema } from './benchWarnings';
import { personRefSchema, timeMsSchema, ulidSchema } from './common';
import { defineEndpoint } from './endpoint';

/** Checked by lib/document on both sides. */
export const wireBenchProfileSchema = z
  .custom<z.infer<typeof benchProfileSchema>>(
    (value) =>
      typeof value === 'object' && value !== null && (value as { format?: unknown }).format === 'combwright.bench',
    'is not a bench profile',
  )
  .meta({ id: 'BenchProfile', override: { type: 'object', description: 'A bench profile, version 1.' } });

export const benchVersionSchema = z
  .object({
    version: z.number().int().positive(),
    profileDigest: z.string(),
    savedBy: personRefSchema,
    savedAtMs: timeMsSchema,
    /** Packs made for this version; they keep it. */
    packCount: z.number().int(),
  })
  .meta({ id: 'BenchVersion' });
export type BenchVersion = z.infer<typeof benchVersionSchema>;

export const benchItemSchema = z
  .object({
    benchId: ulidSchema,
    /** Of the newest version. */
    name: z.string(),
    newest: benchVersionSchema,
    profile: wireBenchProfileSchema,
  })
  .meta({ id: 'BenchItem' });
export type BenchItem = z.infer<typeof benchItemSchema>;

export const benchSchema = z
  .object({
    benchId: ulidSchema,
    name: z.string(),
    /** Newest first. */
    versions: z.array(benchVersionSchema),
    shown: z.object({ version: z.number().int().positive(), profile: wireBenchProfileSchema }),
    /** Contradictions of the shown version: it may be saved and used, the words say what will not work. */
    warnings: z.array(benchWarningSchema),
  })
  .meta({ id: 'Bench' });
export type Bench = z.infer<typeof benchSchema>;

const benchParams = z.object({ benchId: ulidSchema });

export const listBenches = defineEndpoint({
  name: 'listBenches',
  method: 'GET',
  path: '/benches',
  access: 'readBenches',
  summary: 'All bench profiles with their newest version, by name',
  response: z.object({ items: z.array(benchItemSchema) }).meta({ id: 'BenchList' }),
});

export const showBench = defineEndpoint({
  name: 'showBench',
  method: 'GET',
  path: '/benches/:benchId',
  access: 'readBenches',
  summary: 'A bench profile: its versions, and one of them whole (the newest unless asked)',
  params: benchParams,
  query: z.strictObject({ version: z.coerce.number().int().positive().optional() }),
  response: benchSchema,
});

export const createBench = defineEndpoint({
  name: 'createBench',
  method: 'POST',
  path: '/benches',
  access: 'writeBenches',
  summary: 'A new bench profile, version 1',
  body: wireBenchProfileSchema,
  checkBody: parseBenchProfile,
  idempotent: true,
  response: benchSchema,
  status: 201,
});

/** 409 stale_revision with facts `{ newest: BenchVersion }` where somebody saved first; an equal profile adds no version. */
export const saveBench = defineEndpoint({
  name: 'saveBench',
  method: 'POST',
  path: '/benches/:benchId/versions',
  access: 'writeBenches',
  summary: 'Save the next version of a bench profile',
  params: benchParams,
  query: z.strictObject({ afterVersion: z.coerce.number().int().positive() }),
  body: wireBenchProfileSchema,
  checkBody: parseBenchProfile,
  idempotent: true,
  response: benchSchema,
  status: 201,
});

/** 422 limit_missed where no clock or length of the profile holds it. */
export const downloadSidedness = defineEndpoint({
  name: 'downloadSidedness',
  method: 'GET',
  path: '/benches/:benchId/sidedness',
  access: 'readBenches',
  summary: 'One tone above the carrier in the layout of a bench profile, as a pack (the newest version unless asked)',
  params: benchParams,
  query: z.strictObject({ version: z.coerce.number().int().positive().optional() }),
  response: z.unknown(),
  file: { mediaType: 'application/zip' },
});

export const benchEndpoints = [listBenches, showBench, createBench, saveBench, downloadSidedness] as const;
