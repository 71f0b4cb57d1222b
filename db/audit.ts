import type { Queryable } from './openDatabase.ts';
import { audit } from './schema/people.ts';

export interface Act {
  atMs: number;
  personId: string | null;
  /** A verb phrase in the past, e.g. `waveform.saved`, `edition.released`, `person.invited`: `<objectKind>.<act>`. */
  act: string;
  objectKind: string;
  objectId: string | null;
  /** How the object is called now. */
  objectLabel: string;
  /** Plain values; never a secret. */
  detail?: Record<string, unknown>;
  requestId?: string | null;
}

/** Writes one audit row; call it in the transaction of the act itself, so that neither stands alone. */
export function recordAct(tx: Queryable, act: Act): void {
  tx.insert(audit)
    .values({
      atMs: act.atMs,
      personId: act.personId,
      act: act.act,
      objectKind: act.objectKind,
      objectId: act.objectId,
      objectLabel: act.objectLabel,
      detailJson: JSON.stringify(act.detail ?? {}),
      requestId: act.requestId ?? null,
    })
    .run();
}
