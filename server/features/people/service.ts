import { recordAct } from '@/db/audit';
import type { PersonSession } from '@/lib/contracts/auth';
import { roleSchema, type Role } from '@/lib/contracts/common';
import type { Person, ShownLink } from '@/lib/contracts/people';
import type { Queryable } from '@/db/openDatabase';
import { requireRight, type Actor } from '../../auth/actor.ts';
import { authorizeRead, type Authorized } from '../../auth/authorized.ts';
import { hashSecret, newLinkToken } from '../../auth/secrets.ts';
import { countSessionRows, deleteSessions, listSessionRows } from '../../auth/sessionRepo.ts';
import type { Deps } from '../../deps.ts';
import { DomainError, invalidField } from '../../problem.ts';
import * as repo from './repo.ts';

const INVITE_MS = 7 * 24 * 3_600_000;
const RESET_MS = 30 * 60_000;

/** What an act needs besides its subject. */
interface Asked {
  requestId: string;
  /** The address people use, for the link. */
  origin: string;
}

export function createPeopleService(deps: Deps) {
  const { store, clock } = deps;

  function listAll(): Person[] {
    const nowMs = clock.nowMs();
    const [roles, links, counts] = [
      repo.rolesByUser(store.db),
      repo.waitingLinks(store.db, nowMs),
      countSessionRows(store.db, nowMs),
    ];
    return repo.listUsers(store.db).map((user) => {
      const [held, link] = [roles.get(user.id) ?? [], links.get(user.id)];
      return {
        personId: user.id,
        name: user.name,
        email: user.email,
        roles: roleSchema.options.filter((role) => held.includes(role)),
        isDemo: user.isDemo,
        hasJoined: user.isDemo || user.passwordHash !== null,
        lastSeenAtMs: user.lastSeenAtMs,
        sessionCount: counts.get(user.id) ?? 0,
        waitingLink: link ? { kind: link.kind, madeAtMs: link.createdAtMs, expiresAtMs: link.expiresAtMs } : null,
      };
    });
  }

  function describe(personId: string): Person {
    const person = listAll().find((candidate) => candidate.personId === personId);
    if (!person) throw new DomainError('not_found');
    return person;
  }

  function requirePerson(actor: Actor, personId: string): Authorized<repo.UserRow> {
    return authorizeRead(actor, 'managePeople', repo.findUser(store.db, personId));
  }

  function record(
    tx: Queryable,
    actor: Actor,
    act: string,
    user: { id: string; name: string },
    asked: { requestId: string },
    detail = {},
  ) {
    recordAct(tx, {
      atMs: clock.nowMs(),
      personId: actor.personId,
      act,
      objectKind: 'person',
      objectId: user.id,
      objectLabel: user.name,
      detail,
      requestId: asked.requestId,
    });
  }

  /** The older links of the person end: one waits at a time. Only the hash stays here. */
  function issueLink(tx: Queryable, actor: Actor, userId: string, kind: 'invite' | 'reset', asked: Asked): ShownLink {
    const [token, nowMs] = [newLinkToken(), clock.nowMs()];
    const expiresAtMs = nowMs + (kind === 'invite' ? INVITE_MS : RESET_MS);
    repo.revokeLinks(tx, userId, nowMs);
    repo.insertLink(tx, {
      id: deps.newId(),
      tokenHash: hashSecret(token),
      kind,
      userId,
      createdBy: actor.personId,
      createdAtMs: nowMs,
      expiresAtMs,
    });
    const page = kind === 'invite' ? 'accept-invitation' : 'reset-password';
    return { kind, url: `${asked.origin}/${page}#${token}`, expiresAtMs };
  }

  return {
    list(actor: Actor): Person[] {
      requireRight(actor, 'managePeople');
      return listAll();
    },

    invite(actor: Actor, input: { name: string; email: string; roles: Role[] }, asked: Asked) {
      requireRight(actor, 'managePeople');
      const id = deps.newId();
      const link = store.write((tx) => {
        if (repo.isEmailTaken(tx, input.email))
          throw invalidField('/email', 'This address is in the team already.', 'taken');
        const nowMs = clock.nowMs();
        repo.insertUser(tx, { id, email: input.email, name: input.name, createdAtMs: nowMs });
        repo.replaceRoles(tx, id, input.roles, nowMs);
        record(tx, actor, 'person.invited', { id, name: input.name }, asked, {
          roles: input.roles,
          email: input.email,
        });
        return issueLink(tx, actor, id, 'invite', asked);
      });
      return { person: describe(id), link };
    },

    setRoles(actor: Actor, personId: string, roles: Role[], asked: { requestId: string }): Person {
      const user = requirePerson(actor, personId);
      store.write((tx) => {
        const before = repo.rolesByUser(tx).get(personId) ?? [];
        if (roleSchema.options.every((role) => before.includes(role) === roles.includes(role))) return;
        repo.replaceRoles(tx, personId, roles, clock.nowMs());
        if (repo.listAbleAdminIds(tx).length === 0) {
          throw new DomainError(
            'state_conflict',
            personId === actor.personId ? 'There must be one admin: yours stays.' : 'There must be one admin.',
          );
        }
        // Your own session in hand stays; all others were begun with other rights.
        deleteSessions(tx, personId, personId === actor.personId ? actor.sessionId : null);
        record(tx, actor, 'person.rolesSet', user, asked, { before, after: roles });
      });
      return describe(personId);
    },

    makeLink(actor: Actor, personId: string, asked: Asked): ShownLink {
      const user = requirePerson(actor, personId);
      if (user.isDemo) throw new DomainError('state_conflict', 'An invented person of the demo has no password.');
      const kind = user.passwordHash === null ? 'invite' : 'reset';
      return store.write((tx) => {
        record(tx, actor, kind === 'invite' ? 'person.invitedAgain' : 'person.resetLinkMade', user, asked);
        return issueLink(tx, actor, personId, kind, asked);
      });
    },

    takeBackLinks(actor: Actor, personId: string, asked: { requestId: string }): void {
      const user = requirePerson(actor, personId);
      store.write((tx) => {
        if (repo.revokeLinks(tx, personId, clock.nowMs()) > 0) record(tx, actor, 'person.linkTakenBack', user, asked);
      });
    },

    listSessions(actor: Actor, personId: string): PersonSession[] {
      requirePerson(actor, personId);
      return listSessionRows(store.db, personId, clock.nowMs()).map((row) => ({
        sessionId: row.publicId,
        createdAtMs: row.createdAtMs,
        lastSeenAtMs: row.lastSeenAtMs,
        userAgent: row.userAgent,
        isThisOne: row.publicId === actor.sessionId,
      }));
    },

    endSessions(actor: Actor, personId: string, asked: { requestId: string }): number {
      const user = requirePerson(actor, personId);
      return store.write((tx) => {
        const count = deleteSessions(tx, personId, personId === actor.personId ? actor.sessionId : null);
        if (count > 0) record(tx, actor, 'person.sessionsEnded', user, asked, { count });
        return count;
      });
    },
  };
}
