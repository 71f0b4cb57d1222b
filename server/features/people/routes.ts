import type { Request } from 'express';
import { done } from '@/lib/contracts/common';
import * as contract from '@/lib/contracts/people';
import type { Deps } from '../../deps.ts';
import type { Mount } from '../../http/mount.ts';
import { ownOrigin } from '../../http/origin.ts';
import { createPeopleService } from './service.ts';

export function mountPeople(mount: Mount, deps: Deps): void {
  const service = createPeopleService(deps);
  const askedOf = (call: { request: Request; requestId: string }) => ({
    requestId: call.requestId,
    origin: ownOrigin(deps, call.request),
  });

  mount.json(contract.listPeople, ({ actor }) => ({ people: service.list(actor) }));
  mount.json(contract.invitePerson, (call) => service.invite(call.actor, call.body, askedOf(call)));
  mount.json(contract.setRoles, (call) => service.setRoles(call.actor, call.params.personId, call.body.roles, call));
  mount.json(contract.makeLink, (call) => service.makeLink(call.actor, call.params.personId, askedOf(call)));
  mount.json(contract.takeBackLinks, (call) => {
    service.takeBackLinks(call.actor, call.params.personId, call);
    return done;
  });
  mount.json(contract.listPersonSessions, ({ actor, params }) => ({
    sessions: service.listSessions(actor, params.personId),
  }));
  mount.json(contract.endPersonSessions, (call) => ({
    endedCount: service.endSessions(call.actor, call.params.personId, call),
  }));
}
