import { insertRoles } from '@/server/features/auth/repo';
import type { Role } from '@/lib/contracts/common';
import type { PersonKey, TestServer } from './testServer';

/** Gives a person of the test server one more role, as an admin would. */
export function grant(server: TestServer, key: PersonKey, role: Role): void {
  server.store.write((tx) => insertRoles(tx, server.personId(key), [role], server.clock.nowMs()));
}
