import { z } from '@/lib/document/zod';
import { noteSchema, personRefSchema, reasonSchema, timeMsSchema, ulidSchema } from './common';
import { defineEndpoint } from './endpoint';

/** The states a revision can be in; "returned" is a draft with the reviewer's reason. */
export const revisionStateSchema = z.enum(['draft', 'inReview', 'released', 'withdrawn']);
export type RevisionState = z.infer<typeof revisionStateSchema>;

/**
 * A revision's state as a stamp shows it: the word, the edition's number where it has one, and the last transition. `reason` is the author's
 * note (in review), the reviewer's or author's reason (a draft that was returned or taken back) or the reason of a withdrawal.
 */
export const stateStampSchema = z
  .object({
    state: revisionStateSchema,
    editionNumber: z.number().int().positive().nullable(),
    reason: z.string().nullable(),
    /** How a draft came to be one again; null for a draft nobody asked about. */
    cameBack: z.enum(['returned', 'takenBack']).nullable(),
    atMs: timeMsSchema,
    by: personRefSchema,
  })
  .meta({ id: 'StateStamp' });
export type StateStamp = z.infer<typeof stateStampSchema>;

/**
 * Who may release the revision in review. `you` says whether the asking person may, and why not; `people` are all active reviewers whom
 * four eyes do not bar. With nobody in it, `words` says who else is needed.
 */
export const releasableBySchema = z
  .object({
    you: z.enum(['yes', 'ownWork', 'notReviewer']),
    people: z.array(personRefSchema),
    words: z.string().nullable(),
  })
  .meta({ id: 'ReleasableBy' });
export type ReleasableBy = z.infer<typeof releasableBySchema>;

/** A revision a person can be pointed to: its number, who saved it, and when. */
export const revisionPointSchema = z
  .object({
    revisionId: ulidSchema,
    number: z.number().int().positive(),
    savedBy: personRefSchema,
    savedAtMs: timeMsSchema,
  })
  .meta({ id: 'RevisionPoint' });
export type RevisionPoint = z.infer<typeof revisionPointSchema>;

/** The one open request of a waveform. */
export const openReviewSchema = z
  .object({
    revisionId: ulidSchema,
    revisionNumber: z.number().int().positive(),
    note: z.string(),
    askedBy: personRefSchema,
    askedAtMs: timeMsSchema,
    /** The number the edition would get. */
    nextEditionNumber: z.number().int().positive(),
    /** The head, where it was saved after the revision in review; else null. */
    newer: revisionPointSchema.nullable(),
    releasableBy: releasableBySchema,
  })
  .meta({ id: 'OpenReview' });
export type OpenReview = z.infer<typeof openReviewSchema>;

export const editionSchema = z
  .object({
    waveformId: ulidSchema,
    /** 1, 2, 3 … in this waveform; never used again. */
    number: z.number().int().positive(),
    revisionId: ulidSchema,
    revisionNumber: z.number().int().positive(),
    /** Its own title, which a later revision does not change. */
    title: z.string(),
    contentDigest: z.string(),
    documentDigest: z.string(),
    releasedBy: personRefSchema,
    releasedAtMs: timeMsSchema,
    withdrawn: z.object({ by: personRefSchema, atMs: timeMsSchema, reason: z.string() }).nullable(),
  })
  .meta({ id: 'Edition' });
export type Edition = z.infer<typeof editionSchema>;

const waveformParams = z.object({ waveformId: ulidSchema });

/** 409 state_conflict with facts `{ state, openRevisionId? }` where another request is open or the revision is no draft. */
export const askForReview = defineEndpoint({
  name: 'askForReview',
  method: 'POST',
  path: '/waveforms/:waveformId/review',
  access: 'saveWaveforms',
  summary: 'Ask all reviewers for a review of one revision',
  params: waveformParams,
  body: z.strictObject({ revisionId: ulidSchema, note: noteSchema }),
  response: openReviewSchema,
  status: 201,
});

export const showReview = defineEndpoint({
  name: 'showReview',
  method: 'GET',
  path: '/waveforms/:waveformId/review',
  access: 'readWaveforms',
  summary: 'The open request for a review, or null',
  params: waveformParams,
  response: z.object({ openReview: openReviewSchema.nullable() }).meta({ id: 'ReviewAnswer' }),
});

const stampAnswerSchema = z.object({ revisionId: ulidSchema, stamp: stateStampSchema }).meta({ id: 'StampAnswer' });

export const takeBackReview = defineEndpoint({
  name: 'takeBackReview',
  method: 'POST',
  path: '/waveforms/:waveformId/review/take-back',
  access: 'saveWaveforms',
  summary: 'Take the open request back; the revision is a draft again',
  params: waveformParams,
  body: z.strictObject({ revisionId: ulidSchema, reason: reasonSchema }),
  response: stampAnswerSchema,
});

export const returnRevision = defineEndpoint({
  name: 'returnRevision',
  method: 'POST',
  path: '/waveforms/:waveformId/review/return',
  access: 'reviewWaveforms',
  summary: 'Return the revision in review with a reason; it is a draft again',
  params: waveformParams,
  body: z.strictObject({ revisionId: ulidSchema, reason: reasonSchema }),
  response: stampAnswerSchema,
});

/** 403 own_work where four eyes bar the asking person; facts `{ releasableBy }` then says who else is needed. */
export const releaseRevision = defineEndpoint({
  name: 'releaseRevision',
  method: 'POST',
  path: '/waveforms/:waveformId/review/release',
  access: 'reviewWaveforms',
  summary: 'Release the revision in review as the next edition',
  params: waveformParams,
  body: z.strictObject({ revisionId: ulidSchema }),
  response: editionSchema,
  status: 201,
});

const editionParams = waveformParams.extend({ editionNumber: z.coerce.number().int().min(1).max(1_000_000) });

export const showEdition = defineEndpoint({
  name: 'showEdition',
  method: 'GET',
  path: '/waveforms/:waveformId/editions/:editionNumber',
  access: 'readEditions',
  summary: 'One edition, withdrawn or not',
  params: editionParams,
  response: editionSchema,
});

export const withdrawEdition = defineEndpoint({
  name: 'withdrawEdition',
  method: 'POST',
  path: '/waveforms/:waveformId/editions/:editionNumber/withdraw',
  access: 'withdrawEditions',
  summary: 'Withdraw an edition for ever, with a reason',
  params: editionParams,
  body: z.strictObject({ reason: reasonSchema }),
  response: editionSchema,
});

export const reviewEndpoints = [
  askForReview,
  showReview,
  takeBackReview,
  returnRevision,
  releaseRevision,
  showEdition,
  withdrawEdition,
] as const;
