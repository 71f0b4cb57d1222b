import { z } from '@/lib/document/zod';
import { wireBenchProfileSchema } from './benches';
import { digestSchema, personRefSchema, timeMsSchema, ulidSchema } from './common';
import { defineEndpoint } from './endpoint';

const db = z.number().nullable();

/** Levels of the rendered and read-back file: dB to full scale, 0 dBFS the RMS magnitude of a complex tone with |x| = F. */
export const packLevelsSchema = z
  .object({
    fileRmsDbfs: db,
    activeRmsDbfs: db,
    renderedPeakDbfs: db,
    reconstructedPeakDbfs: db,
    saturatedComponents: z.number().int().nullable(),
  })
  .meta({ id: 'PackLevels' });

/** What the author means at the device, or what somebody entered at the bench for another one. */
export const deviceIntentSchema = z
  .strictObject({
    outputRmsDbm: z.number().min(-200).max(100).nullable(),
    lossDb: z.number().min(0).max(200),
    devicePeakLimitDbm: z.number().min(-200).max(100).nullable(),
    deviceMeanLimitDbm: z.number().min(-200).max(100).nullable(),
    levelToleranceDb: z.number().min(0).max(20),
  })
  .meta({ id: 'DeviceIntent' });
export type DeviceIntent = z.infer<typeof deviceIntentSchema>;

const readingSchema = z.object({
  means: z.enum(['fileRms', 'activeRms', 'fullScaleTone']),
  words: z.string(),
  peakNowDbm: db,
  meanNowDbm: db,
  peakWithoutAttenuatorDbm: db,
  highestSettingDbm: db,
});

export const levelCardSchema = z
  .object({
    settingDbm: db,
    settingWords: z.string(),
    levelMeans: z.enum(['fileRms', 'activeRms', 'fullScaleTone', 'unknown']),
    highestSettingDbm: db,
    readings: z.array(readingSchema),
    peakNowDbm: db,
    meanNowDbm: db,
    peakWithoutAttenuatorDbm: db,
    peakLimitDbm: db,
    meanLimitDbm: db,
    peakLeftDb: db,
    meanLeftDb: db,
    lossDb: z.number(),
    levelToleranceDb: z.number(),
    peakDbfs: db,
    activeRmsDbfs: db,
    fileRmsDbfs: db,
    sampleClockHz: z.number(),
    verdict: z.enum(['inside', 'over', 'noLimit', 'unknown']),
    sentence: z.string(),
  })
  .meta({ id: 'LevelCard' });

export const cautionSchema = z
  .object({ number: z.number().int().min(1).max(11), text: z.string(), severe: z.boolean() })
  .meta({ id: 'Caution' });

/** Limits entered at the bench for another device: kept for ever, newest first; the pack's own card stays as reviewed. */
export const deviceCardSchema = z
  .object({
    cardId: ulidSchema,
    deviceName: z.string(),
    intent: deviceIntentSchema,
    enteredBy: personRefSchema,
    enteredAtMs: timeMsSchema,
    card: levelCardSchema,
    cautions: z.array(cautionSchema),
  })
  .meta({ id: 'DeviceCard' });
export type DeviceCard = z.infer<typeof deviceCardSchema>;

/** The stamp of a pack's revision now; `withdrawn` says why nobody should use it. */
export const packStateSchema = z.enum(['draft', 'released', 'withdrawn']);

export const packSchema = z
  .object({
    packId: ulidSchema,
    waveformId: ulidSchema,
    revisionId: ulidSchema,
    revisionNumber: z.number().int().positive(),
    /** The edition's own title, or the draft revision's. */
    title: z.string(),
    state: packStateSchema,
    editionNumber: z.number().int().positive().nullable(),
    withdrawn: z.object({ by: personRefSchema, atMs: timeMsSchema, reason: z.string() }).nullable(),
    bench: z.object({ benchId: ulidSchema, version: z.number().int().positive(), name: z.string() }),
    fileName: z.string(),
    fileBytes: z.number().int(),
    /** Of the zip, and of the vector within. */
    fileDigest: digestSchema,
    vectorDigest: digestSchema,
    vectorName: z.string(),
    samples: z.number().int(),
    sampleClockHz: z.number(),
    /** What reading the file back gave, dB; null where nothing but silence was compared. */
    evmDb: db,
    madeBy: personRefSchema,
    madeAtMs: timeMsSchema,
  })
  .meta({ id: 'Pack' });
export type Pack = z.infer<typeof packSchema>;

export const packFileSchema = z
  .object({ name: z.string(), role: z.string(), bytes: z.number().int(), digest: digestSchema })
  .meta({ id: 'PackFile' });

export const packDetailSchema = packSchema
  .extend({
    /** When the server made this answer: stands beside the stamp as "fetched". */
    fetchedAtMs: timeMsSchema,
    card: levelCardSchema,
    cautions: z.array(cautionSchema),
    /** Limits of the bench that the file misses and that may be meant (headroom, level, seam …), in the fit's own words. */
    notices: z.array(z.string()),
    deviceCards: z.array(deviceCardSchema),
    /** What the card was computed from, so that a typed setting can be followed at once. */
    levels: packLevelsSchema,
    intent: deviceIntentSchema,
    benchProfile: wireBenchProfileSchema,
    files: z.array(packFileSchema),
    /** manifest.json of the pack as it is. */
    manifest: z.record(z.string(), z.unknown()),
  })
  .meta({ id: 'PackDetail' });
export type PackDetail = z.infer<typeof packDetailSchema>;

export const packJobStateSchema = z.enum(['waiting', 'running', 'done', 'failed', 'cancelled']);
export const packStepSchema = z.enum(['rendering', 'quantizing', 'writing', 'readingBack']);

export const packJobSchema = z
  .object({
    jobId: ulidSchema,
    waveformId: ulidSchema,
    revisionId: ulidSchema,
    title: z.string(),
    editionNumber: z.number().int().positive().nullable(),
    bench: z.object({ benchId: ulidSchema, version: z.number().int().positive(), name: z.string() }),
    state: packJobStateSchema,
    step: packStepSchema.nullable(),
    /** Of the whole job, 0…1. */
    doneRatio: z.number().min(0).max(1),
    /** True after a stop of the server made it begin anew. */
    startedAgain: z.boolean(),
    /** Why it failed or ended, for a person; `code` is one of the API's. */
    problem: z.object({ code: z.string(), detail: z.string() }).nullable(),
    /** Where it is done. */
    packId: ulidSchema.nullable(),
    askedBy: personRefSchema,
    askedAtMs: timeMsSchema,
    endedAtMs: timeMsSchema.nullable(),
  })
  .meta({ id: 'PackJob' });
export type PackJob = z.infer<typeof packJobSchema>;

const packParams = z.object({ packId: ulidSchema });
const jobParams = z.object({ jobId: ulidSchema });

/**
 * An edition's pack for anybody, a draft's for the author who saved it. Equal inputs were rendered already: the job is done at once.
 * Refused before it starts: limit_missed (the finding's words), not_supported_yet, too_large, no_room, too_many (3 waiting jobs a person),
 * edition_withdrawn.
 */
export const makePack = defineEndpoint({
  name: 'makePack',
  method: 'POST',
  path: '/packs',
  access: 'readEditions',
  summary: 'Ask for the pack of one revision and one bench profile',
  body: z.strictObject({
    revisionId: ulidSchema,
    benchId: ulidSchema,
    /** The newest unless given. */
    benchVersion: z.number().int().positive().optional(),
  }),
  idempotent: true,
  response: packJobSchema,
  status: 202,
});

export const listPacks = defineEndpoint({
  name: 'listPacks',
  method: 'GET',
  path: '/packs',
  access: 'readEditions',
  summary: 'Packs that the person may see, newest release first; by part of a title or first digits of a digest',
  query: z.strictObject({
    find: z.string().trim().max(130).optional(),
    waveformId: ulidSchema.optional(),
    revisionId: ulidSchema.optional(),
    benchId: ulidSchema.optional(),
  }),
  response: z.object({ items: z.array(packSchema), more: z.number().int() }).meta({ id: 'PackList' }),
});

export const showPack = defineEndpoint({
  name: 'showPack',
  method: 'GET',
  path: '/packs/:packId',
  access: 'readEditions',
  summary: 'A pack with its level card, cautions, files and manifest',
  params: packParams,
  response: packDetailSchema,
});

/** Ranges, HEAD and If-None-Match work; a withdrawn edition answers 409 edition_withdrawn to all of them. */
export const downloadPack = defineEndpoint({
  name: 'downloadPack',
  method: 'GET',
  path: '/packs/:packId/file',
  access: 'readEditions',
  summary: 'The zip itself',
  params: packParams,
  response: z.unknown(),
  file: { mediaType: 'application/zip', takesRanges: true },
});

export const enterDeviceCard = defineEndpoint({
  name: 'enterDeviceCard',
  method: 'POST',
  path: '/packs/:packId/device-cards',
  access: 'enterDeviceCards',
  summary: 'Enter limits for another device; the pack and its own card stay as they are',
  params: packParams,
  body: z.strictObject({
    deviceName: z.string().trim().min(1, 'must not be empty').max(120, 'has at most 120 characters'),
    intent: deviceIntentSchema,
  }),
  idempotent: true,
  response: deviceCardSchema,
  status: 201,
});

export const listPackJobs = defineEndpoint({
  name: 'listPackJobs',
  method: 'GET',
  path: '/pack-jobs',
  access: 'readEditions',
  summary: 'Jobs that wait or run, and those of the last hours that failed, as far as the person may see them',
  response: z.object({ items: z.array(packJobSchema) }).meta({ id: 'PackJobList' }),
});

export const showPackJob = defineEndpoint({
  name: 'showPackJob',
  method: 'GET',
  path: '/pack-jobs/:jobId',
  access: 'readEditions',
  summary: 'One job with its progress',
  params: jobParams,
  response: packJobSchema,
});

/** The person who asked, and an admin. Cancelling what has ended answers it as it is. */
export const cancelPackJob = defineEndpoint({
  name: 'cancelPackJob',
  method: 'POST',
  path: '/pack-jobs/:jobId/cancel',
  access: 'readEditions',
  summary: 'Cancel a waiting or running job',
  params: jobParams,
  response: packJobSchema,
});

export const packEndpoints = [
  makePack,
  listPacks,
  showPack,
  downloadPack,
  enterDeviceCard,
  listPackJobs,
  showPackJob,
  cancelPackJob,
] as const;
