import { Lucia, TimeSpan } from 'lucia';
import type { Request, Response } from 'express';
import type { Deps } from '../deps.ts';
import type { Actor } from './actor.ts';
import { HashedIdAdapter, LONGEST_MS } from './hashedIdAdapter.ts';
import { rightsOf } from './permissions.ts';
import { hashSecret } from './secrets.ts';
import { deleteEndedSessions, listRoles, touchSession } from './sessionRepo.ts';

/** A use is written down at most once a minute: reading a page is no reason for a write each time. */
const TOUCH_MS = 60_000;
const MOST_AGENT_CHARACTERS = 160;

export interface SessionAttributes {
  publicId: string;
  createdAtMs: number;
  lastSeenAtMs: number;
  userAgent: string;
}

interface UserAttributes {
  name: string;
}

function makeLucia(deps: Deps) {
  const isSecure = deps.config.publicOrigin?.startsWith('https:') ?? false;
  return new Lucia(new HashedIdAdapter(deps.store, deps.clock), {
    sessionExpiresIn: new TimeSpan(LONGEST_MS, 'ms'),
    // __Host- binds the cookie to this very host and to https, so no sibling host can plant one.
    sessionCookie: {
      name: isSecure ? '__Host-combwright' : 'combwright',
      attributes: { secure: isSecure, sameSite: 'lax', path: '/' },
    },
    getSessionAttributes: (row: SessionAttributes) => ({ publicId: row.publicId, lastSeenAtMs: row.lastSeenAtMs }),
    getUserAttributes: (row: UserAttributes) => ({ name: row.name }),
  });
}

declare module 'lucia' {
  interface Register {
    Lucia: ReturnType<typeof makeLucia>;
    DatabaseSessionAttributes: SessionAttributes;
    DatabaseUserAttributes: UserAttributes;
  }
}

export interface Sessions {
  /** The person behind the request's cookie, with their roles as they are now; null where there is none. */
  readActor(request: Request, response: Response): Promise<Actor | null>;
  /** Signs in: a new secret each time, and the session that the browser came with ends. */
  begin(userId: string, request: Request, response: Response): Promise<void>;
  /** Signs out. */
  end(request: Request, response: Response): Promise<void>;
}

export function createSessions(deps: Deps): Sessions {
  const lucia = makeLucia(deps);

  async function read(request: Request) {
    const secret = lucia.readSessionCookie(request.headers.cookie ?? '');
    if (!secret) return null;
    const { session, user } = await lucia.validateSession(secret);
    return session ? { secret, session, user } : null;
  }

  return {
    async readActor(request) {
      const found = await read(request);
      if (!found) return null;
      const { secret, session, user } = found;
      const nowMs = deps.clock.nowMs();
      if (Math.abs(nowMs - session.lastSeenAtMs) >= TOUCH_MS) {
        deps.store.write((tx) => touchSession(tx, hashSecret(secret), user.id, nowMs));
      }
      const roles = listRoles(deps.store.db, user.id);
      return { personId: user.id, name: user.name, roles, rights: rightsOf(roles), sessionId: session.publicId };
    },
    async begin(userId, request, response) {
      const before = lucia.readSessionCookie(request.headers.cookie ?? '');
      if (before) await lucia.invalidateSession(before);
      const nowMs = deps.clock.nowMs();
      const session = await lucia.createSession(userId, {
        publicId: deps.newId(),
        createdAtMs: nowMs,
        lastSeenAtMs: nowMs,
        userAgent: (request.get('User-Agent') ?? '').slice(0, MOST_AGENT_CHARACTERS),
      });
      deps.store.write((tx) => {
        touchSession(tx, hashSecret(session.id), userId, nowMs);
        deleteEndedSessions(tx, nowMs);
      });
      response.append('Set-Cookie', lucia.createSessionCookie(session.id).serialize());
    },
    async end(request, response) {
      const found = await read(request);
      if (found) await lucia.invalidateSession(found.secret);
      response.append('Set-Cookie', lucia.createBlankSessionCookie().serialize());
    },
  };
}
