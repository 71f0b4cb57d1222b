import type { Role } from '@/lib/contracts/common';
import type { Deps } from '../../deps.ts';
import { findUserByEmail, insertUser } from '../auth/repo.ts';

/** Invented people, none of them anybody. */
const people: readonly { name: string; email: string; roles: readonly Role[] }[] = [
  { name: 'Ines Okoro', email: 'ines@demo.invalid', roles: ['author'] },
  { name: 'Mira Sand', email: 'mira@demo.invalid', roles: ['reviewer', 'admin'] },
  { name: 'Tomas Vell', email: 'tomas@demo.invalid', roles: ['author', 'operator'] },
  { name: 'Jun Aldane', email: 'jun@demo.invalid', roles: ['operator'] },
  { name: 'Nora Quist', email: 'nora@demo.invalid', roles: ['reviewer'] },
];

/** Makes those who are not there yet. `.invalid` is a name that never resolves (RFC 2606), so no mail ever reaches anybody. */
export function seedDemoPeople({ store, clock, newId }: Deps): void {
  store.write((tx) => {
    for (const { roles, ...person } of people) {
      if (findUserByEmail(tx, person.email)) continue;
      insertUser(tx, { ...person, id: newId(), isDemo: true, createdAtMs: clock.nowMs() }, roles);
    }
  });
}
