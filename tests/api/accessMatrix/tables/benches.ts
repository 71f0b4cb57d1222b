import type { Bench } from '@/lib/contracts/benches';
import type { AccessTable } from '../../../helpers/accessMatrix';
import { openBench } from '../../../helpers/documents';
import type { TestServer } from '../../../helpers/testServer';

async function saved(server: TestServer): Promise<Bench> {
  const admin = await server.as('admin');
  return (await admin.post('/api/v1/benches', openBench())).body as Bench;
}

/** All read, admin writes. */
export const benchesAccess: AccessTable = {
  states: { saved },
  requests: {
    listBenches: () => ({}),
    showBench: ({ benchId }: Bench) => ({ params: { benchId } }),
    downloadSidedness: ({ benchId }: Bench) => ({ params: { benchId } }),
    createBench: () => ({ body: openBench() }),
    saveBench: ({ benchId }: Bench) => ({
      params: { benchId },
      query: { afterVersion: 1 },
      body: openBench({ leastHeadroomDb: 1 }),
    }),
  },
  table: `
    endpoint          | state | anonymous | author               | otherAuthor          | reviewer             | operator             | admin
    listBenches       | -     | 401       | 200                  | 200                  | 200                  | 200                  | 200
    showBench         | saved | 401       | 200                  | 200                  | 200                  | 200                  | 200
    createBench       | -     | 401       | 403 action_forbidden | 403 action_forbidden | 403 action_forbidden | 403 action_forbidden | 201
    saveBench         | saved | 401       | 403 action_forbidden | 403 action_forbidden | 403 action_forbidden | 403 action_forbidden | 201
    downloadSidedness | saved | 401       | 200                  | 200                  | 200                  | 200                  | 200
  `,
};
