import { z } from '@/lib/document/zod';

/** The four roles; a person may hold several, and what they may do is the union. */
export const roleSchema = z.enum(['author', 'reviewer', 'operator', 'admin']);
export type Role = z.infer<typeof roleSchema>;

/** What a role lets a person do; the table role -> rights is the server's (server/auth/permissions.ts). */
export const rightSchema = z.enum([
  'readWaveforms', // drafts, fit, history, review
  'saveWaveforms', // create, save, ask for a review, take it back; any waveform
  'reviewWaveforms', // release or return; four eyes come on top
  'withdrawEditions',
  'readEditions', // editions and their packs
  'makeEditionPacks',
  'makeDraftPacks', // of own revisions alone, and only they download them
  'enterDeviceCards',
  'readBenches',
  'writeBenches',
  'managePeople', // people, their roles, links and sessions
  'readAudit',
]);
export type Right = z.infer<typeof rightSchema>;

/** 26 characters of Crockford's base 32, ordered by time. */
export const ulidSchema = z.string().regex(/^[0-9A-HJKMNP-TV-Z]{26}$/, 'is not an id');

export const digestSchema = z.string().regex(/^sha256:[0-9a-f]{64}$/, 'is not a digest');

/** Milliseconds since 1970 in UTC. */
export const timeMsSchema = z.number().int();

export const personNameSchema = z
  .string()
  .trim()
  .min(1, 'must not be empty')
  .max(60, 'has at most 60 characters')
  .regex(/^[^\p{Cc}]*$/u, 'holds a control character');

export const emailSchema = z
  .string()
  .trim()
  .toLowerCase()
  .max(254, 'has at most 254 characters')
  .regex(/^[^\s@]+@[^\s@]+$/, 'is not an e-mail address');

/** A reason, a note: free words of a person. */
export const noteSchema = z.string().trim().max(2000, 'has at most 2000 characters');
export const reasonSchema = noteSchema.min(1, 'needs a reason');

/** How a person appears beside their acts: no address. */
export const personRefSchema = z.object({ personId: ulidSchema, name: z.string() }).meta({ id: 'PersonRef' });

/** The answer of an endpoint that has nothing to say. */
export const doneSchema = z.object({ done: z.literal(true) }).meta({ id: 'Done' });
export const done = { done: true } as const;
