import type { Right, Role } from '@/lib/contracts/common';

/** The one table of rights. A person's rights are the union over their roles; a person without a role has none. */
const rightsOfRole: Record<Role, readonly Right[]> = {
  author: [
    'readWaveforms',
    'saveWaveforms',
    'readEditions',
    'makeEditionPacks',
    'makeDraftPacks',
    'enterDeviceCards',
    'readBenches',
  ],
  reviewer: [
    'readWaveforms',
    'reviewWaveforms',
    'withdrawEditions',
    'readEditions',
    'makeEditionPacks',
    'enterDeviceCards',
    'readBenches',
  ],
  operator: ['readEditions', 'makeEditionPacks', 'enterDeviceCards', 'readBenches'],
  // By this role alone: editions only, no drafts.
  admin: [
    'withdrawEditions',
    'readEditions',
    'makeEditionPacks',
    'enterDeviceCards',
    'readBenches',
    'writeBenches',
    'managePeople',
    'readAudit',
  ],
};

export function rightsOf(roles: readonly Role[]): ReadonlySet<Right> {
  return new Set(roles.flatMap((role) => rightsOfRole[role]));
}
