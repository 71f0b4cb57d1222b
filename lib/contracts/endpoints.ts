import type { Endpoint } from './endpoint';

/** Every endpoint of the API: OpenAPI, the access matrix and the checking thread find them here. A new contract file adds its list. */
export const endpoints: readonly Endpoint[] = [];
