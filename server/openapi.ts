import { z } from 'zod';
import { createDocument, type ZodOpenApiOperationObject, type ZodOpenApiPathsObject } from 'zod-openapi';
import { API_PREFIX, DEFAULT_BODY_BYTES, type Endpoint } from '@/lib/contracts/endpoint';
import { endpoints } from '@/lib/contracts/endpoints';
import { problems, problemSchema } from '@/lib/contracts/problem';

/** OpenAPI writes `{name}` where a contract writes `:name`. */
const toPath = (endpoint: Endpoint) => API_PREFIX + endpoint.path.replaceAll(/:(\w+)/g, '{$1}');

/** Only the parts that are there: the library takes an undefined one for a mistake. */
function toParams({ params, query, idempotent }: Endpoint): ZodOpenApiOperationObject['requestParams'] {
  return {
    ...(params instanceof z.ZodObject && { path: params }),
    ...(query instanceof z.ZodObject && { query }),
    ...(idempotent && { header: z.object({ 'Idempotency-Key': z.string().min(8).max(128).optional() }) }),
  };
}

function accessWords({ access }: Endpoint): string {
  if (access === 'anyone') return 'Open to anyone.';
  if (access === 'signedIn') return 'For whoever is signed in.';
  return `Needs the right \`${access}\`.`;
}

function toOperation(endpoint: Endpoint): ZodOpenApiOperationObject {
  const { body, bodyBytesMost = DEFAULT_BODY_BYTES, file, response, status = 200 } = endpoint;
  const limit = body ? ` The body has at most ${bodyBytesMost} bytes, inflated; gzip is taken.` : '';
  const answer = file
    ? { [file.mediaType]: { schema: { type: 'string' as const, format: 'binary' } } }
    : { 'application/json': { schema: response } };
  return {
    operationId: endpoint.name,
    summary: endpoint.summary,
    description: accessWords(endpoint) + limit,
    requestParams: toParams(endpoint),
    ...(body && { requestBody: { required: true, content: { 'application/json': { schema: body } } } }),
    responses: {
      [String(status)]: { description: 'Done', content: answer },
      ...(file?.takesRanges && {
        '206': { description: 'The range that was asked for', content: answer },
        '304': { description: 'As the ETag in If-None-Match' },
      }),
      default: {
        description: 'Refused; `code` says why',
        content: { 'application/problem+json': { schema: problemSchema } },
      },
    },
    ...(endpoint.access === 'anyone' && { security: [] }),
  };
}

const codeList = Object.entries(problems)
  .map(([code, { status, title }]) => `- ${status} \`${code}\`: ${title}`)
  .join('\n');

/** The whole API as OpenAPI 3.1, made from the contracts that the server mounts. */
export function buildOpenApi() {
  const paths: ZodOpenApiPathsObject = {};
  for (const endpoint of endpoints) {
    const path = toPath(endpoint);
    paths[path] = { ...paths[path], [endpoint.method.toLowerCase()]: toOperation(endpoint) };
  }
  return createDocument({
    openapi: '3.1.0',
    info: {
      title: 'Combwright',
      version: '1',
      description: `A change needs an \`Origin\` header that names the installation. Refusals are RFC 9457 problem details with one of these codes:\n\n${codeList}`,
    },
    security: [{ session: [] }],
    paths,
    components: {
      securitySchemes: {
        session: {
          type: 'apiKey',
          in: 'cookie',
          name: 'combwright',
          description: 'Where PUBLIC_URL is https the cookie is called `__Host-combwright`.',
        },
      },
    },
  });
}
