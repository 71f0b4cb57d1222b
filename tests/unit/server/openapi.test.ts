import { readFileSync } from 'node:fs';
import path from 'node:path';
import { endpoints } from '@/lib/contracts/endpoints';
import { buildOpenApi } from '@/server/openapi';

const document = buildOpenApi();

it('openapi.json is what the contracts say; npm run generate makes it anew', () => {
  const stored: unknown = JSON.parse(readFileSync(path.resolve(__dirname, '../../../openapi.json'), 'utf8'));
  expect(stored).toEqual(JSON.parse(JSON.stringify(document)));
});

it('holds every endpoint with its parameters', () => {
  const operations = Object.values(document.paths ?? {}).flatMap((item) => Object.values(item as object)) as {
    operationId: string;
  }[];
  expect(operations.map((operation) => operation.operationId).sort()).toEqual(
    endpoints.map((endpoint) => endpoint.name).sort(),
  );
  for (const [address, item] of Object.entries(document.paths ?? {})) {
    const named = [...address.matchAll(/\{(\w+)\}/g)].map((match) => match[1]);
    for (const operation of Object.values(item as object) as { parameters?: { in: string; name: string }[] }[]) {
      const described = (operation.parameters ?? [])
        .filter((parameter) => parameter.in === 'path')
        .map((parameter) => parameter.name);
      expect(described.sort()).toEqual(named.sort());
    }
  }
});

it('says what a download may answer besides the whole', () => {
  const download = document.paths?.['/api/v1/packs/{packId}/file']?.get as { responses: Record<string, unknown> };
  expect(Object.keys(download.responses)).toEqual(['200', '206', '304', 'default']);
  const exported = document.paths?.['/api/v1/revisions/{revisionId}/document']?.get as typeof download;
  expect(Object.keys(exported.responses)).toEqual(['200', 'default']);
});
