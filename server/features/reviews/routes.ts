import * as contract from '@/lib/contracts/reviews';
import type { Deps } from '../../deps.ts';
import type { Mount } from '../../http/mount.ts';
import { createReviewsService } from './service.ts';

export function mountReviews(mount: Mount, deps: Deps): void {
  const service = createReviewsService(deps);

  mount.json(contract.showReview, ({ actor, params }) => ({ openReview: service.show(actor, params.waveformId) }));
  mount.json(contract.askForReview, ({ actor, params, body, requestId }) =>
    service.ask(actor, params.waveformId, body.revisionId, body.note, requestId),
  );
  mount.json(contract.takeBackReview, ({ actor, params, body, requestId }) =>
    service.takeBack(actor, params.waveformId, body.revisionId, body.reason, requestId),
  );
  mount.json(contract.returnRevision, ({ actor, params, body, requestId }) =>
    service.returnWithReason(actor, params.waveformId, body.revisionId, body.reason, requestId),
  );
  mount.json(contract.releaseRevision, ({ actor, params, body, requestId }) =>
    service.release(actor, params.waveformId, body.revisionId, requestId),
  );
}
