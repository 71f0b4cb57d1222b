import * as contract from '@/lib/contracts/packs';
import type { Mount } from '../../http/mount.ts';
import type { Downloads } from './downloads.ts';
import type { PacksService } from './service.ts';

export function mountPacks(mount: Mount, service: PacksService, downloads: Downloads): void {
  mount.json(contract.makePack, (call) => service.make(call.actor, call.body, call));
  mount.json(contract.listPacks, ({ actor, query }) => service.list(actor, query));
  mount.json(contract.showPack, ({ actor, params }) => service.show(actor, params.packId));
  mount.json(contract.enterDeviceCard, (call) =>
    service.enterDeviceCard(call.actor, call.params.packId, call.body, call),
  );
  mount.json(contract.listPackJobs, ({ actor }) => service.listJobs(actor));
  mount.json(contract.showPackJob, ({ actor, params }) => service.showJob(actor, params.jobId));
  mount.json(contract.cancelPackJob, ({ actor, params }) => service.cancelJob(actor, params.jobId));
  mount.file(contract.downloadPack, async ({ actor, params, request, response, requestId }) => {
    const pack = await service.file(actor, params.packId);
    if (await downloads.send(request, response, pack))
      service.noteDownload(actor, params.packId, pack.fileName, requestId);
  });
}
