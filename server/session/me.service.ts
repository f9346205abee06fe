import type { z } from 'zod';
import type { Session, updateMeRequest } from '../../shared/session/session.schema.ts';
import { asPerson, inFirm } from '../database/firm-scope.ts';
import type { Actor } from '../http/actor.ts';
import type { Parts } from '../http/parts.ts';
import { Problem, problemOfRefusals } from '../http/problem.ts';
import { replacePassword } from '../people/account.ts';
import { hashPassword } from './password.ts';
import { tellOfChangedPassword } from './password-mail.ts';
import { requireFirm, requirePerson, updatePerson } from './session.repository.ts';
import { presentMe } from './session.service.ts';
import { verifyCredentials } from './sign-in.service.ts';

export function readMe(parts: Parts, { personId, firmId }: Actor): Promise<Session['person']> {
  return inFirm(parts.dataSource, { firmId, personId, siteIds: null }, async (manager) =>
    presentMe(await requirePerson(manager, personId), await requireFirm(manager, firmId)),
  );
}

export async function updateMe(
  parts: Parts,
  actor: Actor,
  change: z.output<typeof updateMeRequest>,
): Promise<Session['person']> {
  const { personId } = actor;
  await asPerson(parts.dataSource, personId, (manager) => updatePerson(manager, personId, change));
  return readMe(parts, actor);
}

/**
 * Changes the password and ends every session. A wrong current one counts as a failed sign-in, so that an open screen
 * is no way to guess it.
 * @throws Problem 422 `currentPasswordWrong`, 429 `tooManySignIns`
 */
export async function changePassword(
  parts: Parts,
  actor: Actor,
  passwords: { currentPassword: string; newPassword: string },
  address: string,
): Promise<void> {
  const me = await readMe(parts, actor);
  try {
    await verifyCredentials(parts, { email: me.email, password: passwords.currentPassword }, address);
  } catch (error) {
    if (error instanceof Problem && error.code === 'wrongCredentials') {
      throw problemOfRefusals([{ code: 'currentPasswordWrong', path: '/currentPassword' }]);
    }
    throw error;
  }
  const passwordHash = await hashPassword(passwords.newPassword);
  await asPerson(parts.dataSource, actor.personId, (manager) =>
    replacePassword(parts, manager, actor.personId, passwordHash),
  );
  tellOfChangedPassword(parts, { name: me.name, email: me.email, locale: me.preferences.locale });
}
