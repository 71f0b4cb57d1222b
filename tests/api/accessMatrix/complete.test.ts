import { endpoints } from '@/lib/contracts/endpoints';
import { readAccessTable } from '../../helpers/accessMatrix';
import { accountAccess } from './tables/account';
import { benchesAccess } from './tables/benches';
import { packsAccess } from './tables/packs';
import { peopleAccess } from './tables/people';
import { waveformsAccess } from './tables/waveforms';

const tables = [accountAccess, peopleAccess, waveformsAccess, benchesAccess, packsAccess];

it('every endpoint stands in the access matrix', () => {
  const rows = new Set(tables.flatMap((table) => readAccessTable(table).map((row) => row.name)));
  expect(endpoints.map((endpoint) => endpoint.name).filter((name) => !rows.has(name))).toEqual([]);
});

it('endpoint names and addresses are unique', () => {
  expect(new Set(endpoints.map((endpoint) => endpoint.name)).size).toBe(endpoints.length);
  const addresses = endpoints.map(({ method, path }) => `${method} ${path.replaceAll(/:\w+/g, ':')}`);
  expect(new Set(addresses).size).toBe(endpoints.length);
});
