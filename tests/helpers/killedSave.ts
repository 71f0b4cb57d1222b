/** A process that saves one revision and dies by SIGKILL at a named moment. Bundled and started by tests/api/waveforms/killed.test.ts. */
import { pino } from 'pino';
import { ulid } from 'ulid';
import { openDatabase } from '@/db/openDatabase';
import { checkSavedDocument } from '@/lib/contracts/savedDocument';
import { rightsOf } from '@/server/auth/permissions';
import { createLifecycle } from '@/server/lifecycle';
import type { Deps } from '@/server/deps';
import { createWaveformsService } from '@/server/features/waveforms/service';
import type { Figures } from '@/server/figures/figures';

export interface KilledSaveOrder {
  dbFile: string;
  personId: string;
  waveformId: string;
  parentId: string;
  document: unknown;
  key: string;
  dieAt: 'insideTransaction' | 'beforeAnswer';
}

const order = JSON.parse(process.argv[2] ?? '') as KilledSaveOrder;
const die = (moment: KilledSaveOrder['dieAt']) => {
  if (order.dieAt === moment) process.kill(process.pid, 'SIGKILL');
};
const deps = {
  store: openDatabase(order.dbFile),
  clock: { nowMs: () => Date.now() },
  log: pino({ level: 'silent' }),
  lifecycle: createLifecycle(() => undefined),
  newId: () => ulid(),
} as unknown as Deps;
const figures = {
  begin: () => die('insideTransaction'), // content and revision are written, the head is not moved
  want: () => die('beforeAnswer'),
} as unknown as Figures;
const saved = checkSavedDocument(order.document);
if (!saved.ok) throw new Error('The document is not right.');
const actor = {
  personId: order.personId,
  name: 'Ada Author',
  roles: ['author'] as const,
  rights: rightsOf(['author']),
  sessionId: null,
};
void createWaveformsService(deps, figures)
  .save(actor, order.waveformId, order.parentId, saved.value, { requestId: null, idempotencyKey: order.key })
  .then(() => process.exit(0));
