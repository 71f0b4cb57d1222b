import { z } from '@/lib/document/zod';
import { personSessionSchema } from './auth';
import { doneSchema, emailSchema, personNameSchema, roleSchema, timeMsSchema, ulidSchema } from './common';
import { defineEndpoint } from './endpoint';

const linkKindSchema = z.enum(['invite', 'reset']);

export const personSchema = z
  .object({
    personId: ulidSchema,
    name: z.string(),
    email: z.string(),
    roles: z.array(roleSchema),
    isDemo: z.boolean(),
    /** Has a password: an invitation was taken up. */
    hasJoined: z.boolean(),
    lastSeenAtMs: timeMsSchema.nullable(),
    sessionCount: z.number().int(),
    /** A link that waits to be used; the link itself was shown once and is stored nowhere. */
    waitingLink: z.object({ kind: linkKindSchema, madeAtMs: timeMsSchema, expiresAtMs: timeMsSchema }).nullable(),
  })
  .meta({ id: 'Person' });
export type Person = z.infer<typeof personSchema>;

/** Shown once. The token stands in the fragment, which no browser sends and no log holds. */
const shownLinkSchema = z
  .object({ kind: linkKindSchema, url: z.string(), expiresAtMs: timeMsSchema })
  .meta({ id: 'ShownLink' });
export type ShownLink = z.infer<typeof shownLinkSchema>;

/** Each role once, in the order of the roles. */
const rolesSchema = z
  .array(roleSchema)
  .max(4)
  .transform((roles) => roleSchema.options.filter((role) => roles.includes(role)));

const personParams = z.object({ personId: ulidSchema });

export const listPeople = defineEndpoint({
  name: 'listPeople',
  method: 'GET',
  path: '/people',
  access: 'managePeople',
  summary: 'Everybody of the team',
  response: z.object({ people: z.array(personSchema) }),
});

export const invitePerson = defineEndpoint({
  name: 'invitePerson',
  method: 'POST',
  path: '/people',
  access: 'managePeople',
  summary: 'Add a person; answers the one-time link to hand to them',
  body: z.strictObject({ name: personNameSchema, email: emailSchema, roles: rolesSchema }),
  status: 201,
  response: z.object({ person: personSchema, link: shownLinkSchema }),
});

export const setRoles = defineEndpoint({
  name: 'setRoles',
  method: 'PUT',
  path: '/people/:personId/roles',
  access: 'managePeople',
  summary: "Set a person's roles; ends their other sessions",
  params: personParams,
  body: z.strictObject({ roles: rolesSchema }),
  response: personSchema,
});

export const makeLink = defineEndpoint({
  name: 'makeLink',
  method: 'POST',
  path: '/people/:personId/links',
  access: 'managePeople',
  summary: 'A new one-time link: an invitation until they joined, a password reset after; older ones end',
  params: personParams,
  status: 201,
  response: shownLinkSchema,
});

export const takeBackLinks = defineEndpoint({
  name: 'takeBackLinks',
  method: 'DELETE',
  path: '/people/:personId/links',
  access: 'managePeople',
  summary: 'End the links of a person that wait to be used',
  params: personParams,
  response: doneSchema,
});

export const listPersonSessions = defineEndpoint({
  name: 'listPersonSessions',
  method: 'GET',
  path: '/people/:personId/sessions',
  access: 'managePeople',
  summary: "A person's sessions",
  params: personParams,
  response: z.object({ sessions: z.array(personSessionSchema) }),
});

export const endPersonSessions = defineEndpoint({
  name: 'endPersonSessions',
  method: 'DELETE',
  path: '/people/:personId/sessions',
  access: 'managePeople',
  summary: "End a person's sessions (your own but the one in use)",
  params: personParams,
  response: z.object({ endedCount: z.number().int() }),
});

export const peopleEndpoints = [
  listPeople,
  invitePerson,
  setRoles,
  makeLink,
  takeBackLinks,
  listPersonSessions,
  endPersonSessions,
];
