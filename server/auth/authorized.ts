import type { Right } from '@/lib/contracts/common';
import { DomainError } from '../problem.ts';
import { may, type Actor } from './actor.ts';

declare const authorizedBrand: unique symbol;

/** A value that a permission check has let through. Only the functions here make one, so a repo that asks for it cannot be reached unchecked. */
export type Authorized<T> = T & { readonly [authorizedBrand]: true };

/** What may not be seen is not there: undefined, or a missing right, or `visible` false answer not_found alike. */
export function authorizeRead<T extends object>(
  actor: Actor,
  right: Right,
  value: T | undefined | null,
  visible: (value: T) => boolean = () => true,
): Authorized<T> {
  if (value === undefined || value === null || !may(actor, right) || !visible(value))
    throw new DomainError('not_found');
  return value as Authorized<T>;
}

/** For an act on something the person already sees. `allowed` is the condition on the object itself (own revision, …). */
export function authorizeAct<T extends object>(
  actor: Actor,
  right: Right,
  value: T,
  allowed: (value: T) => boolean = () => true,
): Authorized<T> {
  if (!may(actor, right) || !allowed(value)) throw new DomainError('action_forbidden');
  return value as Authorized<T>;
}
