import type { Deps } from '../../deps.ts';
import { findInstallation, markDemoReady } from '../auth/installationRepo.ts';
import { seedDemoPeople } from './people.ts';

/** Makes the demo team once; a start that was cut half-way goes on where it ended. */
export async function seedDemo(deps: Deps): Promise<void> {
  const { store, clock } = deps;
  if (findInstallation(store.db)?.demoReadyAtMs) return;
  seedDemoPeople(deps);
  store.write((tx) => markDemoReady(tx, clock.nowMs()));
}
