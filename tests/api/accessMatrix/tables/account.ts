import { prepareFirstRun } from '@/server/features/auth/installation';
import type { AccessTable } from '../../../helpers/accessMatrix';
import { TEST_PASSWORD, type TestServer } from '../../../helpers/testServer';

const password = 'another long password';

async function inviteLink(server: TestServer) {
  const admin = await server.as('admin');
  const answer = await admin.post('/api/v1/people', {
    name: 'Petra Plum',
    email: 'petra@example.org',
    roles: ['operator'],
  });
  return { token: (answer.body as { link: { url: string } }).link.url.split('#')[1] ?? '' };
}

/** Everybody's own matters; what is another's is not there. */
export const accountAccess: AccessTable = {
  states: {
    'real team': () => undefined,
    'people are here': (server) => prepareFirstRun(server.deps),
    'link waits': inviteLink,
    "author's session": async (server) => {
      const author = await server.as('author');
      const { sessions } = (await author.get('/api/v1/account/sessions')).body as { sessions: { sessionId: string }[] };
      return sessions[0];
    },
  },
  requests: {
    getSession: () => ({}),
    signIn: () => ({ body: { email: 'author@example.org', password: TEST_PASSWORD } }),
    signOut: () => ({}),
    listDemoPeople: () => ({}),
    demoSignIn: (_object, server) => ({ body: { personId: server.personId('author') } }),
    firstRun: () => ({ body: { code: 'AAAA', name: 'Fay', email: 'fay@example.org', password } }),
    lookAtLink: ({ token }: { token: string }) => ({ body: { token } }),
    useLink: ({ token }: { token: string }) => ({ body: { token, password } }),
    changeName: () => ({ body: { name: 'New Name' } }),
    changePassword: () => ({ body: { current: TEST_PASSWORD, next: password } }),
    listSessions: () => ({}),
    endSession: ({ sessionId }: { sessionId: string }) => ({ params: { sessionId } }),
    endOtherSessions: () => ({}),
  },
  table: `
    endpoint         | state            | anonymous | author | otherAuthor | reviewer | operator | admin
    getSession       | -                | 200       | 200    | 200         | 200      | 200      | 200
    signIn           | -                | 200       | 200    | 200         | 200      | 200      | 200
    signOut          | -                | 401       | 200    | 200         | 200      | 200      | 200
    listDemoPeople   | real team        | 404       | 404    | 404         | 404      | 404      | 404
    demoSignIn       | real team        | 404       | 404    | 404         | 404      | 404      | 404
    firstRun         | people are here  | 404       | 404    | 404         | 404      | 404      | 404
    lookAtLink       | link waits       | 200       | 200    | 200         | 200      | 200      | 200
    useLink          | link waits       | 200       | 200    | 200         | 200      | 200      | 200
    changeName       | -                | 401       | 200    | 200         | 200      | 200      | 200
    changePassword   | -                | 401       | 200    | 200         | 200      | 200      | 200
    listSessions     | -                | 401       | 200    | 200         | 200      | 200      | 200
    endSession       | author's session | 401       | 200    | 404         | 404      | 404      | 404
    endOtherSessions | -                | 401       | 200    | 200         | 200      | 200      | 200
  `,
};
