import type { Request } from 'express';
import * as contract from '@/lib/contracts/auth';
import { done } from '@/lib/contracts/common';
import type { Sessions } from '../../auth/sessions.ts';
import { addressKey } from '../../auth/tryLimit.ts';
import type { Deps } from '../../deps.ts';
import type { Mount } from '../../http/mount.ts';
import { isLocalRequest } from '../../http/origin.ts';
import { createAuthService } from './service.ts';

export function mountAuth(mount: Mount, deps: Deps, sessions: Sessions): void {
  const service = createAuthService(deps);
  const visitOf = (call: { request: Request; requestId: string }) => ({
    addressKey: addressKey(call.request.ip),
    requestId: call.requestId,
  });

  mount.json(contract.getSession, ({ visitor, request }) => service.sessionAnswer(visitor, isLocalRequest(request)));

  mount.json(contract.signIn, async (call) => {
    const me = await service.signIn(call.body.email, call.body.password, visitOf(call));
    await sessions.begin(me.personId, call.request, call.response);
    return me;
  });
  mount.json(contract.signOut, async ({ request, response }) => {
    await sessions.end(request, response);
    return done;
  });
  mount.json(contract.listDemoPeople, ({ request }) => ({ people: service.listDemoPeople(isLocalRequest(request)) }));
  mount.json(contract.demoSignIn, async (call) => {
    const me = service.demoSignIn(call.body.personId, isLocalRequest(call.request), visitOf(call));
    await sessions.begin(me.personId, call.request, call.response);
    return me;
  });
  mount.json(contract.firstRun, async (call) => {
    const me = await service.firstRun(call.body, visitOf(call));
    await sessions.begin(me.personId, call.request, call.response);
    return me;
  });
  mount.json(contract.lookAtLink, ({ body }) => service.lookAtLink(body.token));
  mount.json(contract.useLink, async (call) => {
    const me = await service.useLink(call.body.token, call.body.password, call.body.name, visitOf(call));
    await sessions.begin(me.personId, call.request, call.response);
    return me;
  });

  mount.json(contract.changeName, ({ actor, body, requestId }) => service.changeName(actor, body.name, requestId));
  mount.json(contract.changePassword, async ({ actor, body, requestId }) => {
    await service.changePassword(actor, body.current, body.next, requestId);
    return done;
  });
  mount.json(contract.listSessions, ({ actor }) => ({ sessions: service.listSessions(actor) }));
  mount.json(contract.endSession, ({ actor, params }) => {
    service.endSession(actor, params.sessionId);
    return done;
  });
  mount.json(contract.endOtherSessions, ({ actor }) => {
    service.endOtherSessions(actor);
    return done;
  });
}
