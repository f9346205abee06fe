import { isDeepStrictEqual } from 'node:util';
import type { z } from 'zod';
import type { inviteRequest, SentInvitation } from '../../shared/people/people.schema.ts';
import { inFirm } from '../database/firm-scope.ts';
import type { Actor } from '../http/actor.ts';
import type { Parts } from '../http/parts.ts';
import { Problem, problemOfRefusals } from '../http/problem.ts';
import { instantText } from '../mail/instant-text.ts';
import { requireKnownSites } from '../people/people.service.ts';
import { hashOfSecretToken, newSecretToken } from '../session/secret-token.ts';
import { requireFirm, requirePerson } from '../session/session.repository.ts';
import {
  changeInvitation,
  endOpenInvitations,
  findInvitation,
  type InvitationRow,
  insertInvitation,
  isActiveMember,
  listInvitations,
  presentInvitation,
} from './invitations.repository.ts';

const VALID_MS = 7 * 24 * 3600 * 1000;

export function readInvitations(parts: Parts, actor: Actor, query: { cursor?: string | undefined; limit: number }) {
  return inFirm(parts.dataSource, actor, (manager) => listInvitations(manager, actor.firmId, query));
}

/**
 * Invites somebody into the firm. The mail goes out after the commit; whether the mail server took it is part of the
 * answer. A resend of the same request invites once and mails once.
 * @throws Problem 409 `idReused`; 422 `alreadyMember`, `notKnownHere`
 */
export async function invite(
  parts: Parts,
  actor: Actor,
  request: z.output<typeof inviteRequest>,
): Promise<SentInvitation & { replayed: boolean }> {
  const token = newSecretToken();
  const now = parts.now();
  const { firmId } = actor;
  const made = await inFirm(parts.dataSource, actor, async (manager) => {
    const earlier = await findInvitation(manager, firmId, request.id);
    if (earlier) {
      if (!sameInvitation(earlier, request)) throw new Problem('idReused');
      return { row: earlier, replayed: true };
    }
    if (await isActiveMember(manager, request.email)) {
      throw problemOfRefusals([{ code: 'alreadyMember', path: '/email', given: request.email }]);
    }
    await requireKnownSites(manager, request.siteIds ?? []);
    await endOpenInvitations(manager, { firmId, email: request.email, now });
    const { id, email, name, roles, siteIds = null, locale = null } = request;
    const row = { firmId, id, email, name, roles, siteIds, locale, invitedBy: actor.personId, invitedAt: now };
    const kept = { ...row, tokenHash: hashOfSecretToken(token), expiresAt: new Date(now.getTime() + VALID_MS) };
    await insertInvitation(manager, kept);
    return { row: { ...kept, acceptedAt: null, acceptedBy: null }, replayed: false };
  });
  const mailSent = made.replayed || (await mailInvitation(parts, actor, made.row, token));
  return { ...presentInvitation(made.row), mailSent, replayed: made.replayed };
}

/**
 * Sends the mail again with a new link; the earlier one works no longer.
 * @throws Problem 404; 409 `inUse` when it was accepted
 */
export async function sendInvitationAgain(parts: Parts, actor: Actor, id: string): Promise<SentInvitation> {
  const token = newSecretToken();
  const expiresAt = new Date(parts.now().getTime() + VALID_MS);
  const row = await inFirm(parts.dataSource, actor, async (manager) => {
    const held = await findInvitation(manager, actor.firmId, id);
    if (!held) throw new Problem('notFound');
    if (held.acceptedAt) throw new Problem('inUse');
    await changeInvitation(manager, held, { tokenHash: hashOfSecretToken(token), expiresAt });
    return { ...held, expiresAt };
  });
  const mailSent = await mailInvitation(parts, actor, row, token);
  return { ...presentInvitation(row), mailSent };
}

/** Takes an invitation back: its link works no longer. @throws Problem 404; 409 `inUse` when it was accepted */
export async function withdrawInvitation(parts: Parts, actor: Actor, id: string): Promise<void> {
  await inFirm(parts.dataSource, actor, async (manager) => {
    const held = await findInvitation(manager, actor.firmId, id);
    if (!held) throw new Problem('notFound');
    if (held.acceptedAt) throw new Problem('inUse');
    if (held.expiresAt > parts.now()) await changeInvitation(manager, held, { expiresAt: parts.now() });
  });
}

async function mailInvitation(parts: Parts, actor: Actor, row: InvitationRow, token: string): Promise<boolean> {
  const { firm, inviter } = await inFirm(parts.dataSource, actor, async (manager) => ({
    firm: await requireFirm(manager, actor.firmId),
    inviter: await requirePerson(manager, actor.personId),
  }));
  const locale = row.locale ?? firm.locale;
  const { sent } = await parts.mailer.send({
    kind: 'invitation',
    to: row.email,
    locale,
    values: {
      name: row.name,
      inviter: inviter.name,
      firm: firm.name,
      until: instantText(row.expiresAt, locale),
      link: `${parts.settings.publicUrl}/invitation#token=${token}`,
    },
  });
  return sent;
}

function sameInvitation(row: InvitationRow, request: z.output<typeof inviteRequest>): boolean {
  const { email, name, roles, siteIds, locale } = row;
  const { id: _id, ...asked } = { siteIds: null, locale: null, ...request };
  return isDeepStrictEqual({ email, name, roles, siteIds, locale }, { ...asked, siteIds: asked.siteIds ?? null });
}
