import { z } from '@/lib/document/zod';
import type { waveformDocumentSchema } from '@/lib/document/waveformSchema';
import { personRefSchema, timeMsSchema, ulidSchema } from './common';
import { defineEndpoint, DOCUMENT_BODY_BYTES } from './endpoint';
import { editionSchema, openReviewSchema, revisionPointSchema, revisionStateSchema, stateStampSchema } from './reviews';
import { checkSavedDocument, revisionNumbersSchema, savedDocumentSchema } from './savedDocument';

/** lib/drawing's small picture of a grid: blocks of equal look, fills mixed by area in sixteenths; drawn with the theme's fills. */
export const gridPictureSchema = z
  .object({
    columns: z.number().int(),
    rowCount: z.number().int(),
    styles: z.array(
      z.enum([
        'null',
        'bpsk',
        'pi2bpsk',
        'qpsk',
        'qam16',
        'qam64',
        'qam256',
        'qam1024',
        'qam4096',
        'pilot',
        'tone',
        'reserved',
      ]),
    ),
    looks: z.array(z.array(z.number().int())),
    patterns: z.array(z.array(z.number().int())),
    rows: z.array(z.number().int()),
  })
  .meta({ id: 'GridPicture' });

/** What only a synthesis tells. Levels are of the interpolated frame; null where nothing is sent (an empty grid). */
export const measuredFiguresSchema = z
  .object({
    paprDb: z.number().nullable(),
    worstSymbolPaprDb: z.number().nullable(),
    worstSymbol: z.number().int().nullable(),
    /** Less than all only for a very long file: the figures are then of the first ones. */
    measuredRepeats: z.number().int(),
  })
  .meta({ id: 'MeasuredFigures' });
export type MeasuredFigures = z.infer<typeof measuredFiguresSchema>;

/** `measured` is null while measuring, and for good where `measureFailed` says why. */
export const revisionFiguresSchema = z
  .object({
    numbers: revisionNumbersSchema,
    /** Null for the moment that a large grid takes to be drawn small. */
    picture: gridPictureSchema.nullable(),
    measured: measuredFiguresSchema.nullable(),
    measureFailed: z.string().nullable(),
  })
  .meta({ id: 'RevisionFigures' });
export type RevisionFigures = z.infer<typeof revisionFiguresSchema>;

export const revisionSchema = z
  .object({
    waveformId: ulidSchema,
    revisionId: ulidSchema,
    /** 1, 2, 3 … in this waveform, side revisions included. */
    number: z.number().int().positive(),
    /** In another waveform where this one is a copy or an import. */
    parentId: ulidSchema.nullable(),
    savedBy: personRefSchema,
    savedAtMs: timeMsSchema,
    title: z.string(),
    contentDigest: z.string(),
    intentDigest: z.string(),
    documentDigest: z.string(),
    isHead: z.boolean(),
    /** Kept from a save that came too late; never head. */
    isSide: z.boolean(),
    stamp: stateStampSchema,
  })
  .meta({ id: 'Revision' });
export type Revision = z.infer<typeof revisionSchema>;

/** What the waveform's page and the drawing table need to begin. People who read editions only get `head` null and a title from the newest edition. */
export const waveformSchema = z
  .object({
    waveformId: ulidSchema,
    title: z.string(),
    createdBy: personRefSchema,
    createdAtMs: timeMsSchema,
    /** The revision this waveform was copied from, where the asking person may see it. */
    source: z.object({ waveformId: ulidSchema, revisionId: ulidSchema }).nullable(),
    head: revisionSchema.nullable(),
    /** All of them, newest first, withdrawn ones too. */
    editions: z.array(editionSchema),
    openReview: openReviewSchema.nullable(),
  })
  .meta({ id: 'Waveform' });
export type Waveform = z.infer<typeof waveformSchema>;

export const waveformItemSchema = z
  .object({
    waveformId: ulidSchema,
    title: z.string(),
    /** The revision this row is about: the head, or the newest edition for people who read editions only. */
    revisionId: ulidSchema,
    stamp: stateStampSchema,
    contentDigest: z.string(),
    newestEdition: z
      .object({ number: z.number().int().positive(), revisionId: ulidSchema, contentDigest: z.string() })
      .nullable(),
    figures: revisionFiguresSchema,
    changedBy: personRefSchema,
    changedAtMs: timeMsSchema,
    waitsForYourReview: z.boolean(),
    withdrawnReason: z.string().nullable(),
  })
  .meta({ id: 'WaveformItem' });
export type WaveformItem = z.infer<typeof waveformItemSchema>;

const countsSchema = z.object({
  all: z.number().int(),
  draft: z.number().int(),
  inReview: z.number().int(),
  released: z.number().int(),
  withdrawn: z.number().int(),
});

export const waveformListSchema = z
  .object({
    /** Last changed first. */
    items: z.array(waveformItemSchema),
    /** Over what `mine` and `find` leave, whatever `state` asks. */
    counts: countsSchema,
  })
  .meta({ id: 'WaveformList' });
export type WaveformList = z.infer<typeof waveformListSchema>;

const flag = z.enum(['true', 'false']).transform((value) => value === 'true');

export const listWaveforms = defineEndpoint({
  name: 'listWaveforms',
  method: 'GET',
  path: '/waveforms',
  access: 'readEditions',
  summary: 'The waveforms the person may see',
  query: z.strictObject({
    state: revisionStateSchema.optional(),
    /** Waveforms with a revision saved by the asking person. */
    mine: flag.optional(),
    /** Part of a title, or the first digits (4 or more) of a digest. */
    find: z.string().trim().max(120).optional(),
  }),
  response: waveformListSchema,
});

/** Checked by lib/document where it enters and where it is opened, not by zod on the wire: an 8 MB grid would cost seconds. */
export const wireDocumentSchema = z
  .custom<z.infer<typeof waveformDocumentSchema>>(
    (value) =>
      typeof value === 'object' && value !== null && (value as { format?: unknown }).format === 'combwright.waveform',
    'is not a waveform document',
  )
  .meta({ id: 'WaveformDocument', override: { type: 'object', description: 'A waveform document, version 1.' } });

const waveformParams = z.object({ waveformId: ulidSchema });
const revisionParams = z.object({ revisionId: ulidSchema });

export const createWaveform = defineEndpoint({
  name: 'createWaveform',
  method: 'POST',
  path: '/waveforms',
  access: 'saveWaveforms',
  summary: 'A new waveform from a whole document; a copy or an import names its source',
  query: z.strictObject({ sourceRevisionId: ulidSchema.optional() }),
  body: savedDocumentSchema,
  checkBody: checkSavedDocument,
  bodyBytesMost: DOCUMENT_BODY_BYTES,
  idempotent: true,
  response: waveformSchema,
  status: 201,
});

export const showWaveform = defineEndpoint({
  name: 'showWaveform',
  method: 'GET',
  path: '/waveforms/:waveformId',
  access: 'readEditions',
  summary: 'A waveform with its head, its editions and the open request',
  params: waveformParams,
  response: waveformSchema,
});

export const REVISIONS_MOST = 1000;

export const listRevisions = defineEndpoint({
  name: 'listRevisions',
  method: 'GET',
  path: '/waveforms/:waveformId/revisions',
  access: 'readWaveforms',
  summary: `The newest revisions, newest first, at most ${REVISIONS_MOST}`,
  params: waveformParams,
  query: z.strictObject({ belowNumber: z.coerce.number().int().positive().optional() }),
  response: z.object({ revisions: z.array(revisionSchema), hasOlder: z.boolean() }).meta({ id: 'RevisionList' }),
});

export const saveAnswerSchema = z
  .object({
    revision: revisionSchema,
    /** The document equals its parent: nothing was added, `revision` is the parent. */
    isUnchanged: z.boolean(),
    /** The head, where `revision` is not: somebody saved after it. */
    newer: revisionPointSchema.nullable(),
    openReview: openReviewSchema.nullable(),
  })
  .meta({ id: 'SaveAnswer' });
export type SaveAnswer = z.infer<typeof saveAnswerSchema>;

/** The facts of a 409 stale_revision: what was saved first, and where the late document was kept. */
export const staleFactsSchema = z.object({ newer: revisionPointSchema, kept: revisionPointSchema });
export type StaleFacts = z.infer<typeof staleFactsSchema>;

export const saveRevision = defineEndpoint({
  name: 'saveRevision',
  method: 'POST',
  path: '/waveforms/:waveformId/revisions',
  access: 'saveWaveforms',
  summary: 'Save the whole document as the revision after its parent',
  params: waveformParams,
  query: z.strictObject({ parentId: ulidSchema }),
  body: savedDocumentSchema,
  checkBody: checkSavedDocument,
  bodyBytesMost: DOCUMENT_BODY_BYTES,
  idempotent: true,
  response: saveAnswerSchema,
  status: 201,
});

export const openedRevisionSchema = z
  .object({
    revision: revisionSchema,
    document: wireDocumentSchema,
    figures: revisionFiguresSchema,
    /** The head, where it is another revision and the asking person may see it. */
    newer: revisionPointSchema.nullable(),
  })
  .meta({ id: 'OpenedRevision' });
export type OpenedRevision = z.infer<typeof openedRevisionSchema>;

export const showRevision = defineEndpoint({
  name: 'showRevision',
  method: 'GET',
  path: '/revisions/:revisionId',
  access: 'readEditions',
  summary: 'One revision with its document',
  params: revisionParams,
  response: openedRevisionSchema,
});

/** For pages that wait until measuring ends, and to see whether the head moved, without the document. */
export const showRevisionFigures = defineEndpoint({
  name: 'showRevisionFigures',
  method: 'GET',
  path: '/revisions/:revisionId/figures',
  access: 'readEditions',
  summary: 'The figures of one revision',
  params: revisionParams,
  response: z
    .object({ figures: revisionFiguresSchema, stamp: stateStampSchema, newer: revisionPointSchema.nullable() })
    .meta({ id: 'RevisionFiguresAnswer' }),
});

export const exportDocument = defineEndpoint({
  name: 'exportDocument',
  method: 'GET',
  path: '/revisions/:revisionId/document',
  access: 'readEditions',
  summary: 'The document as one JSON file',
  params: revisionParams,
  response: z.never(),
  file: { mediaType: 'application/json' },
});

export const waveformEndpoints = [
  listWaveforms,
  createWaveform,
  showWaveform,
  listRevisions,
  saveRevision,
  showRevision,
  showRevisionFigures,
  exportDocument,
] as const;
