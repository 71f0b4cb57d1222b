import { hashFirstRunCode, newFirstRunCode } from '../../auth/secrets.ts';
import type { Deps } from '../../deps.ts';
import { findInstallation, hasPeople, insertInstallation, setFirstRunCodeHash } from './installationRepo.ts';

/** What the data directory is, or will be when it is empty: decided by the settings once, kept for ever. */
export function kindOfInstallation(deps: Deps): 'team' | 'demo' {
  return findInstallation(deps.store.db)?.kind ?? (deps.config.wantsDemo ? 'demo' : 'team');
}

export function markInstallation(deps: Deps, kind: 'team' | 'demo'): void {
  deps.store.write((tx) => {
    if (!findInstallation(tx)) insertInstallation(tx, kind, deps.clock.nowMs());
  });
}

/** While nobody is here, each start makes a new code (older ones end) and returns it to be shown once. */
export function prepareFirstRun(deps: Deps): string | null {
  const code = newFirstRunCode();
  const isNeeded = deps.store.write((tx) => {
    const isEmpty = !hasPeople(tx);
    setFirstRunCodeHash(tx, isEmpty ? hashFirstRunCode(code) : null);
    return isEmpty;
  });
  return isNeeded ? code : null;
}
