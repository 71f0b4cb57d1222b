import { z } from '@/lib/document/zod';
import { doneSchema, emailSchema, personNameSchema, rightSchema, roleSchema, timeMsSchema, ulidSchema } from './common';
import { defineEndpoint } from './endpoint';

const passwordSchema = z.string().min(12, '12 characters or more').max(200, 'has at most 200 characters');
/** 256 bits in base64url; travels in the fragment of a link and in request bodies, never in a URL's path or query. */
const linkTokenSchema = z.string().max(100);

const meSchema = z
  .object({
    personId: ulidSchema,
    name: z.string(),
    email: z.string(),
    roles: z.array(roleSchema),
    rights: z.array(rightSchema),
    /** An invented person of the demo team: no password to change. */
    isDemo: z.boolean(),
  })
  .meta({ id: 'Me' });
export type Me = z.infer<typeof meSchema>;

const sessionAnswerSchema = z
  .object({
    /** Null: nobody is signed in. */
    me: meSchema.nullable(),
    installation: z.object({
      /** Every page of a demo says so. */
      isDemo: z.boolean(),
      /** Demo people may be signed in with one press, from this address. */
      hasDemoSignIn: z.boolean(),
      /** Nobody is here yet: the first administrator is asked for with the code that the server printed. */
      needsFirstRun: z.boolean(),
    }),
  })
  .meta({ id: 'SessionAnswer' });

/** What every page asks first. Open to anyone, so that a signed-out page is no error. */
export const getSession = defineEndpoint({
  name: 'getSession',
  method: 'GET',
  path: '/session',
  access: 'anyone',
  summary: 'Who is signed in, and what this installation is',
  response: sessionAnswerSchema,
});

export const signIn = defineEndpoint({
  name: 'signIn',
  method: 'POST',
  path: '/auth/sign-in',
  access: 'anyone',
  summary: 'Sign in with e-mail and password',
  body: z.strictObject({ email: emailSchema, password: z.string().min(1, 'must not be empty').max(200) }),
  response: meSchema,
});

export const signOut = defineEndpoint({
  name: 'signOut',
  method: 'POST',
  path: '/auth/sign-out',
  access: 'signedIn',
  summary: 'End this session',
  response: doneSchema,
});

const demoPersonSchema = z
  .object({ personId: ulidSchema, name: z.string(), roles: z.array(roleSchema) })
  .meta({ id: 'DemoPerson' });

export const listDemoPeople = defineEndpoint({
  name: 'listDemoPeople',
  method: 'GET',
  path: '/auth/demo-people',
  access: 'anyone',
  summary: 'The invented people of a demo; not there anywhere else',
  response: z.object({ people: z.array(demoPersonSchema) }),
});

export const demoSignIn = defineEndpoint({
  name: 'demoSignIn',
  method: 'POST',
  path: '/auth/demo-sign-in',
  access: 'anyone',
  summary: 'Sign in as an invented person; not there anywhere but in a demo on this machine',
  body: z.strictObject({ personId: ulidSchema }),
  response: meSchema,
});

export const firstRun = defineEndpoint({
  name: 'firstRun',
  method: 'POST',
  path: '/auth/first-run',
  access: 'anyone',
  summary: 'Make the first administrator with the code that the server printed',
  body: z.strictObject({
    code: z.string().trim().max(100),
    name: personNameSchema,
    email: emailSchema,
    password: passwordSchema,
  }),
  response: meSchema,
});

export const lookAtLink = defineEndpoint({
  name: 'lookAtLink',
  method: 'POST',
  path: '/auth/links/look',
  access: 'anyone',
  summary: 'What a one-time link is for',
  body: z.strictObject({ token: linkTokenSchema }),
  response: z.object({
    kind: z.enum(['invite', 'reset']),
    name: z.string(),
    email: z.string(),
    roles: z.array(roleSchema),
    madeBy: z.string(),
    expiresAtMs: timeMsSchema,
  }),
});

export const useLink = defineEndpoint({
  name: 'useLink',
  method: 'POST',
  path: '/auth/links/use',
  access: 'anyone',
  summary: 'Set a password with a one-time link, and sign in',
  body: z.strictObject({ token: linkTokenSchema, password: passwordSchema, name: personNameSchema.optional() }),
  response: meSchema,
});

export const changeName = defineEndpoint({
  name: 'changeName',
  method: 'PATCH',
  path: '/account',
  access: 'signedIn',
  summary: 'Change your name',
  body: z.strictObject({ name: personNameSchema }),
  response: meSchema,
});

export const changePassword = defineEndpoint({
  name: 'changePassword',
  method: 'POST',
  path: '/account/password',
  access: 'signedIn',
  summary: 'Change your password; ends your other sessions',
  body: z.strictObject({ current: z.string().max(200), next: passwordSchema }),
  response: doneSchema,
});

export const personSessionSchema = z
  .object({
    sessionId: ulidSchema,
    createdAtMs: timeMsSchema,
    lastSeenAtMs: timeMsSchema,
    /** What the browser calls itself, cut. */
    userAgent: z.string(),
    isThisOne: z.boolean(),
  })
  .meta({ id: 'PersonSession' });
export type PersonSession = z.infer<typeof personSessionSchema>;

export const listSessions = defineEndpoint({
  name: 'listSessions',
  method: 'GET',
  path: '/account/sessions',
  access: 'signedIn',
  summary: 'Your sessions',
  response: z.object({ sessions: z.array(personSessionSchema) }),
});

export const endSession = defineEndpoint({
  name: 'endSession',
  method: 'DELETE',
  path: '/account/sessions/:sessionId',
  access: 'signedIn',
  summary: 'End one of your sessions',
  params: z.object({ sessionId: ulidSchema }),
  response: doneSchema,
});

export const endOtherSessions = defineEndpoint({
  name: 'endOtherSessions',
  method: 'DELETE',
  path: '/account/sessions',
  access: 'signedIn',
  summary: 'End all your sessions but this one',
  response: doneSchema,
});

export const authEndpoints = [
  getSession,
  signIn,
  signOut,
  listDemoPeople,
  demoSignIn,
  firstRun,
  lookAtLink,
  useLink,
  changeName,
  changePassword,
  listSessions,
  endSession,
  endOtherSessions,
];
