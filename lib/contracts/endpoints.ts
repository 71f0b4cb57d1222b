import { auditEndpoints } from './audit';
import { authEndpoints } from './auth';
import { benchEndpoints } from './benches';
import type { Endpoint } from './endpoint';
import { fitEndpoints } from './fit';
import { packEndpoints } from './packs';
import { peopleEndpoints } from './people';
import { reviewEndpoints } from './reviews';
import { waveformEndpoints } from './waveforms';

/** Every endpoint of the API: OpenAPI, the access matrix and the checking thread find them here. A new contract file adds its list. */
export const endpoints: readonly Endpoint[] = [
  ...authEndpoints,
  ...peopleEndpoints,
  ...auditEndpoints,
  ...waveformEndpoints,
  ...reviewEndpoints,
  ...benchEndpoints,
  ...fitEndpoints,
  ...packEndpoints,
];
