import {
  changePasswordRequest,
  meResponse,
  sessionResponse,
  updateMeRequest,
} from '../../shared/session/session.schema.ts';
import { type ApiRoutes, apiRoutes, ok, versioned } from '../http/api-routes.ts';
import { versionOfIfMatch } from '../http/if-match.ts';
import type { Parts } from '../http/parts.ts';
import { changePassword, readMe, updateMe } from './me.service.ts';
import { describeSession } from './session.service.ts';
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
    async ({ actor }) => versioned(await readMe(parts, actor)),
  );

  routes.add(
    {
      method: 'patch',
      path: '/me',
      summary: 'Change one’s name or what one sees (language, units, theme)',
      access: 'session',
      needsVersion: true,
      body: updateMeRequest,
      responses: { 200: meResponse },
    },
    async ({ req, actor, body }) => versioned(await updateMe(parts, actor, versionOfIfMatch(req), body)),
  );

  routes.add(
    {
      method: 'post',
      path: '/me/password',
      summary: 'Change one’s password',
      description: 'Ends every other session; this one goes on under a new id.',
      access: 'session',
      body: changePasswordRequest,
      responses: { 200: sessionResponse },
      problems: ['tooManySignIns'],
    },
    async ({ req, actor, body }) => {
      await changePassword(parts, actor, body, req.ip ?? '');
      const user = await signIn.as(req, actor.personId, actor.firmId);
      return ok(await describeSession(parts, { ...user, tokenScopes: null }));
    },
  );
  return routes;
}
