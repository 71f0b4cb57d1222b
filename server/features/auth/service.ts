import { recordAct } from '@/db/audit';
import type { Me, PersonSession } from '@/lib/contracts/auth';
import { roleSchema, type Role } from '@/lib/contracts/common';
import type { Actor } from '../../auth/actor.ts';
import { hashPassword, isPassword } from '../../auth/passwords.ts';
import { rightsOf } from '../../auth/permissions.ts';
import { hashFirstRunCode, hashSecret, isSameHash } from '../../auth/secrets.ts';
import { deleteSession, deleteSessions, listRoles, listSessionRows } from '../../auth/sessionRepo.ts';
import { createTryLimit } from '../../auth/tryLimit.ts';
import { isLoopback } from '../../config.ts';
import type { Deps } from '../../deps.ts';
import { DomainError, invalidField } from '../../problem.ts';
import { findInstallation, hasPeople, setFirstRunCodeHash } from './installationRepo.ts';
import * as repo from './repo.ts';

const TEN_MINUTES_MS = 600_000;
const LINK_GONE = 'This link was used or is too old. Ask for a new one.';

/** Where a try comes from, and which request it is in the log and the audit. */
interface Visit {
  addressKey: string;
  requestId: string;
}

function inOrder(roles: readonly Role[]): Role[] {
  return roleSchema.options.filter((role) => roles.includes(role));
}

export function createAuthService(deps: Deps) {
  const { store, clock } = deps;
  const addressTries = createTryLimit(clock, 10, TEN_MINUTES_MS);
  const accountTries = createTryLimit(clock, 10, TEN_MINUTES_MS);
  const codeTries = createTryLimit(clock, 5, 60_000);

  function toMe(user: repo.UserRow): Me {
    const roles = inOrder(listRoles(store.db, user.id));
    return {
      personId: user.id,
      name: user.name,
      email: user.email,
      roles,
      rights: [...rightsOf(roles)],
      isDemo: user.isDemo,
    };
  }

  function requireUser(userId: string): repo.UserRow {
    const user = repo.findUser(store.db, userId);
    if (!user) throw new DomainError('not_found');
    return user;
  }

  function isDemo(): boolean {
    return findInstallation(store.db)?.kind === 'demo';
  }

  function hasDemoSignIn(isLocal: boolean): boolean {
    return isLocal && isLoopback(deps.config.host) && isDemo();
  }

  function requireDemoSignIn(isLocal: boolean): void {
    if (!hasDemoSignIn(isLocal)) throw new DomainError('not_found');
  }

  function recordSignIn(user: repo.UserRow, visit: Visit): void {
    store.write((tx) =>
      recordAct(tx, {
        atMs: clock.nowMs(),
        personId: user.id,
        act: 'session.begun',
        objectKind: 'session',
        objectId: user.id,
        objectLabel: user.name,
        requestId: visit.requestId,
      }),
    );
  }

  return {
    sessionAnswer(visitor: Actor | null, isLocal: boolean) {
      return {
        me: visitor ? toMe(requireUser(visitor.personId)) : null,
        installation: {
          isDemo: isDemo(),
          hasDemoSignIn: hasDemoSignIn(isLocal),
          needsFirstRun: !isDemo() && !hasPeople(store.db),
        },
      };
    },

    /** One answer and one duration for a wrong password and an account that does not exist. */
    async signIn(email: string, password: string, visit: Visit): Promise<Me> {
      // By address, and by account with address: a stranger elsewhere cannot lock anybody out.
      const giveBackAddress = addressTries.take(visit.addressKey);
      const giveBackAccount = accountTries.take(`${visit.addressKey} ${email}`);
      const user = repo.findUserByEmail(store.db, email);
      const isRight = await isPassword(user?.passwordHash ?? null, password);
      if (!user || !isRight) throw new DomainError('sign_in_refused');
      giveBackAddress();
      giveBackAccount();
      recordSignIn(user, visit);
      return toMe(user);
    },

    listDemoPeople(isLocal: boolean) {
      requireDemoSignIn(isLocal);
      return repo.listDemoUsers(store.db).map((user) => ({
        personId: user.id,
        name: user.name,
        roles: inOrder(listRoles(store.db, user.id)),
      }));
    },

    demoSignIn(personId: string, isLocal: boolean, visit: Visit): Me {
      requireDemoSignIn(isLocal);
      const user = requireUser(personId);
      if (!user.isDemo) throw new DomainError('not_found');
      recordSignIn(user, visit);
      return toMe(user);
    },

    async firstRun(input: { code: string; name: string; email: string; password: string }, visit: Visit): Promise<Me> {
      // Once used the whole way is gone; in all, not by address: the code is one for all.
      const hash = findInstallation(store.db)?.firstRunCodeHash;
      if (!hash || hasPeople(store.db)) throw new DomainError('not_found');
      codeTries.take('all');
      const given = hashFirstRunCode(input.code);
      if (!isSameHash(hash, given)) {
        throw invalidField('/code', 'That is not the code. The server printed it when it started.');
      }
      const passwordHash = await hashPassword(input.password);
      const id = deps.newId();
      store.write((tx) => {
        // Looked at again inside: of two that come at once only one finds the code.
        if (findInstallation(tx)?.firstRunCodeHash !== hash || hasPeople(tx)) throw new DomainError('not_found');
        setFirstRunCodeHash(tx, null);
        const nowMs = clock.nowMs();
        repo.insertUser(tx, { id, email: input.email, name: input.name, passwordHash, createdAtMs: nowMs }, ['admin']);
        recordAct(tx, {
          atMs: nowMs,
          personId: id,
          act: 'person.firstAdmin',
          objectKind: 'person',
          objectId: id,
          objectLabel: input.name,
          requestId: visit.requestId,
        });
      });
      return toMe(requireUser(id));
    },

    lookAtLink(token: string) {
      const link = repo.findWaitingLink(store.db, hashSecret(token), clock.nowMs());
      if (!link) throw new DomainError('not_found', LINK_GONE);
      const user = requireUser(link.userId);
      return {
        kind: link.kind,
        name: user.name,
        email: user.email,
        roles: inOrder(listRoles(store.db, user.id)),
        madeBy: requireUser(link.createdBy).name,
        expiresAtMs: link.expiresAtMs,
      };
    },

    async useLink(token: string, password: string, name: string | undefined, visit: Visit): Promise<Me> {
      const tokenHash = hashSecret(token);
      if (!repo.findWaitingLink(store.db, tokenHash, clock.nowMs())) throw new DomainError('not_found', LINK_GONE);
      const passwordHash = await hashPassword(password);
      const userId = store.write((tx) => {
        const nowMs = clock.nowMs();
        const link = repo.findWaitingLink(tx, tokenHash, nowMs);
        if (!link) throw new DomainError('not_found', LINK_GONE);
        repo.markLinkUsed(tx, link.id, nowMs);
        repo.setPasswordHash(tx, link.userId, passwordHash);
        if (name !== undefined && link.kind === 'invite') repo.setName(tx, link.userId, name);
        deleteSessions(tx, link.userId, null);
        recordAct(tx, {
          atMs: nowMs,
          personId: link.userId,
          act: link.kind === 'invite' ? 'person.joined' : 'person.passwordReset',
          objectKind: 'person',
          objectId: link.userId,
          objectLabel: repo.findUser(tx, link.userId)?.name ?? '',
          requestId: visit.requestId,
        });
        return link.userId;
      });
      return toMe(requireUser(userId));
    },

    changeName(actor: Actor, name: string, requestId: string): Me {
      store.write((tx) => {
        repo.setName(tx, actor.personId, name);
        recordAct(tx, {
          atMs: clock.nowMs(),
          personId: actor.personId,
          act: 'person.renamed',
          objectKind: 'person',
          objectId: actor.personId,
          objectLabel: name,
          detail: { before: actor.name },
          requestId,
        });
      });
      return toMe(requireUser(actor.personId));
    },

    async changePassword(actor: Actor, current: string, next: string, requestId: string): Promise<void> {
      const user = requireUser(actor.personId);
      if (user.passwordHash === null) {
        throw new DomainError('state_conflict', 'An invented person of the demo has no password.');
      }
      const giveBack = accountTries.take(`person ${actor.personId}`);
      if (!(await isPassword(user.passwordHash, current))) throw invalidField('/current', 'This is not your password.');
      giveBack();
      const passwordHash = await hashPassword(next);
      store.write((tx) => {
        repo.setPasswordHash(tx, actor.personId, passwordHash);
        deleteSessions(tx, actor.personId, actor.sessionId);
        recordAct(tx, {
          atMs: clock.nowMs(),
          personId: actor.personId,
          act: 'person.passwordChanged',
          objectKind: 'person',
          objectId: actor.personId,
          objectLabel: user.name,
          requestId,
        });
      });
    },

    listSessions(actor: Actor): PersonSession[] {
      return listSessionRows(store.db, actor.personId, clock.nowMs()).map((row) => ({
        sessionId: row.publicId,
        createdAtMs: row.createdAtMs,
        lastSeenAtMs: row.lastSeenAtMs,
        userAgent: row.userAgent,
        isThisOne: row.publicId === actor.sessionId,
      }));
    },

    endSession(actor: Actor, sessionId: string): void {
      const isThere = store.write((tx) => deleteSession(tx, actor.personId, sessionId));
      if (!isThere) throw new DomainError('not_found');
    },

    endOtherSessions(actor: Actor): void {
      store.write((tx) => deleteSessions(tx, actor.personId, actor.sessionId));
    },
  };
}
