import { pageOf, pageQuery } from '../../shared/lists/list.schema.ts';
import {
  acceptInvitationRequest,
  invitation,
  invitationPreview,
  invitationTokenRequest,
  inviteRequest,
  sentInvitation,
} from '../../shared/people/people.schema.ts';
import { sessionResponse } from '../../shared/session/session.schema.ts';
import { type ApiRoutes, apiRoutes, created, noContent, ok } from '../http/api-routes.ts';
import type { Parts } from '../http/parts.ts';
import { describeSession } from '../session/session.service.ts';
import type { SignIn } from '../session/sign-in.ts';
import { acceptInvitation, previewInvitation } from './acceptance.service.ts';
import { invite, readInvitations, sendInvitationAgain, withdrawInvitation } from './invitations.service.ts';

/** How people come into a firm: a mailed link that works once, for seven days. */
export function invitationRoutes(parts: Parts, signIn: SignIn): ApiRoutes {
  const routes = apiRoutes(parts, 'People');

  routes.add(
    {
      method: 'get',
      path: '/invitations',
      summary: 'Invitations, newest first',
      access: 'people:manage',
      query: pageQuery,
      responses: { 200: pageOf(invitation) },
    },
    async ({ actor, query }) => ok(await readInvitations(parts, actor, query)),
  );

  routes.add(
    {
      method: 'post',
      path: '/invitations',
      summary: 'Invite somebody by mail',
      description: '`mailSent` says whether the mail server took the mail; the invitation stands either way.',
      access: 'people:manage',
      body: inviteRequest,
      responses: { 200: sentInvitation, 201: sentInvitation },
      problems: ['idReused'],
    },
    async ({ actor, body }) => {
      const { replayed, ...sent } = await invite(parts, actor, body);
      return replayed ? ok(sent) : created(sent);
    },
  );

  routes.add(
    {
      method: 'post',
      path: '/invitations/{id}/mail',
      summary: 'Send an invitation again, with a new link',
      access: 'people:manage',
      responses: { 200: sentInvitation },
      problems: ['inUse'],
    },
    async ({ actor, params }) => ok(await sendInvitationAgain(parts, actor, params.id)),
  );

  routes.add(
    {
      method: 'delete',
      path: '/invitations/{id}',
      summary: 'Take an invitation back',
      access: 'people:manage',
      responses: { 204: null },
      problems: ['inUse'],
    },
    async ({ actor, params }) => {
      await withdrawInvitation(parts, actor, params.id);
      return noContent();
    },
  );

  routes.add(
    {
      method: 'post',
      path: '/invitations/preview',
      summary: 'What a mailed link invites to',
      access: 'public',
      body: invitationTokenRequest,
      responses: { 200: invitationPreview },
    },
    async ({ body }) => ok(await previewInvitation(parts, body.token)),
  );

  routes.add(
    {
      method: 'post',
      path: '/invitations/accept',
      summary: 'Join the firm by the mailed link, and sign in',
      description: 'Who has an account already joins with its password; its name stays.',
      access: 'public',
      body: acceptInvitationRequest,
      responses: { 200: sessionResponse },
      problems: ['wrongCredentials', 'tooManySignIns', 'alreadyExists'],
    },
    async ({ req, body }) => {
      const { personId, firmId } = await acceptInvitation(parts, body, req.ip ?? '');
      const user = await signIn.as(req, personId, firmId);
      return ok(await describeSession(parts, { ...user, tokenScopes: null }));
    },
  );
  return routes;
}
