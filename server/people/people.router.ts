import { pageOf } from '../../shared/lists/list.schema.ts';
import { listPeopleQuery, person, updatePersonRequest } from '../../shared/people/people.schema.ts';
import { type ApiRoutes, apiRoutes, ok, versioned } from '../http/api-routes.ts';
import { versionOfIfMatch } from '../http/if-match.ts';
import type { Parts } from '../http/parts.ts';
import { readPeople, readPerson, updatePerson } from './people.service.ts';

/** Who works for the firm, and what each may do. People come in by invitation. */
export function peopleRoutes(parts: Parts): ApiRoutes {
  const routes = apiRoutes(parts, 'People');

  routes.add(
    {
      method: 'get',
      path: '/people',
      summary: 'People of the firm, by name',
      access: 'people:read',
      query: listPeopleQuery,
      responses: { 200: pageOf(person) },
    },
    async ({ actor, query }) => ok(await readPeople(parts, actor, query)),
  );

  routes.add(
    {
      method: 'get',
      path: '/people/{id}',
      summary: 'One person',
      access: 'people:read',
      responses: { 200: person },
    },
    async ({ actor, params }) => versioned(await readPerson(parts, actor, params.id)),
  );

  routes.add(
    {
      method: 'patch',
      path: '/people/{id}',
      summary: 'Change what somebody may do, or take them out of the firm',
      description: 'Nobody is deleted: records name who wrote them. The last active owner stays one.',
      access: 'people:manage',
      needsVersion: true,
      body: updatePersonRequest,
      responses: { 200: person },
    },
    async ({ req, actor, params, body }) =>
      versioned(await updatePerson(parts, actor, params.id, versionOfIfMatch(req), body)),
  );
  return routes;
}
