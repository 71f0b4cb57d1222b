import * as contract from '@/lib/contracts/waveforms';
import type { Deps } from '../../deps.ts';
import type { Figures } from '../../figures/figures.ts';
import type { Mount } from '../../http/mount.ts';
import { listWaveformsTo } from './list.ts';
import { createRevisionReader } from './revisions.ts';
import { createWaveformsService } from './service.ts';
import { showWaveformTo } from './show.ts';

export function mountWaveforms(mount: Mount, deps: Deps, figures: Figures): void {
  const { db } = deps.store;
  const service = createWaveformsService(deps, figures);
  const revisions = createRevisionReader(db, figures);

  mount.json(contract.listWaveforms, ({ actor, query }) => listWaveformsTo(db, actor, figures, query));
  mount.json(contract.createWaveform, (call) =>
    service.create(call.actor, call.body, call.query.sourceRevisionId ?? null, call),
  );
  mount.json(contract.showWaveform, ({ actor, params }) => showWaveformTo(db, actor, params.waveformId));
  mount.json(contract.listRevisions, ({ actor, params, query }) =>
    revisions.list(actor, params.waveformId, query.belowNumber),
  );
  mount.json(contract.saveRevision, (call) =>
    service.save(call.actor, call.params.waveformId, call.query.parentId, call.body, call),
  );
  mount.file(contract.showRevision, async ({ actor, params, response }) => {
    const text = await revisions.opened(actor, params.revisionId);
    response.setHeader('Cache-Control', 'no-store');
    response.type('application/json').send(text);
  });
  mount.json(contract.showRevisionFigures, ({ actor, params }) => revisions.figures(actor, params.revisionId));
  mount.file(contract.exportDocument, async ({ actor, params, response }) => {
    const { fileName, text } = await revisions.exported(actor, params.revisionId);
    response.setHeader('Cache-Control', 'private, no-cache');
    response.setHeader('Content-Disposition', `attachment; filename="${fileName}"`);
    response.type('application/json').send(text);
  });
}
