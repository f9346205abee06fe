import { z } from 'zod';
import { createdToken, createTokenRequest, personalToken } from '../../shared/people/people.schema.ts';
import { type ApiRoutes, apiRoutes, created, noContent, ok } from '../http/api-routes.ts';
import type { Parts } from '../http/parts.ts';
import { createToken, endToken, readTokens } from './tokens.service.ts';

/** Keys for programs of one's own: never more than the person may do at that moment, and less by their scopes. */
export function tokenRoutes(parts: Parts): ApiRoutes {
  const routes = apiRoutes(parts, 'Tokens');

  routes.add(
    {
      method: 'get',
      path: '/tokens',
      summary: 'One’s own tokens for this firm, newest first',
      access: 'tokens:own',
      responses: { 200: z.strictObject({ items: z.array(personalToken), nextCursor: z.null() }) },
    },
    async ({ actor }) => ok({ items: await readTokens(parts, actor), nextCursor: null }),
  );

  routes.add(
    {
      method: 'post',
      path: '/tokens',
      summary: 'Make a token',
      description: 'The secret is shown in this answer only.',
      access: 'tokens:own',
      body: createTokenRequest,
      responses: { 201: createdToken },
      problems: ['idReused'],
    },
    async ({ actor, body }) => created(await createToken(parts, actor, body)),
  );

  routes.add(
    {
      method: 'delete',
      path: '/tokens/{id}',
      summary: 'Revoke a token at once',
      access: 'tokens:own',
      responses: { 204: null },
    },
    async ({ actor, params }) => {
      await endToken(parts, actor, params.id);
      return noContent();
    },
  );
  return routes;
}
