import { recordAct } from '@/db/audit';
import type { Edition } from '@/lib/contracts/reviews';
import { requireRight, type Actor } from '../../auth/actor.ts';
import type { Deps } from '../../deps.ts';
import type { Events } from '../../events.ts';
import { DomainError } from '../../problem.ts';
import { visibleWaveform } from '../../revisions/access.ts';
import { findEdition } from '../../revisions/editionRepo.ts';
import { toEdition } from '../../revisions/stamps.ts';
import { addTransition } from '../../revisions/stateRepo.ts';
import { insertWithdrawal } from './repo.ts';

export function createEditionsService(deps: Deps, events: Events) {
  const { store, clock } = deps;

  return {
    show(actor: Actor, waveformId: string, number: number): Edition {
      visibleWaveform(store.db, actor, waveformId);
      const edition = findEdition(store.db, waveformId, number);
      if (!edition) throw new DomainError('not_found');
      return toEdition(edition);
    },

    /** For ever, own work too. Whoever is downloading its packs is cut off by the event, which comes once the withdrawal is stored. */
    withdraw(actor: Actor, waveformId: string, number: number, reason: string, requestId: string | null): Edition {
      requireRight(actor, 'withdrawEditions');
      const { edition, event } = store.write((tx) => {
        visibleWaveform(tx, actor, waveformId);
        const found = findEdition(tx, waveformId, number);
        if (!found) throw new DomainError('not_found');
        if (found.withdrawnBy !== null) {
          throw new DomainError('state_conflict', {
            detail: `Edition ${number} was withdrawn before, by ${found.withdrawnByName}.`,
            facts: { state: 'withdrawn' },
          });
        }
        const atMs = clock.nowMs();
        const personId = actor.personId;
        insertWithdrawal(tx, { editionId: found.id, reason, withdrawnBy: personId, withdrawnAtMs: atMs });
        const revisionId = found.revisionId;
        addTransition(tx, { revisionId, state: 'withdrawn', act: 'withdrawn', note: reason, personId, atMs });
        recordAct(tx, {
          atMs,
          personId,
          act: 'edition.withdrawn',
          objectKind: 'edition',
          objectId: found.id,
          objectLabel: `${found.title}, edition ${number}`,
          detail: { waveformId, reason },
          requestId,
        });
        return {
          edition: toEdition(findEdition(tx, waveformId, number)!),
          event: { waveformId, editionId: found.id, revisionId, editionNumber: number, reason },
        };
      });
      events.editionWithdrawn.emit(event);
      return edition;
    },
  };
}
