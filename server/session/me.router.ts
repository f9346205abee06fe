import { changePasswordRequest, meResponse, updateMeRequest } from '../../shared/session/session.schema.ts';
import { type ApiRoutes, apiRoutes, noContent, ok } from '../http/api-routes.ts';
import type { Parts } from '../http/parts.ts';
import { changePassword, readMe, updateMe } from './me.service.ts';
import type { SignIn } from './sign-in.ts';

/** One's own account: the same in every firm. */
export function meRoutes(parts: Parts, signIn: SignIn): ApiRoutes {
  const routes = apiRoutes(parts, 'Session');

  routes.add(
    {
      method: 'get',
      path: '/me',
      summary: 'One’s own account',
      access: 'signedIn',
      responses: { 200: meResponse },
    },
    async ({ actor }) => ok(await readMe(parts, actor)),
  );

  routes.add(
    {
      method: 'patch',
      path: '/me',
      summary: 'Change one’s name or what one sees (language, units, theme)',
      description: 'What is not named stays. Nobody else can change it, so no version is asked for.',
      access: 'session',
      body: updateMeRequest,
      responses: { 200: meResponse },
    },
    async ({ actor, body }) => ok(await updateMe(parts, actor, body)),
  );

  routes.add(
    {
      method: 'put',
      path: '/me/password',
      summary: 'Change one’s password',
      description: 'Ends every other session; this one goes on under a new id.',
      access: 'session',
      body: changePasswordRequest,
      responses: { 204: null },
      problems: ['tooManySignIns'],
    },
    async ({ req, actor, body }) => {
      await changePassword(parts, actor, body, req.ip ?? '');
      await signIn.as(req, actor.personId, actor.firmId);
      return noContent();
    },
  );
  return routes;
}
