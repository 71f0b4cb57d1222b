import type { AccessTable } from '../../../helpers/accessMatrix';
import type { TestServer } from '../../../helpers/testServer';

const onOperator = (_object: unknown, server: TestServer) => ({ params: { personId: server.personId('operator') } });

/** Admin alone. What the others ask to see is not there; what they try to do is forbidden. */
export const peopleAccess: AccessTable = {
  states: {},
  requests: {
    listPeople: () => ({}),
    invitePerson: () => ({ body: { name: 'Petra Plum', email: 'petra@example.org', roles: ['operator'] } }),
    setRoles: (object, server) => ({ ...onOperator(object, server), body: { roles: ['operator', 'author'] } }),
    makeLink: onOperator,
    takeBackLinks: onOperator,
    listPersonSessions: onOperator,
    endPersonSessions: onOperator,
    listAudit: () => ({}),
  },
  table: `
    endpoint           | state | anonymous | author               | otherAuthor          | reviewer             | operator             | admin
    listPeople         | -     | 401       | 404                  | 404                  | 404                  | 404                  | 200
    invitePerson       | -     | 401       | 403 action_forbidden | 403 action_forbidden | 403 action_forbidden | 403 action_forbidden | 201
    setRoles           | -     | 401       | 403 action_forbidden | 403 action_forbidden | 403 action_forbidden | 403 action_forbidden | 200
    makeLink           | -     | 401       | 403 action_forbidden | 403 action_forbidden | 403 action_forbidden | 403 action_forbidden | 201
    takeBackLinks      | -     | 401       | 403 action_forbidden | 403 action_forbidden | 403 action_forbidden | 403 action_forbidden | 200
    listPersonSessions | -     | 401       | 404                  | 404                  | 404                  | 404                  | 200
    endPersonSessions  | -     | 401       | 403 action_forbidden | 403 action_forbidden | 403 action_forbidden | 403 action_forbidden | 200
    listAudit          | -     | 401       | 404                  | 404                  | 404                  | 404                  | 200
  `,
};
