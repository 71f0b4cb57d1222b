import type { Queryable } from '@/db/openDatabase';
import { withdrawals } from '@/db/schema/waveforms';

export function insertWithdrawal(tx: Queryable, withdrawal: typeof withdrawals.$inferInsert): void {
  tx.insert(withdrawals).values(withdrawal).run();
}
