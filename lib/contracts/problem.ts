import { z } from '@/lib/document/zod';

/**
 * Every expected refusal of the API by its stable code, with the HTTP status that carries it and the title a person reads.
 * Clients branch on the code alone, so a code is never renamed and never changes its meaning.
 */
export const problems = {
  malformed: { status: 400, title: 'The request could not be read.' },
  sign_in_needed: { status: 401, title: 'Sign in first.' },
  sign_in_refused: { status: 401, title: 'E-mail or password is not right.' },
  action_forbidden: { status: 403, title: 'Your roles do not include this.' },
  own_work: { status: 403, title: 'Nobody releases their own work.' },
  origin_refused: { status: 403, title: 'The request came from another site.' },
  not_found: { status: 404, title: 'There is nothing at this address.' },
  stale_revision: { status: 409, title: 'A newer revision exists.' },
  state_conflict: { status: 409, title: 'The state does not allow this.' },
  edition_withdrawn: { status: 409, title: 'The edition was withdrawn.' },
  proof_failed: { status: 409, title: 'The pack failed its proof.' },
  cancelled: { status: 409, title: 'It was cancelled.' },
  too_large: { status: 413, title: 'That is too large.' },
  wrong_type: { status: 415, title: 'The body has the wrong type.' },
  bad_range: { status: 416, title: 'The range lies outside the file.' },
  invalid: { status: 422, title: 'Some values are not right.' },
  limit_missed: { status: 422, title: 'A limit of the bench profile is missed.' },
  not_supported_yet: { status: 422, title: 'This part is not supported yet.' },
  too_many: { status: 429, title: 'Too many tries.' },
  internal: { status: 500, title: 'The server failed.' },
  stopping: { status: 503, title: 'The server is stopping.' },
  no_room: { status: 507, title: 'There is no room left.' },
} as const;

export type ProblemCode = keyof typeof problems;

const problemCodes = Object.keys(problems) as [ProblemCode, ...ProblemCode[]];

/** One wrong value: where it stands (RFC 6901 pointer into the body; `/query/…` and `/params/…` elsewhere) and what is wrong. */
export const issueSchema = z
  .object({ pointer: z.string(), message: z.string(), code: z.string() })
  .meta({ id: 'Issue' });
export type Issue = z.infer<typeof issueSchema>;

/** RFC 9457 problem details with our stable code. `facts` are for the client: see each code's use. */
export const problemSchema = z
  .object({
    type: z.string(),
    title: z.string(),
    status: z.number().int(),
    detail: z.string(),
    instance: z.string(),
    code: z.enum(problemCodes),
    issues: z.array(issueSchema).optional(),
    moreIssues: z.number().int().optional(),
    facts: z.record(z.string(), z.unknown()).optional(),
  })
  .meta({ id: 'Problem' });
export type Problem = z.infer<typeof problemSchema>;
