import type { Right, Role } from '@/lib/contracts/common';
import { DomainError } from '../problem.ts';

/** The signed-in person that a service acts for, read afresh with each request. */
export interface Actor {
  readonly personId: string;
  readonly name: string;
  readonly roles: readonly Role[];
  readonly rights: ReadonlySet<Right>;
  /** The session's public id (not the secret); null for acts of the installation itself. */
  readonly sessionId: string | null;
}

/** True where any of the person's roles carries the right. */
export function may(actor: Actor, right: Right): boolean {
  return actor.rights.has(right);
}

/** Refuses an act that the person can see but not do. */
export function requireRight(actor: Actor, right: Right): void {
  if (!may(actor, right)) throw new DomainError('action_forbidden');
}
