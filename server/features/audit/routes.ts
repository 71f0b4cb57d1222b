import * as contract from '@/lib/contracts/audit';
import type { Deps } from '../../deps.ts';
import type { Mount } from '../../http/mount.ts';
import { createAuditService } from './service.ts';

export function mountAudit(mount: Mount, deps: Deps): void {
  const service = createAuditService(deps);
  mount.json(contract.listAudit, ({ actor, query }) => service.list(actor, query));
}
