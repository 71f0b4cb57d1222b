import * as contract from '@/lib/contracts/reviews';
import type { Deps } from '../../deps.ts';
import type { Events } from '../../events.ts';
import type { Mount } from '../../http/mount.ts';
import { createEditionsService } from './service.ts';

export function mountEditions(mount: Mount, deps: Deps, events: Events): void {
  const service = createEditionsService(deps, events);

  mount.json(contract.showEdition, ({ actor, params }) => service.show(actor, params.waveformId, params.editionNumber));
  mount.json(contract.withdrawEdition, ({ actor, params, body, requestId }) =>
    service.withdraw(actor, params.waveformId, params.editionNumber, body.reason, requestId),
  );
}
