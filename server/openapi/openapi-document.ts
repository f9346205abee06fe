import { OpenAPIRegistry, OpenApiGeneratorV31, type RouteConfig } from '@asteasolutions/zod-to-openapi';
import { z } from 'zod';
import { id } from '../../shared/lists/list.schema.ts';
import { problemResponse } from '../../shared/problems/problem.schema.ts';
import { PROBLEM_STATUS, type ProblemCode } from '../../shared/problems/problem-codes.ts';
import type { AnswerShape, ApiRoutes, Operation } from '../http/api-routes.ts';

type Responses = RouteConfig['responses'];
const PROBLEM_MEDIA_TYPE = 'application/problem+json';

/**
 * The OpenAPI 3.1 document of what is mounted: built from the same operations, and their schemas are the ones that
 * validate.
 */
export function openApiDocument(
  resources: readonly ApiRoutes[],
  { version, publicUrl, cookieName }: { version: string; publicUrl: string; cookieName: string },
) {
  const registry = new OpenAPIRegistry();
  registry.registerComponent('securitySchemes', 'session', {
    type: 'apiKey',
    in: 'cookie',
    name: cookieName,
    description: 'Set by POST /session. Changing requests also need an Origin of this service.',
  });
  registry.registerComponent('securitySchemes', 'token', {
    type: 'http',
    scheme: 'bearer',
    description: 'A personal token, made under /tokens; never more than its person may do.',
  });
  registry.registerComponent('schemas', 'Problem', z.toJSONSchema(problemResponse) as never);
  for (const { tag, operations } of resources) {
    for (const operation of operations) registry.registerPath(routeOf(operation, tag));
  }
  return new OpenApiGeneratorV31(registry.definitions).generateDocument({
    openapi: '3.1.0',
    info: {
      title: 'Tarewright',
      version,
      description:
        'Units are in the names. Unknown keys are refused; optional fields may be absent or null. Errors are ' +
        'application/problem+json (RFC 9457) with a code, a request id and the place of each error as a JSON Pointer.',
    },
    servers: [{ url: `${publicUrl}/api/v1` }],
    tags: [...new Set(resources.map(({ tag }) => tag))].map((name) => ({ name })),
  });
}

const SECURITY: Record<string, Record<string, string[]>[]> = {
  public: [],
  session: [{ session: [] }],
  signedIn: [{ session: [] }, { token: [] }],
};

function routeOf(operation: Operation, tag: string): RouteConfig {
  const { method, path, summary, description, access, body, query } = operation;
  const names = [...path.matchAll(/\{(\w+)\}/g)].map((match) => String(match[1]));
  return {
    method,
    path,
    tags: [tag],
    summary,
    ...(description ? { description } : {}),
    operationId: operationIdOf(operation),
    security: SECURITY[access] ?? SECURITY.signedIn,
    ...(access in SECURITY ? {} : { 'x-permission': access }),
    request: {
      ...(names.length > 0 ? { params: z.object(Object.fromEntries(names.map((name) => [name, id]))) } : {}),
      ...(query ? { query: query as z.ZodObject } : {}),
      ...(operation.needsVersion
        ? { headers: z.object({ 'if-match': z.string().describe('the version that the caller has seen, quoted') }) }
        : {}),
      ...(body ? { body: { required: true, content: { 'application/json': { schema: body } } } } : {}),
    },
    responses: { ...successes(operation.responses), ...refusals(operation, names.length > 0) },
  };
}

/** `post /units/{id}/full-charges` becomes `postUnitsIdFullCharges`. */
function operationIdOf({ method, path }: Operation): string {
  const words = path.split(/[^A-Za-z0-9]+/).filter(Boolean);
  return method + words.map((word) => word.charAt(0).toUpperCase() + word.slice(1)).join('');
}

function successes(responses: Record<number, AnswerShape>): Responses {
  return Object.fromEntries(
    Object.entries(responses).map(([status, shape]) => {
      if (shape === null) return [status, { description: 'No content' }];
      if ('mediaType' in shape) return [status, { description: shape.description, content: { [shape.mediaType]: {} } }];
      return [status, { description: 'Success', content: { 'application/json': { schema: shape } } }];
    }),
  ) as Responses;
}

/** Every refusal that can come: what follows from access, body, path and query, and what the operation adds. */
function refusals(operation: Operation, hasParams: boolean): Responses {
  const codes = new Set<ProblemCode>(operation.problems);
  if (operation.access !== 'public') codes.add('signInRequired');
  if (operation.access !== 'public' && operation.access !== 'signedIn') codes.add('notPermitted');
  if (operation.method !== 'get' && operation.access !== 'public') codes.add('otherOrigin');
  if (hasParams) codes.add('notFound');
  if (operation.body) {
    for (const code of ['malformedJson', 'bodyTooLarge', 'unsupportedMediaType', 'requestNotValid'] as const) {
      codes.add(code);
    }
  }
  if (operation.query) codes.add('requestNotValid');
  if (operation.needsVersion) codes.add('stale').add('versionRequired');
  codes.add('internal');
  const statuses = [...new Set([...codes].map((code) => PROBLEM_STATUS[code]))].sort();
  return Object.fromEntries(
    statuses.map((status) => [
      status,
      {
        description: [...codes].filter((code) => PROBLEM_STATUS[code] === status).join(', '),
        content: { [PROBLEM_MEDIA_TYPE]: { schema: { $ref: '#/components/schemas/Problem' } } },
      },
    ]),
  ) as Responses;
}
