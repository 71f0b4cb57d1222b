import * as contract from '@/lib/contracts/benches';
import { showFit } from '@/lib/contracts/fit';
import type { Deps } from '../../deps.ts';
import type { Figures } from '../../figures/figures.ts';
import type { Mount } from '../../http/mount.ts';
import { createFitReader } from './fit.ts';
import { createBenchesService } from './service.ts';
import { sidednessPack } from './sidedness.ts';

export function mountBenches(mount: Mount, deps: Deps, figures: Figures): void {
  const service = createBenchesService(deps);

  mount.json(contract.listBenches, ({ actor }) => ({ items: service.list(actor) }));
  mount.json(contract.showBench, ({ actor, params, query }) => service.show(actor, params.benchId, query.version));
  mount.json(contract.createBench, (call) => service.create(call.actor, call.body, call));
  mount.json(contract.saveBench, (call) =>
    service.save(call.actor, call.params.benchId, call.query.afterVersion, call.body, call),
  );

  mount.file(contract.downloadSidedness, async ({ actor, params, query, response }) => {
    const { profile } = service.show(actor, params.benchId, query.version).shown;
    const { fileName, bytes } = await sidednessPack(profile);
    response.setHeader('Content-Type', 'application/zip');
    response.setHeader('Content-Disposition', `attachment; filename="${fileName}"`);
    response.setHeader('Cache-Control', 'private, no-cache');
    response.send(bytes);
  });

  const fit = createFitReader(deps, figures);
  mount.json(showFit, ({ actor, params, query }) => fit(actor, params.revisionId, query.benchId, query.version));
}
