import type { z } from 'zod';
import type { acceptInvitationRequest, invitationPreview } from '../../shared/people/people.schema.ts';
import { inFirm } from '../database/firm-scope.ts';
import type { Parts } from '../http/parts.ts';
import { problemOfRefusals } from '../http/problem.ts';
import { insertAccount } from '../people/account.ts';
import { addMembership, changeMembership, lockMembership } from '../people/membership.repository.ts';
import { lockFirmHead } from '../people/register-record.ts';
import { hashPassword } from '../session/password.ts';
import { hashOfSecretToken } from '../session/secret-token.ts';
import { findPersonId, requireFirm } from '../session/session.repository.ts';
import { verifyCredentials } from '../session/sign-in.service.ts';
import { changeInvitation, findInvitation, findInvitationByToken, lockInvitation } from './invitations.repository.ts';

const NOBODY = '00000000-0000-0000-0000-000000000000';

function linkNotValid() {
  return problemOfRefusals([{ code: 'linkNotValid', path: '/token' }]);
}

/** The invitation that a link opens, still open at this moment. @throws Problem 422 `linkNotValid` at `/token` */
async function requireOpenInvitation(parts: Parts, token: string) {
  const named = await findInvitationByToken(parts, hashOfSecretToken(token));
  if (!named) throw linkNotValid();
  const { firmId, id } = named;
  const scope = { firmId, personId: NOBODY, siteIds: null };
  const { invitation, firm } = await inFirm(parts.dataSource, scope, async (manager) => ({
    invitation: await findInvitation(manager, firmId, id),
    firm: await requireFirm(manager, firmId),
  }));
  if (!invitation || invitation.acceptedAt || invitation.expiresAt <= parts.now()) throw linkNotValid();
  return { invitation, firm };
}

export async function previewInvitation(parts: Parts, token: string): Promise<z.output<typeof invitationPreview>> {
  const { invitation, firm } = await requireOpenInvitation(parts, token);
  const { email, name } = invitation;
  return { firmName: firm.name, email, name, hasAccount: (await findPersonId(parts, email)) !== null };
}

/**
 * Takes somebody into the firm by a mailed link. Who has an account already joins with it, and proves it with its
 * password: the link alone is no way into an account that exists.
 * @throws Problem 422 `linkNotValid`; 401 and 429 as signing in
 */
export async function acceptInvitation(
  parts: Parts,
  { token, name, password }: z.output<typeof acceptInvitationRequest>,
  address: string,
): Promise<{ personId: string; firmId: string }> {
  const { invitation } = await requireOpenInvitation(parts, token);
  const { firmId, email, roles, siteIds } = invitation;
  const hasAccount = (await findPersonId(parts, email)) !== null;
  const personId = hasAccount ? await verifyCredentials(parts, { email, password }, address) : parts.newId();
  const passwordHash = hasAccount ? null : await hashPassword(password);

  await inFirm(parts.dataSource, { firmId, personId, siteIds: null }, async (manager) => {
    const now = parts.now();
    await lockFirmHead(manager);
    const open = await lockInvitation(manager, firmId, invitation.id);
    if (!open || open.acceptedAt || open.expiresAt <= now) throw linkNotValid();
    if (passwordHash !== null) {
      await insertAccount(parts, manager, {
        id: personId,
        name,
        email,
        passwordHash,
        preferences: preferencesOf(open),
      });
    }
    const held = await lockMembership(manager, firmId, personId);
    const facts = { roles, siteIds, active: true };
    if (held) await changeMembership(parts, manager, held, facts, personId);
    else await addMembership(parts, manager, { firmId, personId, recordedBy: personId, van: null, ...facts });
    await changeInvitation(manager, open, { acceptedAt: now, acceptedBy: personId });
  });
  return { personId, firmId };
}

function preferencesOf({ locale }: { locale: 'en-US' | 'en-GB' | 'es-US' | 'es-ES' | null }) {
  return locale === null ? {} : { locale };
}
